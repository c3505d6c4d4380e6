import { bookingStates } from '~/domain/states/booking.ts';
import { authorize, rolesOnBooking } from '../authorize.ts';
import { inTransaction } from '../db.ts';
import { lockBooking } from '../locks.ts';
import { Tally } from '../models/tally.ts';
import { transition } from '../transition.ts';
import type { Viewer } from '../viewer.ts';

/** The sawyer begins: the check-list has been gone through, the tally book is opened. A second call finds it begun and changes nothing. */
export async function startSawing(by: Viewer, number: number, at: Date): Promise<void> {
  await inTransaction(async () => {
    const booking = await lockBooking(number);
    const roles = rolesOnBooking(by, booking);
    if (booking.status === 'sawing' && roles.has('sawyer')) return;
    authorize(by, 'booking', 'startSawing', roles, booking.status);
    await transition(bookingStates, 'startSawing', booking, by, at, { updatedAt: at });
    await Tally.create({ bookingId: booking.id, createdAt: at });
  });
}
