import { bookingStates } from '~/domain/states/booking.ts';
import { bookingLapsed } from '~/emails/money-letters.ts';
import { lockBookingMoney } from '../booking-money.ts';
import { inTransaction, rows } from '../db.ts';
import { afterEnding } from '../end-booking.ts';
import { enqueue } from '../jobs/queue.ts';
import { bookingLink, partiesOf } from '../parties.ts';
import { transition } from '../transition.ts';
import { system } from '../viewer.ts';
import { voidPayment } from './cancel-booking.ts';

const clock = system('payment deadline');

async function lapse(bookingId: string, at: Date): Promise<void> {
  await inTransaction(async () => {
    const { booking, payment } = await lockBookingMoney(bookingId);
    if (booking.status !== 'agreed' || !booking.payBy || booking.payBy > at) return;
    await transition(bookingStates, 'lapse', booking, clock, at, { updatedAt: at });
    if (payment?.status === 'due') await voidPayment(clock, payment, at);
    await afterEnding(clock, booking, at);
    const { landowner, sawyer } = await partiesOf(booking);
    await enqueue('send-mail', bookingLapsed(landowner, true, bookingLink(booking)));
    await enqueue('send-mail', bookingLapsed(sawyer, false, bookingLink(booking)));
  });
}

/** Lapses every agreed booking whose payment deadline has passed: the day is freed and the listing opens again. */
export async function lapseUnpaid(at: Date): Promise<void> {
  const late = await rows<{ id: string }>(`SELECT id FROM booking WHERE status = 'agreed' AND pay_by <= $1 ORDER BY pay_by LIMIT 200`, [at]);
  for (const { id } of late) await lapse(id, at);
}
