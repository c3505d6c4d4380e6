import { totals } from './balance.ts';
import { idOf, type World } from './world.ts';

/** What one owner's balance transactions add up to, in cents. */
export interface OwnerBooks {
  readonly gross: number;
  readonly fees: number;
  readonly net: number;
  readonly available: number;
  readonly pending: number;
}

/** What happened under one transfer group, in cents. */
export interface GroupBooks {
  readonly charged: number;
  readonly refunded: number;
  readonly transferred: number;
  readonly reversed: number;
  readonly disputedAway: number;
  readonly fees: number;
}

export interface Books {
  readonly platform: OwnerBooks;
  readonly accounts: { readonly [id: string]: OwnerBooks };
  readonly groups: { readonly [transferGroup: string]: GroupBooks };
}

function ownerBooks(world: World, owner: string): OwnerBooks {
  const all = world.store.all('balance_transaction', owner);
  const sum = (pick: (each: (typeof all)[number]) => number): number => all.reduce((total, each) => total + pick(each), 0);
  return { gross: sum((each) => each.amount), fees: sum((each) => each.fee), net: sum((each) => each.net), ...totals(world, owner) };
}

/** The stand-in's own books: per owner, and per transfer group for the platform. */
export function books(world: World): Books {
  const groups = new Map<string, { -readonly [K in keyof GroupBooks]: number }>();
  const groupOf = (group: string | null): { -readonly [K in keyof GroupBooks]: number } => {
    const key = group ?? '';
    const found = groups.get(key) ?? { charged: 0, refunded: 0, transferred: 0, reversed: 0, disputedAway: 0, fees: 0 };
    groups.set(key, found);
    return found;
  };
  for (const charge of world.store.all('charge', '')) {
    if (charge.status !== 'succeeded') continue;
    const group = groupOf(charge.transfer_group);
    group.charged += charge.amount;
    group.fees += world.store.get('balance_transaction', idOf(charge.balance_transaction) ?? '')?.fee ?? 0;
  }
  const chargeGroup = (reference: Parameters<typeof idOf>[0]): string | null => world.store.get('charge', idOf(reference) ?? '')?.transfer_group ?? null;
  for (const refund of world.store.all('refund')) if (refund.balance_transaction !== null && refund.status !== 'failed') groupOf(chargeGroup(refund.charge)).refunded += refund.amount;
  for (const dispute of world.store.all('dispute')) {
    const group = groupOf(chargeGroup(dispute.charge));
    for (const movement of dispute.balance_transactions) {
      group.disputedAway -= movement.amount;
      group.fees += movement.fee;
    }
  }
  for (const transfer of world.store.all('transfer')) {
    const group = groupOf(transfer.transfer_group);
    group.transferred += transfer.amount;
    group.reversed += transfer.amount_reversed;
  }
  return {
    platform: ownerBooks(world, ''),
    accounts: Object.fromEntries(world.store.all('account').map((account) => [account.id, ownerBooks(world, account.id)])),
    groups: Object.fromEntries(groups),
  };
}
