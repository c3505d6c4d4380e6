import { authorize, rolesOnBooking } from '../authorize.ts';
import { inTransaction } from '../db.ts';
import { conflict } from '../errors.ts';
import { lockBooking } from '../locks.ts';
import { HeldPayment } from '../models/money.ts';
import { record } from '../transition.ts';
import type { Viewer } from '../viewer.ts';
import { settleBooking } from './settle-booking.ts';

/** The sawyer takes what is held as full pay, although the tally came to more; it is paid out at once. */
export async function acceptHeld(by: Viewer, bookingNumber: number, at: Date): Promise<void> {
  await inTransaction(async () => {
    const booking = await lockBooking(bookingNumber);
    authorize(by, 'booking', 'acceptHeld', rolesOnBooking(by, booking), booking.status);
    const payment = await HeldPayment.findOne({ where: { bookingId: booking.id }, lock: true });
    if (payment?.status !== 'held') throw conflict('This is being paid out already.');
    await payment.update({ heldAcceptedAt: at, updatedAt: at });
    await record(by, 'acceptHeld', 'heldPayment', payment.id, at);
    await settleBooking(by, booking.id, at);
  });
}
