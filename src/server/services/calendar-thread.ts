import { parentPort } from 'node:worker_threads';
import type { Day } from '../../domain/time.ts';
import { busyDays } from '../../domain/trade/busy-days.ts';
import { Refusal } from '../errors.ts';
import { busySpans } from './read-calendar.ts';
import type { Answer } from './thread.ts';

/** A calendar to be read: the busy days from `first` to `last` on the sawyer's own clock. */
export interface CalendarToRead {
  readonly text: string;
  readonly zone: string;
  readonly first: Day;
  readonly last: Day;
  readonly leastHours: number;
}

/** Its busy days, or why it is no calendar. */
export type CalendarRead = { readonly days: readonly Day[] } | { readonly problem: string };

function read({ text, zone, first, last, leastHours }: CalendarToRead): CalendarRead {
  try {
    return { days: busyDays(busySpans(text, zone, first, last), zone, first, last, leastHours) };
  } catch (error) {
    if (error instanceof Refusal) return { problem: error.problems[0]?.message ?? error.message };
    throw error;
  }
}

parentPort?.on('message', ({ id, ...calendar }: CalendarToRead & { readonly id: number }) => {
  try {
    parentPort?.postMessage({ id, value: read(calendar) } satisfies Answer);
  } catch (error) {
    parentPort?.postMessage({ id, error: error instanceof Error ? (error.stack ?? error.message) : String(error) } satisfies Answer);
  }
});
