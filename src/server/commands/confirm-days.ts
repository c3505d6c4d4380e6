import { Op } from 'sequelize';
import { bookingStates } from '~/domain/states/booking.ts';
import { checkProposedDays } from '~/domain/trade/milling-days.ts';
import { dayAt, dayStart, paymentDeadline, type Day } from '~/domain/time.ts';
import { daysAgreed, daysMoved } from '~/emails/booking-letters.ts';
import { authorize, rolesOnBooking } from '../authorize.ts';
import { inTransaction, lockFor, refusedBy } from '../db.ts';
import { conflict, forbidden } from '../errors.ts';
import { bookedDaysOf, sendInvitations } from '../invitations.ts';
import { enqueue } from '../jobs/queue.ts';
import { lockBooking } from '../locks.ts';
import { Bid, BookedDay, Booking, DayProposal, HeldPayment } from '../models/index.ts';
import { bookingLink, partiesOf } from '../parties.ts';
import { sawyerDays } from '../queries/open-days.ts';
import { record, transition } from '../transition.ts';
import type { Actor, Viewer } from '../viewer.ts';

/** Gives the booking these days in one step; the old ones are freed in the same transaction. */
async function swapDays(booking: Booking, days: readonly Day[], at: Date): Promise<void> {
  // Days that were sawn stay: after rain only what lies ahead is changed.
  const ahead = booking.status === 'sawing' ? { day: { [Op.gt]: dayAt(at, booking.timeZone) } } : {};
  await BookedDay.update({ active: false }, { where: { bookingId: booking.id, active: true, ...ahead } });
  for (const day of days) await BookedDay.create({ sawyerId: booking.sawyerId, day, outingId: booking.outingId, bookingId: booking.id });
}

/** A first agreement on a day: the hold falls due and both are told. The days are booked by the caller, in the same transaction. */
export async function agreeDays(by: Actor, booking: Booking, startsAt: Date, at: Date): Promise<void> {
  const bid = await Bid.findByPk(booking.bidId, { rejectOnEmpty: true });
  // Whoever agrees on tomorrow pays before tomorrow's start: the sawyer never sets out on a promise.
  const deadline = paymentDeadline(at, booking.timeZone);
  const payBy = deadline < startsAt ? deadline : startsAt;
  await transition(bookingStates, 'agree', booking, by, at, { startsAt, payBy, updatedAt: at });
  await HeldPayment.create({ bookingId: booking.id, dueCents: bid.holdCents, transferGroup: `booking-${booking.number}`, createdAt: at, updatedAt: at });
  const { landowner, sawyer } = await partiesOf(booking);
  const link = bookingLink(booking);
  await enqueue('send-mail', daysAgreed(landowner, sawyer, startsAt, booking.timeZone, { cents: bid.holdCents, payBy, mine: true }, link));
  await enqueue('send-mail', daysAgreed(sawyer, landowner, startsAt, booking.timeZone, { cents: bid.holdCents, payBy, mine: false }, link));
}

/** New days for a booking that was agreed or held before: no new payment. */
async function move(by: Viewer, booking: Booking, days: readonly Day[], startsAt: Date, at: Date): Promise<void> {
  if (booking.status === 'held') await transition(bookingStates, 'move', booking, by, at, { startsAt, updatedAt: at }, { data: { days } });
  else {
    if (booking.status !== 'sawing') await booking.update({ startsAt, payBy: booking.payBy && booking.payBy > startsAt ? startsAt : booking.payBy, updatedAt: at });
    await record(by, 'moveDays', 'booking', booking.id, at, { data: { days } });
  }
  const { landowner, sawyer } = await partiesOf(booking);
  await enqueue('send-mail', daysMoved(landowner, sawyer, days, startsAt, booking.timeZone, bookingLink(booking)));
  await enqueue('send-mail', daysMoved(sawyer, landowner, days, startsAt, booking.timeZone, bookingLink(booking)));
}

/**
 * The other side confirms the open proposal: the days are booked and, the first time, the hold falls due.
 * The sawyer's calendar is locked first, so that of two landowners confirming one day at the same instant one wins and the other reads why.
 * @throws Refusal `conflict` when the proposal has been replaced or a day has been taken or is now off, `forbidden` for one's own proposal
 */
export async function confirmDays(by: Viewer, input: { readonly booking: number; readonly proposal: string }, at: Date): Promise<void> {
  try {
    await inTransaction(async () => {
      const sawyerId = (await Booking.findOne({ where: { number: input.booking }, attributes: ['sawyerId'] }))?.sawyerId;
      if (sawyerId) await lockFor('calendar', sawyerId);
      const booking = await lockBooking(input.booking);
      authorize(by, 'booking', 'confirmDay', rolesOnBooking(by, booking), booking.status);
      const proposal = await DayProposal.findOne({ where: { bookingId: booking.id, status: 'open' }, lock: true });
      if (!proposal || proposal.id !== input.proposal) throw conflict('That proposal has been replaced. Look at the newest one.');
      if (proposal.proposedBy === by.id) throw forbidden('The other side confirms the days that you propose.');
      const startTime = proposal.startTime.slice(0, 5);
      const { days, problems } = checkProposedDays(proposal.days, startTime, booking.timeZone, at);
      const [first] = days;
      if (problems.length > 0 || !first) throw conflict(`Those days can no longer be booked. ${problems[0]?.message ?? ''}`.trim());

      const away = (await sawyerDays(booking.sawyerId, booking.timeZone, at, [], booking.id)).find((one) => one.away && days.includes(one.day));
      if (away) throw conflict(by.id === booking.sawyerId ? `You have ${away.day} off. Take it out of your days off first, or propose another day.` : `The sawyer now has ${away.day} off. Propose another day.`);

      const before = await bookedDaysOf(booking.id);
      await swapDays(booking, days, at);
      await DayProposal.update({ status: 'replaced' }, { where: { bookingId: booking.id, status: 'confirmed' } });
      await proposal.update({ status: 'confirmed', decidedAt: at });
      const startsAt = dayStart(first, booking.timeZone, startTime);
      if (booking.status === 'proposed') await agreeDays(by, booking, startsAt, at);
      else await move(by, booking, days, startsAt, at);
      await sendInvitations(booking, before);
    });
  } catch (error) {
    if (refusedBy(error, 'one_outing_a_day')) throw conflict('One of those days has just been taken. Propose another.');
    throw error;
  }
}
