import { paths } from '~/domain/paths.ts';
import { settledAsHeld } from '~/emails/money-letters.ts';
import { authorize, rolesOnBooking } from '../authorize.ts';
import { inTransaction } from '../db.ts';
import { conflict } from '../errors.ts';
import { enqueue } from '../jobs/queue.ts';
import { heldFor } from '../ledger.ts';
import { lockBooking } from '../locks.ts';
import { HeldPayment, type Booking } from '../models/index.ts';
import { linkTo, partiesOf } from '../parties.ts';
import { record } from '../transition.ts';
import type { Viewer } from '../viewer.ts';
import { settleBooking } from './settle-booking.ts';

async function accept(by: Viewer, booking: Booking, deed: 'acceptHeld' | 'settleAsHeld', data: Readonly<Record<string, unknown>>, at: Date): Promise<void> {
  const payment = await HeldPayment.findOne({ where: { bookingId: booking.id }, lock: true });
  if (payment?.status !== 'held') throw conflict('This is being paid out already.');
  await payment.update({ heldAcceptedAt: at, updatedAt: at });
  await record(by, deed, 'heldPayment', payment.id, at, { data });
  await settleBooking(by, booking.id, at);
}

/** The sawyer takes what is held as full pay, although the tally came to more; it is paid out at once. */
export async function acceptHeld(by: Viewer, bookingNumber: number, at: Date): Promise<void> {
  await inTransaction(async () => {
    const booking = await lockBooking(bookingNumber);
    authorize(by, 'booking', 'acceptHeld', rolesOnBooking(by, booking), booking.status);
    await accept(by, booking, 'acceptHeld', {}, at);
  });
}

/** A moderator ends the waiting for a top-up: the signed tally is paid with what is held. Both sides read the reason. */
export async function settleAsHeld(by: Viewer, input: { readonly booking: number; readonly reason: string }, at: Date): Promise<void> {
  await inTransaction(async () => {
    const booking = await lockBooking(input.booking);
    authorize(by, 'booking', 'settleAsHeld', rolesOnBooking(by, booking), booking.status);
    const cents = await heldFor(booking.id);
    await accept(by, booking, 'settleAsHeld', { reason: input.reason }, at);
    const { landowner, sawyer } = await partiesOf(booking);
    for (const person of [landowner, sawyer]) await enqueue('send-mail', settledAsHeld(person, input.reason, cents, linkTo(paths.receipt(booking.number))));
  });
}
