import { Op } from 'sequelize';
import { paths } from '~/domain/paths.ts';
import { dayAt } from '~/domain/time.ts';
import { boardsReminder } from '~/emails/booking-letters.ts';
import { inTransaction } from '../../db.ts';
import { Booking, DryingPlan } from '../../models/index.ts';
import { linkTo, partiesOf } from '../../parties.ts';
import { enqueue } from '../queue.ts';

async function remind(bookingId: string, at: Date): Promise<void> {
  await inTransaction(async () => {
    const plan = await DryingPlan.findByPk(bookingId, { lock: true });
    const booking = await Booking.findByPk(bookingId, { rejectOnEmpty: true });
    if (!plan?.remindOn || plan.remindedAt || plan.remindOn > dayAt(at, booking.timeZone)) return;
    await plan.update({ remindedAt: at });
    const { landowner } = await partiesOf(booking);
    await enqueue('send-mail', boardsReminder(landowner, plan.targetPct, linkTo(paths.afterJob(booking.number))));
  });
}

/** Reminds landowners of their stack on the day they chose, once. Leans on drying_plan_to_remind. */
export async function remindOfBoards(at: Date): Promise<void> {
  const tomorrow = new Date(at.getTime() + 86_400_000).toISOString().slice(0, 10);
  const due = await DryingPlan.findAll({ where: { remindOn: { [Op.lte]: tomorrow }, remindedAt: null }, attributes: ['bookingId'] });
  for (const { bookingId } of due) await remind(bookingId, at);
}
