import { paths } from '~/domain/paths.ts';
import { dayStart } from '~/domain/time.ts';
import { isEveningBefore, readyTheEveningBefore } from '~/domain/trade/evening-before.ts';
import { eveningBefore } from '~/emails/booking-letters.ts';
import { makeSigningCode } from '../../commands/sign-on-the-spot.ts';
import { inTransaction, rows } from '../../db.ts';
import { startTimeOf } from '../../invitations.ts';
import { BookedDay, Booking, Listing } from '../../models/index.ts';
import { linkTo, partiesOf } from '../../parties.ts';
import { stickersOf } from '../../stickers-of.ts';
import { enqueue } from '../queue.ts';

async function tell(id: string, at: Date): Promise<void> {
  await inTransaction(async () => {
    const day = await BookedDay.findByPk(id, { lock: true });
    if (!day?.active || day.eveningToldAt) return;
    const booking = await Booking.findByPk(day.bookingId, { rejectOnEmpty: true });
    if (!isEveningBefore(day.day, booking.timeZone, at)) return;
    await day.update({ eveningToldAt: at });
    const listing = await Listing.findByPk(booking.listingId, { rejectOnEmpty: true });
    const { landowner, sawyer } = await partiesOf(booking);
    const startsAt = dayStart(day.day, booking.timeZone, await startTimeOf(booking.id));
    const stickers = await stickersOf(listing);
    const link = linkTo(paths.dayOf(booking.number));
    await enqueue('send-mail', eveningBefore(landowner, sawyer, startsAt, booking.timeZone, readyTheEveningBefore('landowner', stickers), await makeSigningCode(booking.id), link));
    await enqueue('send-mail', eveningBefore(sawyer, landowner, startsAt, booking.timeZone, readyTheEveningBefore('sawyer', stickers), null, link));
  });
}

/** Sends both sides the list for tomorrow, once. Leans on booked_day_to_tell. */
export async function tellEveningBefore(at: Date): Promise<void> {
  const due = await rows<{ id: string }>(
    `SELECT booked_day.id FROM booked_day JOIN booking ON booking.id = booked_day.booking_id
     WHERE booked_day.active AND booked_day.evening_told_at IS NULL AND booked_day.day BETWEEN $1::date - 1 AND $1::date + 2 AND booking.status IN ('held', 'sawing')`,
    [at.toISOString().slice(0, 10)],
  );
  for (const { id } of due) await tell(id, at);
}
