import { formatCents } from '~/domain/money.ts';
import { paths } from '~/domain/paths.ts';
import { noShowStates } from '~/domain/states/no-show.ts';
import { addHours, formatInstant, NO_SHOW_ANSWER_HOURS } from '~/domain/time.ts';
import { noShowContested, noShowDismissed, noShowReported } from '~/emails/no-show-letters.ts';
import { authorize, rolesOnBooking } from '../authorize.ts';
import { cancellationOf, lockBookingMoney } from '../booking-money.ts';
import { inTransaction, rows } from '../db.ts';
import { conflict } from '../errors.ts';
import { enqueue } from '../jobs/queue.ts';
import { lockBooking } from '../locks.ts';
import { NoShow, type Booking } from '../models/index.ts';
import { bookingLink, linkTo, partiesOf } from '../parties.ts';
import { record, transition } from '../transition.ts';
import { system, type Actor, type Viewer } from '../viewer.ts';
import { endBeforeSawing } from './cancel-booking.ts';

const clock = system('no-show deadline');

type Side = NoShow['absent'];
const other = (side: Side): Side => (side === 'landowner' ? 'sawyer' : 'landowner');
const sideOf = (booking: Booking, by: Viewer): Side => (by.id === booking.landownerId ? 'landowner' : 'sawyer');

/** The report that is open on a booking and still about its day, locked. One about an older day is over. */
async function openReport(booking: Booking, by: Actor, at: Date): Promise<NoShow | null> {
  const report = await NoShow.findOne({ where: { bookingId: booking.id, status: ['reported', 'contested'] }, lock: true });
  if (!report || (booking.status === 'held' && report.startsAt.getTime() === booking.startsAt?.getTime())) return report;
  await transition(noShowStates, 'pass', report, by, at);
  return null;
}

/** What the report means for the money, if it stands. */
async function moneyWords(booking: Booking, absent: Side, at: Date): Promise<string> {
  const parts = await cancellationOf(booking, absent, at);
  return parts.payableCents === 0
    ? `The whole hold of ${formatCents(parts.refundCents)} goes back to the card.`
    : `Set-up and travel of ${formatCents(parts.payableCents)} are owed out of the hold; ${formatCents(parts.refundCents)} goes back to the card.`;
}

/**
 * One side reports, from the day's start on, that the other did not come. The other may answer; unanswered it stands.
 * @throws Refusal `conflict` before the start, or when a report is open already
 */
export async function reportNoShow(by: Viewer, input: { readonly booking: number; readonly says: string }, at: Date): Promise<void> {
  await inTransaction(async () => {
    const booking = await lockBooking(input.booking);
    authorize(by, 'booking', 'reportNoShow', rolesOnBooking(by, booking), booking.status);
    if (!booking.startsAt || booking.startsAt > at) throw conflict(`The day has not begun${booking.startsAt ? `: it starts ${formatInstant(booking.startsAt, booking.timeZone)}` : ''}.`);
    const absent = other(sideOf(booking, by));
    const open = await openReport(booking, by, at);
    if (open) throw conflict(open.absent === absent ? 'You have reported this already.' : 'The other side has reported that you did not come. Answer that first.');
    const answerBy = addHours(at, NO_SHOW_ANSWER_HOURS);
    await NoShow.create({ bookingId: booking.id, absent, startsAt: booking.startsAt, says: input.says, reportedAt: at, answerBy });
    await booking.update({ updatedAt: at });
    await record(by, 'reportNoShow', 'booking', booking.id, at, { data: { absent } });
    const parties = await partiesOf(booking);
    await enqueue('send-mail', noShowReported(parties[absent], by.name, input.says, { answerBy, zone: booking.timeZone, money: await moneyWords(booking, absent, at) }, linkTo(paths.noShow(booking.number))));
  });
}

/** The one who reported takes it back: the other came after all. */
export async function withdrawNoShow(by: Viewer, number: number, at: Date): Promise<void> {
  await inTransaction(async () => {
    const booking = await lockBooking(number);
    authorize(by, 'booking', 'reportNoShow', rolesOnBooking(by, booking), booking.status);
    const report = await openReport(booking, by, at);
    if (!report || report.absent === sideOf(booking, by)) throw conflict('There is no report of yours to take back.');
    await transition(noShowStates, 'pass', report, by, at, { decidedAt: at });
    await record(by, 'withdrawNoShow', 'booking', booking.id, at);
  });
}

/** The side that is said not to have come agrees, and the booking ends; or contests it, and a moderator decides. */
export async function answerNoShow(by: Viewer, input: { readonly booking: number; readonly agrees: boolean; readonly says: string }, at: Date): Promise<void> {
  await inTransaction(async () => {
    const booking = await lockBooking(input.booking);
    authorize(by, 'booking', 'reportNoShow', rolesOnBooking(by, booking), booking.status);
    const report = await openReport(booking, by, at);
    if (report?.status !== 'reported' || report.absent !== sideOf(booking, by)) throw conflict('There is nothing to answer.');
    if (input.agrees) return stand(by, booking, report, { answer: input.says || null, answeredAt: at }, at);
    await transition(noShowStates, 'contest', report, by, at, { answer: input.says, answeredAt: at });
    await record(by, 'contestNoShow', 'booking', booking.id, at);
    const { landowner, sawyer } = await partiesOf(booking);
    for (const person of [landowner, sawyer]) await enqueue('send-mail', noShowContested(person, by.name, input.says, bookingLink(booking)));
  });
}

/** A moderator decides a contested report with a reason that both sides read. */
export async function decideNoShow(by: Viewer, input: { readonly booking: number; readonly stands: boolean; readonly because: string }, at: Date): Promise<void> {
  await inTransaction(async () => {
    const booking = await lockBooking(input.booking);
    authorize(by, 'booking', 'decideNoShow', rolesOnBooking(by, booking), booking.status);
    const report = await openReport(booking, by, at);
    if (report?.status !== 'contested') throw conflict('There is nothing to decide.');
    const decision = { decidedBy: by.id, because: input.because };
    if (input.stands) return stand(by, booking, report, decision, at);
    await transition(noShowStates, 'dismiss', report, by, at, { ...decision, decidedAt: at });
    await record(by, 'dismissNoShow', 'booking', booking.id, at, { data: { because: input.because } });
    const { landowner, sawyer } = await partiesOf(booking);
    for (const person of [landowner, sawyer]) await enqueue('send-mail', noShowDismissed(person, input.because, bookingLink(booking)));
  });
}

/** Ends the booking as if the absent side had cancelled late, as of the report. */
async function stand(by: Actor, booking: Booking, report: NoShow, set: { readonly answer?: string | null; readonly answeredAt?: Date; readonly decidedBy?: string; readonly because?: string }, at: Date): Promise<void> {
  const absent = (await partiesOf(booking))[report.absent];
  await transition(noShowStates, 'stand', report, by, at, { ...set, decidedAt: at });
  const reason = `${absent.name} did not come.${set.because ? ` ${set.because}` : ''}`;
  await record(by, 'endForNoShow', 'booking', booking.id, at, { data: { absent: report.absent } });
  await endBeforeSawing(by, booking, { side: report.absent, cancelledBy: absent.id, saidBy: 'Skidway', reason, asOf: report.reportedAt }, at);
}

/** Reports whose time to answer is over stand; those whose booking has moved on are over. Leans on one_open_no_show. */
export async function sweepNoShows(at: Date): Promise<void> {
  const found = await rows<{ bookingId: string }>(
    `SELECT report.booking_id AS "bookingId" FROM no_show report JOIN booking ON booking.id = report.booking_id
     WHERE report.status IN ('reported', 'contested') AND (booking.status <> 'held' OR booking.starts_at <> report.starts_at OR (report.status = 'reported' AND report.answer_by <= $1)) LIMIT 200`,
    [at],
  );
  for (const { bookingId } of found) {
    await inTransaction(async () => {
      const { booking } = await lockBookingMoney(bookingId);
      const report = await openReport(booking, clock, at);
      if (report?.status === 'reported' && report.answerBy <= at) await stand(clock, booking, report, {}, at);
    });
  }
}
