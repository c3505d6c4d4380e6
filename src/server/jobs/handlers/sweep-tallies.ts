import { Op } from 'sequelize';
import { paths } from '~/domain/paths.ts';
import { addHours, SIGNING_HOURS } from '~/domain/time.ts';
import { tallyToSign, tallyWaits } from '~/emails/tally-letters.ts';
import { signByDeadline } from '../../commands/sign-tally.ts';
import { inTransaction } from '../../db.ts';
import { lockBooking } from '../../locks.ts';
import { Booking } from '../../models/booking.ts';
import { linkTo, partiesOf } from '../../parties.ts';
import { tallyWork } from '../../tally-work.ts';
import { enqueue } from '../queue.ts';

/** Both are told twice before an unanswered tally counts as signed: this many hours after it was offered. */
const remindedAfterHours = [24, 60] as const;

async function remind(number: number, at: Date): Promise<void> {
  await inTransaction(async () => {
    const booking = await lockBooking(number);
    if (booking.status !== 'tallied' || !booking.signBy) return;
    const offeredAt = addHours(booking.signBy, -SIGNING_HOURS);
    const due = remindedAfterHours.filter((hours) => addHours(offeredAt, hours) <= at).length;
    if (due <= booking.signReminders) return;
    await booking.update({ signReminders: due });
    const work = await tallyWork(booking);
    const { landowner, sawyer } = await partiesOf(booking);
    const link = linkTo(paths.signTally(booking.number));
    await enqueue('send-mail', tallyToSign(landowner, sawyer.name, work?.settlement.costCents ?? 0, booking.signBy, booking.timeZone, link, true));
    await enqueue('send-mail', tallyWaits(sawyer, landowner.name, booking.signBy, booking.timeZone, link));
  });
}

/** Signs tallies whose 72 hours have passed, and reminds both sides of those that still wait. Leans on booking_to_sign. */
export async function sweepTallies(at: Date): Promise<void> {
  for (const { number } of await Booking.findAll({ where: { status: 'tallied', signBy: { [Op.lte]: at } }, attributes: ['number'] })) await signByDeadline(number, at);
  for (const { number } of await Booking.findAll({ where: { status: 'tallied', signBy: { [Op.gt]: at } }, attributes: ['number'] })) await remind(number, at);
}
