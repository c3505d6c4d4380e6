import { formatCents } from '~/domain/money.ts';
import { bookingStates } from '~/domain/states/booking.ts';
import { paymentStates } from '~/domain/states/payment.ts';
import type { Settlement } from '~/domain/trade/settlement.ts';
import { bookingCancelled } from '~/emails/booking-letters.ts';
import { authorize, rolesOnBooking } from '../authorize.ts';
import { cancellationOf } from '../booking-money.ts';
import { inTransaction } from '../db.ts';
import { conflict } from '../errors.ts';
import { afterEnding } from '../end-booking.ts';
import { enqueue } from '../jobs/queue.ts';
import { lockBooking } from '../locks.ts';
import { Checkout, HeldPayment, NoShow, type Booking } from '../models/index.ts';
import { bookingLink, partiesOf } from '../parties.ts';
import { transition } from '../transition.ts';
import type { Actor, Viewer } from '../viewer.ts';
import { queueCheckoutEnd } from './queue-provider-call.ts';
import { payOut } from './settle-booking.ts';

/** Ends a payment nobody has paid: it is void, and a checkout that is still open is ended at the provider. */
export async function voidPayment(by: Actor, payment: HeldPayment, at: Date): Promise<void> {
  await transition(paymentStates, 'voidUnpaid', payment, by, at, { updatedAt: at });
  const open = await Checkout.findOne({ where: { paymentId: payment.id, status: ['creating', 'open'] }, lock: true });
  if (open?.providerSessionId) await queueCheckoutEnd(payment, open.providerSessionId, at);
}

const moneyWords = (parts: Settlement): string =>
  parts.payableCents === 0
    ? `The whole hold of ${formatCents(parts.refundCents)} goes back to the card; the bank takes some days.`
    : `Set-up and travel of ${formatCents(parts.payableCents)} are owed; ${formatCents(parts.refundCents)} goes back to the card.`;

/**
 * Either side cancels before sawing. Free until 48 hours before the first day's start; later by the landowner, set-up and travel are
 * owed; by the sawyer, everything goes back. While the bank decides a dispute the money waits; the day is free at once.
 * @param expects what the person was shown of what is owed, in cents; a cancellation that would cost more is refused
 */
export async function cancelBooking(by: Viewer, input: { readonly booking: number; readonly reason: string; readonly expects?: number }, at: Date): Promise<void> {
  await inTransaction(async () => {
    const booking = await lockBooking(input.booking);
    authorize(by, 'booking', 'cancel', rolesOnBooking(by, booking), booking.status);
    await refuseReporter(by, booking);
    await endBeforeSawing(by, booking, { side: by.id === booking.landownerId ? 'landowner' : 'sawyer', saidBy: by.name, ...input }, at);
  });
}

/** Who reported that the other did not come waits for the answer: cancelling now would cost them what the other owes. */
async function refuseReporter(by: Viewer, { id, startsAt, landownerId }: Booking): Promise<void> {
  const absent = by.id === landownerId ? 'sawyer' : 'landowner';
  if (!startsAt || !(await NoShow.findOne({ where: { bookingId: id, status: ['reported', 'contested'], startsAt, absent } }))) return;
  throw conflict('You reported that the other side did not come. Wait for the answer, or take the report back first.');
}

/** A moderator cancels before sawing, for one of the two who cannot or must not: everything goes back. */
export async function cancelForBoth(by: Viewer, input: { readonly booking: number; readonly reason: string }, at: Date): Promise<void> {
  await inTransaction(async () => {
    const booking = await lockBooking(input.booking);
    authorize(by, 'booking', 'cancelForBoth', rolesOnBooking(by, booking), booking.status);
    await endBeforeSawing(by, booking, { side: 'sawyer', saidBy: 'A moderator', reason: input.reason }, at);
  });
}

interface Ending {
  /** Who counts as the one that cancels: it decides what is owed. For `sawyer` everything goes back. */
  readonly side: 'landowner' | 'sawyer';
  /** How letters name who did it. */
  readonly saidBy: string;
  readonly reason: string;
  /** The side that is at fault, where that is not the one who does it. */
  readonly cancelledBy?: string;
  /** When it counts as cancelled; now unless given. */
  readonly asOf?: Date;
  readonly expects?: number;
}

/**
 * Ends a booking that the caller has locked and allowed to be cancelled. While the bank decides a dispute the money waits and is
 * settled as of the cancellation afterwards; the day is free at once.
 */
export async function endBeforeSawing(by: Actor, booking: Booking, ending: Ending, at: Date): Promise<void> {
  const { side, saidBy, reason, expects } = ending;
  const cancelledAt = ending.asOf ?? at;
  const payment = await HeldPayment.findOne({ where: { bookingId: booking.id }, lock: true });
  const parts = booking.status === 'held' ? await cancellationOf(booking, side, cancelledAt) : null;
  if (parts && expects !== undefined && parts.payableCents > expects) {
    throw conflict(`It is now less than 48 hours to the start: cancelling costs ${formatCents(parts.payableCents)} for set-up and travel. Look again before you cancel.`);
  }
  await transition(bookingStates, 'cancel', booking, by, at, { cancelledBy: ending.cancelledBy ?? by.id, cancelReason: reason, cancelledAt, updatedAt: at });
  if (payment?.status === 'due') await voidPayment(by, payment, at);
  const waits = payment?.disputedAt != null;
  if (parts && payment && !waits) await payOut(by, booking, payment, parts, 'cancellation', at);
  await afterEnding(by, booking, at);
  const parties = await partiesOf(booking);
  const money = waits ? 'The card payment is disputed at the bank. What is owed is settled when the bank has decided.' : parts ? moneyWords(parts) : 'No money was held.';
  for (const person of [parties.landowner, parties.sawyer]) {
    await enqueue('send-mail', bookingCancelled(person, saidBy, reason, money, bookingLink(booking)));
  }
}
