import { formatCents } from '~/domain/money.ts';
import { paths } from '~/domain/paths.ts';
import { bookingStates } from '~/domain/states/booking.ts';
import { listingStates } from '~/domain/states/listing.ts';
import { paymentStates } from '~/domain/states/payment.ts';
import { paidOut } from '~/emails/money-letters.ts';
import { oneRow } from '../db.ts';
import { enqueue } from '../jobs/queue.ts';
import { heldFor } from '../ledger.ts';
import { Listing, type Booking, type HeldPayment } from '../models/index.ts';
import { linkTo, partiesOf } from '../parties.ts';
import { transition } from '../transition.ts';
import type { Actor } from '../viewer.ts';

/**
 * Ends a payment, and with it the booking, when nothing is held and every call of it has been made or dropped. The booking and the
 * payment are locked by the caller; does nothing while something is still to come.
 */
export async function endWhenPaid(by: Actor, booking: Booking, payment: HeldPayment, at: Date): Promise<void> {
  const open = await oneRow<{ count: number }>(
    `SELECT count(*)::int AS count FROM provider_call JOIN charge ON charge.id = provider_call.charge_id
     WHERE provider_call.payment_id = $1 AND provider_call.kind IN ('transfer', 'refund') AND provider_call.status NOT IN ('done', 'dropped') AND charge.returned_because IS NULL`,
    [payment.id],
  );
  if ((open?.count ?? 0) > 0 || (await heldFor(booking.id)) > 0) return;
  if (payment.status === 'settling') await transition(paymentStates, 'settle', payment, by, at, { updatedAt: at });
  else if (payment.status === 'held' && (booking.status === 'cancelled' || booking.status === 'signed')) await transition(paymentStates, 'refund', payment, by, at, { updatedAt: at });
  else return;
  if (booking.status !== 'signed') return;
  await transition(bookingStates, 'settle', booking, by, at, { updatedAt: at });
  await enqueue('learn-from-job', { bookingId: booking.id });
  const listing = await Listing.findByPk(booking.listingId, { lock: true, rejectOnEmpty: true });
  if (listing.status === 'matched') await transition(listingStates, 'finish', listing, by, at, { updatedAt: at });
  await sendReceipts(booking, payment);
}

async function sendReceipts(booking: Booking, payment: HeldPayment): Promise<void> {
  const sums = await oneRow<{ charged: number; transferred: number; refunded: number; lost: number; fee: number }>(
    `SELECT (SELECT coalesce(sum(amount_cents), 0) FROM charge WHERE payment_id = $1 AND returned_because IS NULL)::int AS charged,
       (SELECT coalesce(sum((request->>'amountCents')::int), 0) FROM provider_call WHERE payment_id = $1 AND kind = 'transfer' AND status = 'done')::int AS transferred,
       (SELECT coalesce(sum((request->>'amountCents')::int), 0) FROM provider_call JOIN charge ON charge.id = charge_id AND returned_because IS NULL
        WHERE provider_call.payment_id = $1 AND kind = 'refund' AND provider_call.status = 'done')::int AS refunded,
       (SELECT coalesce(sum(card_dispute.amount_cents), 0) FROM card_dispute JOIN charge ON charge.id = charge_id AND returned_because IS NULL WHERE booking_id = $2 AND status = 'lost')::int AS lost,
       (SELECT coalesce(-sum(amount_cents), 0) FROM ledger_entry WHERE booking_id = $2 AND account = 'platform fee')::int AS fee`,
    [payment.id, booking.id],
  );
  const { charged = 0, transferred = 0, refunded = 0, lost = 0, fee = 0 } = sums ?? {};
  const { landowner, sawyer } = await partiesOf(booking);
  const receipt = linkTo(paths.receipt(booking.number));
  const byBank: (readonly [string, string])[] = lost > 0 ? [['Given back by the bank after a dispute', formatCents(lost)]] : [];
  await enqueue('send-mail', paidOut(landowner, [['Held', formatCents(charged)], ['Paid for the work', formatCents(charged - refunded - lost)], ['Back to your card', formatCents(refunded)], ...byBank], 'landowner', receipt));
  await enqueue('send-mail', paidOut(sawyer, [['For the work', formatCents(transferred + fee)], ['Fee', formatCents(fee)], ['Released to you', formatCents(transferred)], ...byBank], 'sawyer', receipt));
}
