import { lockBookingMoney } from '../booking-money.ts';
import { inTransaction } from '../db.ts';
import { post, type Side } from '../ledger.ts';
import { disputeOf, dropCall, oweBack } from '../lost-charges.ts';
import { ProviderCall, type Booking, type HeldPayment } from '../models/index.ts';
import type { Moved } from '../services/card-payments.ts';
import { system } from '../viewer.ts';
import { endWhenPaid } from './end-payment.ts';

const provider = system('payment provider');

export const centsOf = (call: ProviderCall): number => Number(call.request['amountCents']);

/** What the provider did for a call, as the ledger has it. */
function sidesOf(call: ProviderCall): Side[] {
  const cents = centsOf(call);
  if (call.kind === 'reversal') return [{ account: 'provider balance', amountCents: cents }, { account: 'sawyer receivable', amountCents: -cents }];
  return [{ account: call.kind === 'transfer' ? 'sawyer payable' : 'refund payable', amountCents: cents }, { account: 'provider balance', amountCents: -cents }];
}

async function withCall<T>(callId: string, work: (call: ProviderCall, booking: Booking, payment: HeldPayment) => Promise<T>): Promise<T> {
  const known = await ProviderCall.findByPk(callId, { rejectOnEmpty: true });
  const { bookingId } = known;
  if (bookingId === null) throw new Error(`The call ${callId} has no booking.`);
  return inTransaction(async () => {
    const { booking, payment } = await lockBookingMoney(bookingId);
    const call = await ProviderCall.findByPk(callId, { lock: true, rejectOnEmpty: true });
    if (!payment) throw new Error(`The call ${callId} has no payment.`);
    return work(call, booking, payment);
  });
}

/**
 * Enters what the provider did for one of our calls: the ledger group, and the end of the payment when it was the last one.
 * May be told again and again; the ledger is written once. A refund that waits at the provider for money is only noted. What is told
 * was read before the lock was had, so it may be old: a refund that came back since stays so.
 */
export async function finishProviderCall(callId: string, moved: Moved, at: Date): Promise<void> {
  await withCall(callId, async (call, booking, payment) => {
    if (moved.status === 'came back') return comeBack(booking, call, moved.providerId, at);
    if (call.status === 'done' || call.status === 'dropped' || call.cameBack.includes(moved.providerId)) return;
    if (moved.status === 'waiting') return void (await call.update({ providerId: moved.providerId, claimedUntil: null }));
    await call.update({ status: 'done', providerId: moved.providerId, doneAt: at, claimedUntil: null, error: null });
    await post({ at, cause: call.kind, causeId: moved.providerId, bookingId: booking.id, sides: sidesOf(call) });
    // It was under way when the bank gave its charge back.
    if (call.kind === 'transfer' && call.chargeId !== null && (await disputeOf(call.chargeId)) === 'lost') await oweBack(booking, call, at);
    await endWhenPaid(provider, booking, payment, at);
  });
}

/** Gives up a call whose money the bank has given back to the card. The provider was asked first: it has not made it. */
export async function dropProviderCall(callId: string, at: Date): Promise<void> {
  await withCall(callId, async (call, booking, payment) => {
    await dropCall(booking, call, at);
    await endWhenPaid(provider, booking, payment, at);
  });
}

/**
 * A refund came back from the bank: it is owed again, and a moderator is needed. The next try has a new key: under the old one the
 * provider would answer with the refund that came back. Told again of one that is known, or of an older one of a call that is done,
 * nothing moves.
 */
async function comeBack(booking: Booking, call: ProviderCall, refundId: string, at: Date): Promise<void> {
  if (call.cameBack.includes(refundId)) return;
  const cameBack = [...call.cameBack, refundId];
  if (call.status === 'dropped' || (call.status === 'done' && call.providerId !== refundId)) return void (await call.update({ cameBack }));
  if (call.status === 'done')
    await post({
      at, cause: 'refund came back', causeId: refundId, bookingId: booking.id,
      sides: [{ account: 'provider balance', amountCents: centsOf(call) }, { account: 'refund payable', amountCents: -centsOf(call) }],
    });
  await call.update({ status: 'stuck', providerId: refundId, cameBack, idempotencyKey: `refund-${crypto.randomUUID()}`, error: 'The bank sent the refund back.', doneAt: null, claimedUntil: null });
}
