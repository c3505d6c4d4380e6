import { bookingStates } from '~/domain/states/booking.ts';
import { authorize, rolesOnBooking } from '../authorize.ts';
import { inTransaction } from '../db.ts';
import { lockBooking } from '../locks.ts';
import type { Booking } from '../models/booking.ts';
import { Tally } from '../models/tally.ts';
import { transition } from '../transition.ts';
import type { Viewer } from '../viewer.ts';

/** Begins sawing on a booking that the caller has locked. */
export async function beginSawing(by: Viewer, booking: Booking, at: Date): Promise<void> {
  authorize(by, 'booking', 'startSawing', rolesOnBooking(by, booking), booking.status);
  await transition(bookingStates, 'startSawing', booking, by, at, { updatedAt: at });
  await Tally.create({ bookingId: booking.id, createdAt: at });
}

/** The sawyer begins: the check-list has been gone through, the tally book is opened. A second call finds it begun and changes nothing. */
export async function startSawing(by: Viewer, number: number, at: Date): Promise<void> {
  await inTransaction(async () => {
    const booking = await lockBooking(number);
    const roles = rolesOnBooking(by, booking);
    if (booking.status === 'sawing' && roles.has('sawyer')) return;
    await beginSawing(by, booking, at);
  });
}
