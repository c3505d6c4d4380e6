import { formatCents } from '~/domain/money.ts';
import { paths } from '~/domain/paths.ts';
import { allowedOnPhone } from '~/emails/tally-letters.ts';
import type { TallyEntry } from '~/schemas/tally-entries.ts';
import { authorize, rolesOnBooking } from '../authorize.ts';
import { inTransaction } from '../db.ts';
import { conflict, invalid } from '../errors.ts';
import { enqueue } from '../jobs/queue.ts';
import { lockBooking } from '../locks.ts';
import { type Booking, DayAllowance, Log, MeasuredLog, MetalHit, Tally } from '../models/index.ts';
import { linkTo, partiesOf } from '../parties.ts';
import { frozenMill, dayLogs } from '../day-logs.ts';
import { moreThanListed } from '~/domain/trade/day-logs.ts';
import { heldCentsOf } from '../tally-work.ts';
import { record } from '../transition.ts';
import type { Viewer } from '../viewer.ts';
import { watchHold } from './watch-day.ts';

type Allow = Extract<TallyEntry, { kind: 'allow' }>;

const refuse = (path: string, message: string): never => {
  throw invalid([{ path, message }]);
};

/** The log that is allowed must be one that waits for it. */
async function checkLog(booking: Booking, input: Allow): Promise<void> {
  const log = input.logId === null ? null : await Log.findOne({ where: { id: input.logId, listingId: booking.listingId } });
  if (!log) return refuse('logId', 'This log is not one of the job’s.');
  const [day] = await dayLogs(booking, [log]);
  if (!day || (input.what === 'added-log') !== day.added || moreThanListed(day, await frozenMill(booking)).length === 0) refuse('logId', 'There is nothing to agree on for this log.');
}

/** `two more metal hits`, `$720.00 in all`: what was allowed, for a letter and the history. */
async function said(input: Allow): Promise<string> {
  const label = input.logId === null ? '' : ((await Log.findByPk(input.logId))?.label || 'a log');
  switch (input.what) {
    case 'metal': return 'two more metal hits';
    case 'increase': return `${formatCents(input.limitCents ?? 0)} in all`;
    case 'larger-log': return `${label}, larger than listed`;
    case 'added-log': return `${label}, added to the job`;
    case 'set-up-again': return 'another set-up after rain';
  }
}

/**
 * The landowner allows something on the day: on their own phone, or by name and finger on the sawyer's, in which case a letter tells
 * them so. A repeated send changes nothing.
 * @throws Refusal `invalid` for a log that waits for no word, or a limit not above the hold; `conflict` when nothing waits for it
 */
export async function allowOnTheDay(by: Viewer, input: { readonly booking: number; readonly allow: Allow }, at: Date): Promise<void> {
  await inTransaction(async () => {
    const booking = await lockBooking(input.booking);
    const { allow } = input;
    const roles = rolesOnBooking(by, booking);
    if (roles.has('sawyer') || roles.has('landowner')) if (await DayAllowance.findByPk(allow.id)) return;
    authorize(by, 'booking', 'allowOnTheDay', roles, booking.status);
    const onPhoneOf = roles.has('landowner') ? 'landowner' : 'sawyer';
    if (onPhoneOf === 'sawyer' && allow.signature === null) refuse('signature', 'On the sawyer’s phone the landowner signs with a finger.');
    if (allow.what === 'larger-log' || allow.what === 'added-log') await checkLog(booking, allow);
    else if (allow.logId !== null) refuse('logId', 'This is not about a log.');
    if (allow.what === 'increase') {
      const held = await heldCentsOf(booking.id);
      if (allow.limitCents === null || allow.limitCents <= held) refuse('limitCents', `More than is held: ${formatCents(held)}.`);
    } else if (allow.limitCents !== null) refuse('limitCents', 'Only an increase names an amount.');

    const tally = await Tally.findOne({ where: { bookingId: booking.id, part: 1 }, lock: true });
    if (!tally) throw conflict('Sawing has not begun.');
    await DayAllowance.create({ id: allow.id, bookingId: booking.id, what: allow.what, logId: allow.logId, limitCents: allow.limitCents, signedName: allow.name, signature: allow.signature, onPhoneOf, enteredBy: by.id, enteredAt: at });
    if (allow.what === 'metal') await tally.update({ metalAllowed: await MetalHit.count({ where: { tallyId: tally.id, removedAt: null } }) });
    if (allow.what === 'larger-log' && allow.logId !== null) await MeasuredLog.update({ agreedAt: at }, { where: { bookingId: booking.id, logId: allow.logId } });
    await tally.update({ revision: tally.revision + 1 });
    const what = await said(allow);
    await record(by, 'allowOnTheDay', 'booking', booking.id, at, { data: { what, onPhoneOf } });
    const { landowner, sawyer } = await partiesOf(booking);
    if (onPhoneOf === 'sawyer') await enqueue('send-mail', allowedOnPhone(landowner, sawyer.name, what, allow.name, linkTo(paths.signTally(booking.number))));
    await watchHold(by, booking, tally, at);
  });
}
