import { formatCents } from '~/domain/money.ts';
import { paths } from '~/domain/paths.ts';
import { bookingStates } from '~/domain/states/booking.ts';
import { listingStates } from '~/domain/states/listing.ts';
import { paymentStates } from '~/domain/states/payment.ts';
import { paidOut } from '~/emails/money-letters.ts';
import { lockBookingMoney } from '../booking-money.ts';
import { inTransaction, oneRow } from '../db.ts';
import { enqueue } from '../jobs/queue.ts';
import { post } from '../ledger.ts';
import { LedgerGroup, Listing, ProviderCall, type Booking, type HeldPayment } from '../models/index.ts';
import { linkTo, partiesOf } from '../parties.ts';
import type { Moved } from '../services/card-payments.ts';
import { transition } from '../transition.ts';
import { system } from '../viewer.ts';

const provider = system('payment provider');

export const centsOf = (call: ProviderCall): number => Number(call.request['amountCents']);

/**
 * Enters what the provider did for one of our calls: the ledger group, and the end of the payment when it was the last one.
 * May be told again and again; the ledger is written once. A refund that waits at the provider for money is only noted.
 */
export async function finishProviderCall(callId: string, moved: Moved, at: Date): Promise<void> {
  const known = await ProviderCall.findByPk(callId, { rejectOnEmpty: true });
  const { bookingId } = known;
  if (bookingId === null) throw new Error(`The call ${callId} has no booking.`);
  await inTransaction(async () => {
    const { booking, payment } = await lockBookingMoney(bookingId);
    const call = await ProviderCall.findByPk(callId, { lock: true, rejectOnEmpty: true });
    if (!payment) throw new Error(`The call ${callId} has no payment.`);
    if (moved.status === 'came back') return comeBack(booking, call, moved.providerId, at);
    if (call.status === 'done') return;
    if (moved.status === 'waiting') return void (await call.update({ providerId: moved.providerId, claimedUntil: null }));
    await call.update({ status: 'done', providerId: moved.providerId, doneAt: at, claimedUntil: null, error: null });
    await post({
      at, cause: call.kind, causeId: moved.providerId, bookingId,
      sides: [
        { account: call.kind === 'transfer' ? 'sawyer payable' : 'refund payable', amountCents: centsOf(call) },
        { account: 'provider balance', amountCents: -centsOf(call) },
      ],
    });
    await endWhenPaid(booking, payment, at);
  });
}

/** A refund came back from the bank: it is owed again, and a moderator is needed. Told of an older refund of the call, nothing changes. */
async function comeBack(booking: Booking, call: ProviderCall, refundId: string, at: Date): Promise<void> {
  if (call.status === 'stuck' || (call.providerId !== null && call.providerId !== refundId)) return;
  const cause = 'refund came back';
  if (call.status === 'done') {
    const news = await post({
      at, cause, causeId: refundId, bookingId: booking.id,
      sides: [{ account: 'provider balance', amountCents: centsOf(call) }, { account: 'refund payable', amountCents: -centsOf(call) }],
    });
    if (!news) return;
  } else if (await LedgerGroup.findOne({ where: { cause, causeId: refundId } })) return;
  await call.update({ status: 'stuck', providerId: refundId, error: 'The bank sent the refund back.', doneAt: null, claimedUntil: null });
}

/** Ends the payment, and with it the booking, when every call of it has been made. */
async function endWhenPaid(booking: Booking, payment: HeldPayment, at: Date): Promise<void> {
  const open = await oneRow<{ count: number }>(
    `SELECT count(*)::int AS count FROM provider_call JOIN charge ON charge.id = provider_call.charge_id
     WHERE provider_call.payment_id = $1 AND provider_call.status <> 'done' AND charge.returned_because IS NULL`,
    [payment.id],
  );
  if ((open?.count ?? 0) > 0) return;
  if (payment.status === 'settling') await transition(paymentStates, 'settle', payment, provider, at, { updatedAt: at });
  else if (payment.status === 'held' && booking.status === 'cancelled') await transition(paymentStates, 'refund', payment, provider, at, { updatedAt: at });
  else return;
  if (booking.status !== 'signed') return;
  await transition(bookingStates, 'settle', booking, provider, at, { updatedAt: at });
  const listing = await Listing.findByPk(booking.listingId, { lock: true, rejectOnEmpty: true });
  if (listing.status === 'matched') await transition(listingStates, 'finish', listing, provider, at, { updatedAt: at });
  await sendReceipts(booking, payment);
}

async function sendReceipts(booking: Booking, payment: HeldPayment): Promise<void> {
  const sums = await oneRow<{ charged: number; transferred: number; refunded: number; fee: number }>(
    `SELECT (SELECT coalesce(sum(amount_cents), 0) FROM charge WHERE payment_id = $1 AND returned_because IS NULL)::int AS charged,
       (SELECT coalesce(sum((request->>'amountCents')::int), 0) FROM provider_call WHERE payment_id = $1 AND kind = 'transfer')::int AS transferred,
       (SELECT coalesce(sum((request->>'amountCents')::int), 0) FROM provider_call JOIN charge ON charge.id = charge_id AND returned_because IS NULL WHERE provider_call.payment_id = $1 AND kind = 'refund')::int AS refunded,
       (SELECT coalesce(-sum(amount_cents), 0) FROM ledger_entry WHERE booking_id = $2 AND account = 'platform fee')::int AS fee`,
    [payment.id, booking.id],
  );
  const { charged = 0, transferred = 0, refunded = 0, fee = 0 } = sums ?? {};
  const { landowner, sawyer } = await partiesOf(booking);
  const receipt = linkTo(paths.receipt(booking.number));
  await enqueue('send-mail', paidOut(landowner, [['Held', formatCents(charged)], ['Paid for the work', formatCents(charged - refunded)], ['Back to your card', formatCents(refunded)]], 'landowner', receipt));
  await enqueue('send-mail', paidOut(sawyer, [['For the work', formatCents(transferred + fee)], ['Fee', formatCents(fee)], ['Released to you', formatCents(transferred)]], 'sawyer', receipt));
}
