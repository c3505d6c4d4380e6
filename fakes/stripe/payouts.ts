import type Stripe from 'stripe';
import { move, totals } from './balance.ts';
import { invalid } from './errors.ts';
import { idOf, type World } from './world.ts';

/** The bank account number whose payouts fail with `no_account`, as documented for test mode (from memory). */
export const BANK_ACCOUNT_THAT_FAILS = '000111111116';

export interface PayoutTerms {
  readonly amount: number;
  readonly automatic: boolean;
  readonly description: string | null;
  readonly metadata: Stripe.Metadata;
}

/** Sends available money from an owner's balance to their bank. */
export function makePayout(world: World, owner: string, terms: PayoutTerms): Stripe.Payout {
  const account = world.store.get('account', owner);
  if (owner !== '' && account?.payouts_enabled !== true) throw invalid('Cannot create payouts: this account has payouts disabled.', 'payouts_not_allowed');
  if (totals(world, owner).available < terms.amount) {
    throw invalid(`You have insufficient funds in your Stripe account for this transfer.`, 'balance_insufficient');
  }
  const id = world.id('po');
  const out = move(world, owner, { amount: -terms.amount, type: 'payout', category: 'payout', source: id, description: 'STRIPE PAYOUT' });
  const made = {
    id,
    object: 'payout',
    amount: terms.amount,
    application_fee: null,
    application_fee_amount: null,
    arrival_date: world.now() + world.options.payoutTakesS,
    automatic: terms.automatic,
    balance_transaction: out.id,
    created: world.now(),
    currency: 'usd',
    description: terms.description,
    destination: account?.external_accounts?.data[0]?.id ?? 'ba_platform',
    failure_balance_transaction: null,
    failure_code: null,
    failure_message: null,
    livemode: false,
    metadata: terms.metadata,
    method: 'standard',
    original_payout: null,
    payout_method: null,
    reconciliation_status: terms.automatic ? 'in_progress' : 'not_applicable',
    reversed_by: null,
    source_type: 'card',
    statement_descriptor: null,
    status: 'pending',
    trace_id: null,
    type: 'bank_account',
  } satisfies Stripe.Payout;
  world.store.put('payout', id, made, owner);
  world.emit('payout.created', made, undefined, owner);
  world.plan('move payout', id, world.options.payoutTakesS);
  return made;
}

/** A payout reaches the bank, or comes back when the bank does not know the account. */
export function movePayout(world: World, id: string): void {
  const payout = world.store.get('payout', id);
  const owner = world.store.ownerOf('payout', id) ?? '';
  if (payout === undefined || payout.status !== 'pending') return;
  const fails = world.store.get('note', `bank of ${owner}`)?.value === BANK_ACCOUNT_THAT_FAILS;
  if (!fails) {
    const paid: Stripe.Payout = { ...payout, status: 'paid', reconciliation_status: payout.automatic ? 'completed' : payout.reconciliation_status };
    world.store.put('payout', id, paid);
    world.emit('payout.paid', paid, undefined, owner);
    return;
  }
  const back = move(world, owner, { amount: payout.amount, type: 'payout_failure', category: 'payout_reversal', source: id, description: 'PAYOUT FAILURE' });
  const failed: Stripe.Payout = {
    ...payout,
    status: 'failed',
    failure_balance_transaction: back.id,
    failure_code: 'no_account',
    failure_message: 'The bank account could not be located.',
  };
  world.store.put('payout', id, failed);
  world.setNote(`bank of ${owner}`, 'errored');
  world.emit('payout.failed', failed, undefined, owner);
}

const DAY_S = 86_400;

/** Once a day, pays out what is available to connected accounts on a daily schedule. */
export function payOutDaily(world: World): void {
  for (const account of world.store.all('account')) {
    if (!account.payouts_enabled || account.settings?.payouts?.schedule.interval !== 'daily') continue;
    if (world.store.get('note', `bank of ${account.id}`)?.value === 'errored') continue;
    // The cheapest question first: this is asked at every call, of every account there is.
    if (world.now() - (account.created ?? 0) < DAY_S) continue;
    const last = Math.max(0, ...world.store.all('payout', account.id).map((payout) => payout.created));
    if (world.now() - last < DAY_S) continue;
    const { available } = totals(world, account.id);
    if (available > 0) makePayout(world, account.id, { amount: available, automatic: true, description: 'STRIPE PAYOUT', metadata: {} });
  }
}

/** The bank account a payout goes to, or null for the platform's own. */
export const destinationOf = (payout: Stripe.Payout): string | null => idOf(payout.destination);
