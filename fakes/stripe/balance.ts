import type Stripe from 'stripe';
import type { World } from './world.ts';

/** One movement in somebody's balance. Amounts in cents; `fee` is taken off `amount`. */
export interface Movement {
  readonly amount: number;
  readonly fee?: number;
  readonly type: Stripe.BalanceTransaction.Type;
  readonly category: string;
  readonly source: string;
  readonly description: string | null;
  /** Seconds; now when left out. */
  readonly availableOn?: number;
}

/** Writes a balance transaction into the books of the platform ('') or of a connected account. */
export function move(world: World, owner: string, movement: Movement): Stripe.BalanceTransaction {
  const now = world.now();
  const fee = movement.fee ?? 0;
  const availableOn = movement.availableOn ?? now;
  const made = {
    id: world.id('txn'),
    object: 'balance_transaction',
    amount: movement.amount,
    available_on: availableOn,
    balance_type: 'payments',
    created: now,
    currency: 'usd',
    description: movement.description,
    exchange_rate: null,
    fee,
    fee_details: fee === 0 ? [] : [{ amount: fee, application: null, currency: 'usd', description: 'Stripe processing fees', type: 'stripe_fee' }],
    net: movement.amount - fee,
    reporting_category: movement.category,
    source: movement.source,
    status: availableOn > now ? 'pending' : 'available',
    type: movement.type,
  } satisfies Stripe.BalanceTransaction;
  world.store.put('balance_transaction', made.id, made, owner);
  return made;
}

/** What an owner has, in cents: what may be used now and what is on its way. */
export function totals(world: World, owner: string): { available: number; pending: number } {
  const now = world.now();
  let available = 0;
  let pending = 0;
  for (const each of world.store.all('balance_transaction', owner)) {
    if (each.available_on <= now) available += each.net;
    else pending += each.net;
  }
  return { available, pending };
}

/** The balance object of an owner. */
export function balanceOf(world: World, owner: string): Stripe.Balance {
  const { available, pending } = totals(world, owner);
  return {
    object: 'balance',
    available: [{ amount: available, currency: 'usd', source_types: { card: available } }],
    livemode: false,
    pending: [{ amount: pending, currency: 'usd', source_types: { card: pending } }],
    ...(owner === '' ? { connect_reserved: [{ amount: 0, currency: 'usd' }] } : {}),
  };
}

/** A balance transaction as it reads now: `pending` until the day it becomes available. */
export const asOfNow = (world: World, kept: Stripe.BalanceTransaction): Stripe.BalanceTransaction => ({
  ...kept,
  status: kept.available_on > world.now() ? 'pending' : 'available',
});

/** The provider's price for a card payment in the United States: 2.9 % and 30 cents, to the nearest cent. */
export const cardFee = (amount: number): number => Math.round((amount * 29) / 1000) + 30;

/** What a card dispute costs the platform, kept when the dispute is lost and when it is won. */
export const DISPUTE_FEE = 1_500;
