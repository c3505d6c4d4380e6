import type { Problem } from '../result.ts';
import { checkMillingDay, daysBetween, type Day } from '../time.ts';

/** At most this many days for one booking. */
export const MOST_DAYS = 10;
/** The days of a booking lie within this many days of each other. */
export const WIDEST_SPAN_DAYS = 31;

/** The days of the week in the order of their numbers: 1 Monday … 7 Sunday. */
export const WEEKDAYS = ['Monday', 'Tuesday', 'Wednesday', 'Thursday', 'Friday', 'Saturday', 'Sunday'] as const;

/** `Monday to Saturday`, or `Monday, Wednesday, Friday`: days of the week by their numbers (Monday is 1), three or more in a row as a range. */
export function weekdaysSaid(days: readonly number[]): string {
  const inOrder = [...new Set(days)].sort((a, b) => a - b);
  const runs: number[][] = [];
  for (const day of inOrder) {
    const last = runs.at(-1);
    if (last && last.at(-1) === day - 1) last.push(day);
    else runs.push([day]);
  }
  const name = (day: number | undefined): string => WEEKDAYS[(day ?? 1) - 1] ?? '';
  return runs.map((run) => (run.length >= 3 ? `${name(run[0])} to ${name(run.at(-1))}` : run.map(name).join(', '))).join(', ');
}

/** What stands on a sawyer's day, for those who want to book it. */
export type DayState = 'open' | 'offered' | 'booked' | 'off';

/** One of a sawyer's days. `away` marks a day off in the calendar: it cannot be booked at all, while another `off` day may be asked for. */
export interface StandingDay {
  readonly day: Day;
  readonly state: DayState;
  readonly away?: true;
}

/**
 * Checks the days that one side proposes for a booking: real, ahead, at most 60 days away, each once.
 * @param startTime `HH:MM` on the site's clock
 * @returns the days in order, or what is wrong, under the paths `days` and `startTime`
 */
export function checkProposedDays(days: readonly Day[], startTime: string, zone: string, now: Date): { readonly days: readonly Day[]; readonly problems: readonly Problem[] } {
  const problems: Problem[] = [];
  if (!/^([01]\d|2[0-3]):[0-5]\d$/.test(startTime)) problems.push({ path: 'startTime', message: 'Write the time like 08:00.' });
  const inOrder = [...new Set(days.map((day) => day.trim()).filter(Boolean))].sort();
  if (inOrder.length === 0) problems.push({ path: 'days', message: 'Choose at least one day.' });
  if (inOrder.length > MOST_DAYS) problems.push({ path: 'days', message: `Choose at most ${MOST_DAYS} days.` });
  if (problems.length > 0) return { days: inOrder, problems };
  for (const day of inOrder) {
    const checked = checkMillingDay(day, zone, now, startTime);
    if (!checked.ok) problems.push(...checked.problems.map(({ message }) => ({ path: 'days', message: `${day}: ${message}` })));
  }
  const [first, last] = [inOrder[0], inOrder.at(-1)];
  if (problems.length === 0 && first && last && daysBetween(first, last) > WIDEST_SPAN_DAYS) problems.push({ path: 'days', message: 'Keep the days of one job within a month.' });
  return { days: inOrder, problems };
}

/**
 * The state of each of a sawyer's days from `from` on.
 * @param workingDays weekdays worked, 1 Monday … 7 Sunday
 * @param notice whole days that must lie between today and the first open day
 */
export function dayStates(
  from: Day,
  count: number,
  sawyer: { readonly workingDays: readonly number[]; readonly notice: number; readonly booked: ReadonlySet<Day>; readonly off: ReadonlySet<Day>; readonly offered: ReadonlySet<Day> },
): readonly StandingDay[] {
  const start = Date.parse(`${from}T00:00:00Z`);
  return Array.from({ length: count }, (_, index) => {
    const date = new Date(start + index * 86_400_000);
    const day = date.toISOString().slice(0, 10);
    const weekday = date.getUTCDay() === 0 ? 7 : date.getUTCDay();
    if (sawyer.booked.has(day)) return { day, state: 'booked' as const };
    if (sawyer.off.has(day)) return { day, state: 'off' as const, away: true as const };
    if (sawyer.offered.has(day)) return { day, state: 'offered' as const };
    if (!sawyer.workingDays.includes(weekday) || index < sawyer.notice) return { day, state: 'off' as const };
    return { day, state: 'open' as const };
  });
}

/** The first day that is open or offered, or null. */
export const earliestOpenDay = (states: ReturnType<typeof dayStates>): Day | null => states.find(({ state }) => state === 'open' || state === 'offered')?.day ?? null;
