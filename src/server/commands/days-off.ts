import { addDays, dayAt, type Day } from '~/domain/time.ts';
import { busyDays } from '~/domain/trade/busy-days.ts';
import { authorize } from '../authorize.ts';
import { inTransaction, lockFor, rows } from '../db.ts';
import { DayOff, SawyerProfile } from '../models/sawyer.ts';
import { busySpans } from '../read-calendar.ts';
import { record } from '../transition.ts';
import { baseRoles, type Viewer } from '../viewer.ts';

/** How far ahead a calendar that is brought along is read, in days. */
const IMPORT_DAYS = 366;

export interface DaysOffChanged {
  readonly added: number;
  readonly removed: number;
  /** Days that were asked for and stay working days, because a booking stands on them. */
  readonly booked: readonly Day[];
}

const today = async (by: Viewer, at: Date): Promise<Day> => dayAt(at, (await SawyerProfile.findByPk(by.id))?.timeZone ?? 'UTC');

/** The days on which a booking stands. The sawyer's calendar is locked, so nobody books one meanwhile. */
async function lockedBookedDays(by: Pick<Viewer, 'id'>): Promise<ReadonlySet<Day>> {
  await lockFor('calendar', by.id);
  return new Set((await rows<{ day: Day }>('SELECT day::text AS day FROM booked_day WHERE sawyer_id = $1 AND active', [by.id])).map(({ day }) => day));
}

async function put(by: Pick<Viewer, 'id'>, days: readonly Day[], source: 'own' | 'imported'): Promise<number> {
  // An own day off that another calendar names too stays the sawyer's own.
  const put = await rows<{ day: Day }>('INSERT INTO day_off (sawyer_id, day, source) SELECT $1, unnest($2::date[]), $3 ON CONFLICT (sawyer_id, day) DO NOTHING RETURNING day', [by.id, days, source]);
  return put.length;
}

/**
 * Takes days off and gives days back. Days past are left alone; a booked day stays booked: it is moved with the landowner, not by this.
 */
export async function changeDaysOff(by: Viewer, change: { readonly add: readonly Day[]; readonly remove: readonly Day[] }, at: Date): Promise<DaysOffChanged> {
  authorize(by, 'sawyer', 'keepCalendar', baseRoles(by));
  return inTransaction(async () => {
    const booked = await lockedBookedDays(by);
    const from = await today(by, at);
    const add = [...new Set(change.add)].filter((day) => day >= from);
    const added = await put(by, add.filter((day) => !booked.has(day)), 'own');
    const removed = await DayOff.destroy({ where: { sawyerId: by.id, day: change.remove.filter((day) => day >= from) } });
    if (added + removed > 0) await record(by, 'changeDaysOff', 'account', by.id, at, { data: { added, removed } });
    return { added, removed, booked: add.filter((day) => booked.has(day)).sort() };
  });
}

/**
 * Takes the busy days of another calendar as days off, for the coming year, in place of those taken before. Only the days are kept,
 * nothing of what the entries say.
 * @param leastHours how many hours of entries make a day busy; whole-day entries always do
 * @throws Refusal `invalid` when the text is no calendar
 */
export async function importCalendar(by: Viewer, calendar: { readonly text: string; readonly leastHours: number }, at: Date): Promise<DaysOffChanged> {
  authorize(by, 'sawyer', 'keepCalendar', baseRoles(by));
  return inTransaction(async () => {
    const changed = await takeBusyDays(by.id, calendar, at);
    await record(by, 'importCalendar', 'account', by.id, at, { data: { added: changed.added, removed: changed.removed } });
    return changed;
  });
}

/**
 * Puts the busy days of a calendar in place of those taken before, whoever asks for it; to be called in a transaction.
 * @throws Refusal `invalid` when the text is no calendar
 */
export async function takeBusyDays(sawyerId: string, calendar: { readonly text: string; readonly leastHours: number }, at: Date): Promise<DaysOffChanged> {
  const zone = (await SawyerProfile.findByPk(sawyerId))?.timeZone ?? 'UTC';
  const first = dayAt(at, zone);
  const last = addDays(first, IMPORT_DAYS);
  const busy = busyDays(busySpans(calendar.text, zone, first, last), zone, first, last, calendar.leastHours);
  const booked = await lockedBookedDays({ id: sawyerId });
  const removed = await forget({ id: sawyerId }, first);
  const added = await put({ id: sawyerId }, busy.filter((day) => !booked.has(day)), 'imported');
  return { added, removed, booked: busy.filter((day) => booked.has(day)) };
}

const forget = async (by: Pick<Viewer, 'id'>, from: Day): Promise<number> => (await rows('DELETE FROM day_off WHERE sawyer_id = $1 AND day >= $2 AND source = $3 RETURNING day', [by.id, from, 'imported'])).length;

/** Gives back every day that was taken from another calendar. @returns how many */
export async function forgetImported(by: Viewer, at: Date): Promise<number> {
  authorize(by, 'sawyer', 'keepCalendar', baseRoles(by));
  return inTransaction(async () => {
    await lockFor('calendar', by.id);
    const removed = await forget(by, await today(by, at));
    if (removed > 0) await record(by, 'forgetImportedDays', 'account', by.id, at, { data: { removed } });
    return removed;
  });
}
