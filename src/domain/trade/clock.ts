import { good, type Problem, type Result } from '~/domain/result.ts';

/** What the time was spent on. `preparing` is arrival to the first cut; `breakdown` and `sharpening` are the sawyer's own. */
export type ClockActivity = 'preparing' | 'sawing' | 'waiting' | 'breakdown' | 'sharpening';

export interface ClockEntry {
  readonly activity: ClockActivity;
  readonly startsAt: Date;
  readonly endsAt: Date;
}

/** How a clock entry was first written, before it was put right, and why. */
export interface ClockCorrection {
  readonly startsAt: string;
  readonly endsAt: string;
  readonly reason: string;
}

/** A clock entry that has been put right before the tally was signed: what it said before goes on standing beside it, oldest first. */
export function corrected<Entry extends { readonly startsAt: string; readonly endsAt: string; readonly corrections?: readonly ClockCorrection[] | undefined }>(entry: Entry, to: ClockCorrection): Entry {
  const { startsAt, endsAt, corrections = [] } = entry;
  return { ...entry, startsAt: to.startsAt, endsAt: to.endsAt, corrections: [...corrections, { startsAt, endsAt, reason: to.reason }] };
}

/** What an entry said before, in words; empty for one that was never put right. */
export const correctionWords = (entry: { readonly corrections?: readonly ClockCorrection[] | undefined }, time: (iso: string) => string): string =>
  (entry.corrections ?? []).map(({ startsAt, endsAt, reason }) => `; put right, first written ${time(startsAt)} to ${time(endsAt)}: ${reason}`).join('');

const MS_PER_MINUTE = 60_000;
const LONGEST_HOURS = 18;

/**
 * Checks clock entries: each ends after it starts, none is longer than 18 hours, no two overlap.
 * Hours are elapsed hours between instants, so a change of the clocks in the night neither adds nor takes one.
 */
export function checkClock(entries: readonly ClockEntry[]): Result<readonly ClockEntry[]> {
  const problems: Problem[] = [];
  entries.forEach((entry, i) => {
    const ms = entry.endsAt.getTime() - entry.startsAt.getTime();
    if (!(ms > 0)) problems.push({ path: `${i}.endsAt`, message: 'The end must be after the start.' });
    else if (ms > LONGEST_HOURS * 60 * MS_PER_MINUTE) problems.push({ path: `${i}.endsAt`, message: `More than ${LONGEST_HOURS} hours in one entry. Check the day.` });
    if (entries.some((other, j) => j < i && other.startsAt < entry.endsAt && entry.startsAt < other.endsAt)) {
      problems.push({ path: `${i}.startsAt`, message: 'This time overlaps another entry.' });
    }
  });
  return problems.length === 0 ? good(entries) : { ok: false, problems };
}

/** Elapsed minutes of the entries with one of these activities. */
export function minutesOf(entries: readonly ClockEntry[], ...activities: readonly ClockActivity[]): number {
  return entries
    .filter((entry) => activities.includes(entry.activity))
    .reduce((sum, entry) => sum + (entry.endsAt.getTime() - entry.startsAt.getTime()) / MS_PER_MINUTE, 0);
}

/**
 * Minutes on the clock of an hourly basis: sawing and waiting for the landowner, and preparing when the clock runs from arrival.
 * The sawyer's own breakdown and sharpening are off it.
 */
export function minutesOnClock(entries: readonly ClockEntry[], from: 'first-cut' | 'arrival'): number {
  return from === 'arrival' ? minutesOf(entries, 'preparing', 'sawing', 'waiting') : minutesOf(entries, 'sawing', 'waiting');
}

/** Minutes as hours to the nearest quarter, half up: 67 min is 1, 68 min is 1.25. Rounded once for the whole job. */
export const quarterHours = (minutes: number): number => Math.floor(minutes / 15 + 0.5) / 4;
