import type Stripe from 'stripe';
import { move, totals } from './balance.ts';
import { invalid } from './errors.ts';
import { idOf, type World } from './world.ts';

export interface RefundTerms {
  readonly amount: number | undefined;
  readonly reason: 'duplicate' | 'fraudulent' | 'requested_by_customer' | null;
  readonly metadata: Stripe.Metadata;
}

/** Seconds until a slow refund is decided. */
const SLOW_REFUND_S = 2;

/**
 * Refunds a charge in whole or in part. When the platform's balance does not cover it the refund waits
 * (`pending`, `insufficient_funds`) and is made when money comes in. The provider keeps its fee on the charge.
 */
export function refundCharge(world: World, charge: Stripe.Charge, terms: RefundTerms): Stripe.Refund {
  if (charge.status !== 'succeeded') throw invalid(`Charge ${charge.id} has no successful payment to refund.`, 'charge_not_refundable', 'charge');
  if (charge.disputed && isLostOrOpen(world, charge.id)) throw invalid(`Charge ${charge.id} has been charged back; cannot issue a refund.`, 'charge_disputed');
  const left = charge.amount - charge.amount_refunded;
  if (left === 0) throw invalid(`Charge ${charge.id} has already been refunded.`, 'charge_already_refunded');
  const amount = terms.amount ?? left;
  if (amount > left) throw invalid(`Refund amount ($${(amount / 100).toFixed(2)}) is greater than unrefunded amount on charge ($${(left / 100).toFixed(2)})`, undefined, 'amount');

  const behaviour = world.store.get('note', `refunds of ${charge.id}`)?.value ?? takeControl(world);
  const balance = totals(world, '');
  const covered = balance.available + balance.pending >= amount;
  const id = world.id('re');
  const made: Stripe.Refund = {
    id,
    object: 'refund',
    amount,
    balance_transaction: null,
    charge: charge.id,
    created: world.now(),
    currency: 'usd',
    customer: null,
    customer_account: null,
    destination_details: { type: 'card', card: { reference_status: 'pending', reference_type: 'acquirer_reference_number', type: 'refund' } },
    metadata: terms.metadata,
    payment_intent: idOf(charge.payment_intent),
    payment_method: charge.payment_method,
    reason: terms.reason,
    receipt_number: null,
    source_transfer_reversal: null,
    status: 'pending',
    transfer_reversal: null,
  };
  const refunded = charge.amount_refunded + amount;
  const after: Stripe.Charge = { ...charge, amount_refunded: refunded, refunded: refunded === charge.amount };
  world.store.put('charge', charge.id, after);
  const previous = { amount_refunded: charge.amount_refunded, ...(after.refunded ? { refunded: false } : {}) };

  if (!covered) {
    const waiting: Stripe.Refund = { ...made, pending_reason: 'insufficient_funds' };
    world.store.put('refund', id, waiting);
    world.emit('refund.created', waiting);
    world.emit('charge.refunded', after, previous);
    return waiting;
  }
  const paid = takeOut(world, made, behaviour === 'finish later' ? 'pending' : 'succeeded');
  if (behaviour === 'fail later') world.plan('fail refund', id, SLOW_REFUND_S);
  if (behaviour === 'finish later') world.plan('finish refund', id, SLOW_REFUND_S);
  world.emit('refund.created', paid);
  world.emit('charge.refunded', after, previous);
  return paid;
}

/** A control may ask that the next refunds fail later at the bank. */
function takeControl(world: World): string | undefined {
  const left = Number(world.store.get('note', 'refunds to fail')?.value ?? 0);
  if (left < 1) return undefined;
  world.setNote('refunds to fail', String(left - 1));
  return 'fail later';
}

function takeOut(world: World, refund: Stripe.Refund, status: 'pending' | 'succeeded'): Stripe.Refund {
  const movement = move(world, '', { amount: -refund.amount, type: 'refund', category: 'refund', source: refund.id, description: 'REFUND FOR CHARGE' });
  const { pending_reason: _gone, ...rest } = refund;
  const after: Stripe.Refund = { ...rest, balance_transaction: movement.id, status };
  world.store.put('refund', after.id, after);
  return after;
}

function isLostOrOpen(world: World, chargeId: string): boolean {
  return world.store.all('dispute').some((dispute) => idOf(dispute.charge) === chargeId && dispute.status !== 'won');
}

/** Makes the refunds that waited for money, oldest first, as far as the balance reaches. */
export function payWaitingRefunds(world: World): void {
  for (const refund of world.store.all('refund')) {
    if (refund.status !== 'pending' || refund.pending_reason !== 'insufficient_funds') continue;
    const balance = totals(world, '');
    if (balance.available + balance.pending < refund.amount) return;
    announce(world, takeOut(world, refund, 'succeeded'), 'refund.updated', { status: 'pending' });
  }
}

/** The bank sends a refund back: the money returns to the platform and the charge counts as unrefunded again. */
export function failRefund(world: World, id: string, reason: 'lost_or_stolen_card' | 'unknown' = 'unknown'): void {
  const refund = world.store.get('refund', id);
  const charge = world.store.get('charge', idOf(refund?.charge) ?? '');
  if (refund === undefined || charge === undefined || refund.status === 'failed' || refund.status === 'canceled') return;
  const movement =
    refund.balance_transaction === null
      ? null
      : move(world, '', { amount: refund.amount, type: 'refund_failure', category: 'refund_failure', source: refund.id, description: 'REFUND FAILURE' });
  const { pending_reason: _gone, ...rest } = refund;
  const after: Stripe.Refund = { ...rest, status: 'failed', failure_reason: reason, ...(movement === null ? {} : { failure_balance_transaction: movement.id }) };
  world.store.put('refund', id, after);
  world.store.put('charge', charge.id, { ...charge, amount_refunded: charge.amount_refunded - refund.amount, refunded: false });
  announce(world, after, 'refund.failed', { status: refund.status });
}

/** A slow refund reaches the card. */
export function finishRefund(world: World, id: string): void {
  const refund = world.store.get('refund', id);
  if (refund === undefined || refund.status !== 'pending') return;
  const after: Stripe.Refund = { ...refund, status: 'succeeded' };
  world.store.put('refund', id, after);
  announce(world, after, 'refund.updated', { status: 'pending' });
}

function announce(world: World, refund: Stripe.Refund, type: 'refund.updated' | 'refund.failed', previous: object): void {
  world.emit('refund.updated', refund, previous);
  if (type === 'refund.failed') world.emit('refund.failed', refund, previous);
  world.emit('charge.refund.updated', refund, previous);
}
