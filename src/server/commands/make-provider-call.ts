import { execute, oneRow } from '../db.ts';
import { Booking, Charge, HeldPayment, ProviderCall, SawyerProfile } from '../models/index.ts';
import { expireCheckout, findRefund, findReversal, findTransfer, makeRefund, makeReversal, makeTransfer, readRefund, type Moved } from '../services/card-payments.ts';
import { disputeOf } from '../lost-charges.ts';
import { PaymentsProblem } from '../services/payments.ts';
import { centsOf, dropProviderCall, finishProviderCall } from './finish-provider-call.ts';
import { receiveCheckout } from './receive-checkout.ts';

/** After this many tries a call is left to a moderator. */
const MOST_ATTEMPTS = 15;
/** A claimed call is left alone this long; the provider's answer is awaited for 20 seconds at most, twice. */
const CLAIM_S = 60;
/** Refusals that time may cure. */
const CURABLE = new Set(['balance_insufficient', 'insufficient_capabilities_for_transfer', 'charge_disputed', 'lock_timeout']);

interface Work {
  readonly call: ProviderCall;
  readonly bookingNumber: number;
  readonly charge: Charge | null;
  readonly payment: HeldPayment;
  readonly destination: string | null;
  /** For a reversal: the transfer at the provider. */
  readonly transfer: string | null;
}

async function workOf(callId: string): Promise<Work | null> {
  const call = await ProviderCall.findByPk(callId);
  if (!call?.bookingId || !call.paymentId) return null;
  const booking = await Booking.findByPk(call.bookingId, { rejectOnEmpty: true });
  const profile = call.kind === 'transfer' ? await SawyerProfile.findByPk(booking.sawyerId) : null;
  return {
    call,
    bookingNumber: booking.number,
    charge: call.chargeId === null ? null : await Charge.findByPk(call.chargeId),
    payment: await HeldPayment.findByPk(call.paymentId, { rejectOnEmpty: true }),
    destination: profile?.payoutsReady ? profile.payoutAccount : null,
    transfer: call.reverses === null ? null : ((await ProviderCall.findByPk(call.reverses, { rejectOnEmpty: true })).providerId),
  };
}

/** Makes the call theirs who asks first; the others leave it alone. */
const claim = (callId: string, at: Date): Promise<{ id: string } | undefined> =>
  oneRow<{ id: string }>(
    `UPDATE provider_call SET attempts = attempts + 1, claimed_until = $2 WHERE id = $1 AND status IN ('waiting', 'failed') AND (claimed_until IS NULL OR claimed_until <= $3) RETURNING id`,
    [callId, new Date(at.getTime() + CLAIM_S * 1000), at],
  );

/** What the provider has already done for this call, when it was tried before. */
async function doneBefore({ call, charge, payment, transfer }: Work): Promise<Moved | null> {
  if (call.providerId !== null && call.kind === 'refund') {
    const seen = await readRefund(call.providerId);
    if (seen.status !== 'came back') return seen;
  }
  if (call.attempts <= 1 || !charge) return null;
  if (call.kind === 'reversal') return transfer === null ? null : findReversal(transfer, call.id);
  return call.kind === 'transfer' ? findTransfer(payment.transferGroup, call.id) : findRefund(charge.providerChargeId, call.id);
}

async function make(work: Work): Promise<Moved> {
  const { call, charge, payment, bookingNumber, destination, transfer } = work;
  const before = await doneBefore(work);
  if (before) return before;
  if (!charge) throw new Error(`The call ${call.id} names no charge.`);
  const common = { callId: call.id, idempotencyKey: call.idempotencyKey, amountCents: centsOf(call), bookingNumber };
  if (call.kind === 'reversal' && transfer !== null) return makeReversal({ ...common, transfer });
  if (call.kind === 'refund') {
    const made = await makeRefund({ ...common, charge: charge.providerChargeId });
    // A repeated key is answered with what was said the first time; the refund may have come back since.
    return call.attempts > 1 ? readRefund(made.providerId) : made;
  }
  if (call.kind !== 'transfer' || destination === null) throw new Error(`The call ${call.id} cannot be made.`);
  return makeTransfer({ ...common, destination, sourceCharge: charge.providerChargeId, transferGroup: payment.transferGroup });
}

/**
 * Makes one call of the outbox. The stored key makes a repeated call safe; when an earlier try may have been done, the provider is
 * asked first. A line that was lost is tried again under the same key; an answer that the provider keeps under the key
 * (its own failure, a refusal) only under a new one. What time cannot cure is left to a moderator.
 * @throws PaymentsProblem to be tried again by the queue
 */
export async function makeProviderCall(callId: string, at: Date): Promise<void> {
  const found = await workOf(callId);
  if (!found) return;
  const paysFrom = found.call.kind === 'transfer' || found.call.kind === 'refund' ? found.call.chargeId : null;
  const dispute = paysFrom === null ? null : await disputeOf(paysFrom);
  // Nothing is paid out of a charge until the bank has decided, and pay waits, untried, until the payout account is ready.
  if (dispute === 'open' || (dispute === null && found.call.kind === 'transfer' && found.destination === null)) return;
  if (!(await claim(callId, at))) return;
  const work = await workOf(callId);
  if (!work) return;
  try {
    if (work.call.kind === 'expire-checkout') {
      await receiveCheckout(await expireCheckout(String(work.call.request['sessionId'])), at);
      await work.call.update({ status: 'done', doneAt: at, claimedUntil: null, error: null });
    } else if (dispute === 'lost') {
      const before = await doneBefore(work);
      if (before && before.status !== 'came back') await finishProviderCall(callId, before, at);
      else await dropProviderCall(callId, at);
    } else await finishProviderCall(callId, await make(work), at);
  } catch (error) {
    if (!(error instanceof PaymentsProblem)) throw error;
    await noteFailure(work.call, error, at);
  }
}

/** Notes how a try ended, unless the call went another way meanwhile: its key is then another. */
async function noteFailure(call: ProviderCall, problem: PaymentsProblem, at: Date): Promise<void> {
  const curable = problem.kind !== 'refused' || (problem.code !== null && CURABLE.has(problem.code));
  const stuck = !curable || call.attempts >= MOST_ATTEMPTS;
  const waitS = Math.min(2 ** call.attempts, 6 * 3600);
  await execute(
    `UPDATE provider_call SET status = $2, error = $3, claimed_until = $4, idempotency_key = $5 WHERE id = $1 AND status IN ('waiting', 'failed') AND idempotency_key = $6`,
    [
      call.id, stuck ? 'stuck' : 'failed', problem.message.slice(0, 500), stuck ? null : new Date(at.getTime() + waitS * 1000),
      problem.kind === 'unknown' ? call.idempotencyKey : `${call.kind}-${crypto.randomUUID()}`, call.idempotencyKey,
    ],
  );
  if (!stuck) throw problem;
}
