import type { ClockActivity } from './clock.ts';

/** Time that is being spent, as a phone keeps it until it is stopped. */
export interface RunningClock {
  readonly activity: ClockActivity;
  readonly startsAt: string;
}

interface Hours {
  readonly startsAt: string;
  readonly endsAt: string;
}

const MINUTE_MS = 60_000;
/** One entry is at most this long; a clock that was forgotten overnight ends there and is put right by hand. */
const LONGEST_MS = 18 * 60 * MINUTE_MS;

/**
 * The hours that a running clock has made, in whole minutes; null before the first has passed. Hours that were typed meanwhile stand: the
 * clock then counts from the end of the last of them.
 * @param others entries that are in the tally already
 */
export function hoursOf(running: RunningClock, now: Date, others: readonly Hours[]): Hours | null {
  const end = Math.min(now.getTime(), Date.parse(running.startsAt) + LONGEST_MS);
  const taken = others.filter((other) => Date.parse(other.startsAt) < end && Date.parse(other.endsAt) > Date.parse(running.startsAt)).map(({ endsAt }) => Date.parse(endsAt));
  const start = Math.max(Date.parse(running.startsAt), ...taken);
  const minutes = Math.floor((end - start) / MINUTE_MS);
  return minutes < 1 ? null : { startsAt: new Date(start).toISOString(), endsAt: new Date(start + minutes * MINUTE_MS).toISOString() };
}

/** `1 h 20 min`, `45 min`. */
export const minutesSaid = (minutes: number): string => (minutes < 60 ? `${Math.floor(minutes)} min` : `${Math.floor(minutes / 60)} h ${Math.floor(minutes % 60)} min`);
