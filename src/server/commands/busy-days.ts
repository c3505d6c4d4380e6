import { addDays, dayAt, formatDay, type Day } from '~/domain/time.ts';
import { authorize } from '../authorize.ts';
import { changedDays, daysOffFrom, giveDaysBack, lockedBookedDays, takeDaysOff, todayOf, type DaysOffChanged } from '../days-off.ts';
import { execute, inTransaction, lockFor, rows } from '../db.ts';
import { conflict } from '../errors.ts';
import { SawyerProfile, type BroughtBy } from '../models/sawyer.ts';
import { calendarDays } from '../services/calendar-days.ts';
import { record } from '../transition.ts';
import { baseRoles, type Viewer } from '../viewer.ts';

/** How far ahead a calendar that is brought along is read, in days. */
const IMPORT_DAYS = 366;

/** The busy days of a calendar that a sawyer brings, and by what the sawyer knows it. */
export interface BroughtDays {
  readonly days: readonly Day[];
  readonly by: BroughtBy;
  /** The host of its address, or the name of its file. */
  readonly name: string;
}

/**
 * The busy days that a calendar names in the coming year; to be called before the transaction that takes them, for it may take seconds.
 * @param leastHours how many hours of entries make a day busy; whole-day entries always do
 * @throws Refusal `invalid` when the text is no calendar or repeats too much to be read
 */
export async function readBusyDays(sawyerId: string, { text, leastHours }: { readonly text: string; readonly leastHours: number }, at: Date): Promise<readonly Day[]> {
  const zone = (await SawyerProfile.findByPk(sawyerId))?.timeZone ?? 'UTC';
  const first = dayAt(at, zone);
  return calendarDays({ text, zone, first, last: addDays(first, IMPORT_DAYS), leastHours }, sawyerId);
}

/**
 * Takes the busy days of a calendar's file as days off, for the coming year, in place of those of the file before. Only the days are
 * kept, nothing of what the entries say.
 * @throws Refusal `invalid` when the text is no calendar
 */
export async function importCalendar(by: Viewer, calendar: { readonly text: string; readonly name: string; readonly leastHours: number }, at: Date): Promise<DaysOffChanged> {
  authorize(by, 'sawyer', 'keepCalendar', baseRoles(by));
  const days = await readBusyDays(by.id, calendar, at);
  return inTransaction(async () => {
    const changed = await takeBusyDays(by.id, { days, by: 'file', name: calendar.name }, at);
    await record(by, 'importCalendar', 'account', by.id, at, { data: { added: changed.added, removed: changed.removed } });
    return changed;
  });
}

/**
 * Puts the busy days of a calendar in place of those it had before, whoever asks for it; to be called in a transaction. A day that was
 * given back stays given back as long as the calendar names it.
 */
export async function takeBusyDays(sawyerId: string, { days, by, name }: BroughtDays, at: Date): Promise<DaysOffChanged> {
  const booked = await lockedBookedDays(sawyerId);
  const first = await todayOf(sawyerId, at);
  const before = await daysOffFrom(sawyerId, first);
  const named = days.filter((day) => !booked.has(day));
  await execute('DELETE FROM busy_day WHERE sawyer_id = $1 AND brought_by = $2 AND day >= $3 AND day <> ALL ($4::date[])', [sawyerId, by, first, named]);
  await execute(
    `INSERT INTO busy_day (sawyer_id, day, brought_by, calendar) SELECT $1, unnest($2::date[]), $3, $4
     ON CONFLICT (sawyer_id, day, brought_by) DO UPDATE SET calendar = excluded.calendar`,
    [sawyerId, named, by, name],
  );
  return { ...changedDays(before, await daysOffFrom(sawyerId, first)), booked: days.filter((day) => booked.has(day)) };
}

/** Forgets every day ahead that was taken from the calendar brought so. @returns how many days are open that were not */
export async function forgetBusyDays(by: Viewer, brought: BroughtBy, at: Date): Promise<number> {
  authorize(by, 'sawyer', 'keepCalendar', baseRoles(by));
  return inTransaction(async () => {
    await lockFor('calendar', by.id);
    const first = await todayOf(by.id, at);
    const before = await daysOffFrom(by.id, first);
    await execute('DELETE FROM busy_day WHERE sawyer_id = $1 AND brought_by = $2 AND day >= $3', [by.id, brought, first]);
    const { removed } = changedDays(before, await daysOffFrom(by.id, first));
    if (removed > 0) await record(by, 'forgetBusyDays', 'account', by.id, at, { data: { removed } });
    return removed;
  });
}

/** What a sawyer may say of a busy day: keep it off whatever that calendar says later, open it all the same, or take it off again after all. */
export type BusyDayAnswer = 'keep' | 'open' | 'close';

/**
 * Answers for one busy day of another calendar.
 * @throws Refusal `conflict` when no calendar names the day any more, or it is booked by now
 */
export async function answerBusyDay(by: Viewer, { day, answer }: { readonly day: Day; readonly answer: BusyDayAnswer }, at: Date): Promise<void> {
  authorize(by, 'sawyer', 'keepCalendar', baseRoles(by));
  await inTransaction(async () => {
    const booked = await lockedBookedDays(by.id);
    const named = day < (await todayOf(by.id, at)) ? [] : await rows('SELECT 1 AS one FROM busy_day WHERE sawyer_id = $1 AND day = $2', [by.id, day]);
    if (named.length === 0) throw conflict(`No other calendar of yours names ${formatDay(day)} any more. Load the calendar again.`);
    if (answer !== 'open' && booked.has(day)) throw conflict(`A booking stands on ${formatDay(day)}. Agree on another day with the landowner first.`);
    if (answer === 'keep') await takeDaysOff(by.id, [day]);
    else if (answer === 'open') await giveDaysBack(by.id, [day], at);
    else await execute('UPDATE busy_day SET given_back_at = NULL WHERE sawyer_id = $1 AND day = $2', [by.id, day]);
    await record(by, 'answerBusyDay', 'account', by.id, at, { data: { day, answer } });
  });
}
