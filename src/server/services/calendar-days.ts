import type { Day } from '~/domain/time.ts';
import { invalid, Refusal } from '../errors.ts';
import type { CalendarRead, CalendarToRead } from './calendar-thread.ts';
import { Thread } from './thread.ts';

/**
 * How long a calendar may take to be read, ms. A year of anybody's is read in a part of this; what repeats in ways that never come true
 * would be looked for for ever.
 */
const MOST_MS = 15_000;

const thread = new Thread<CalendarToRead>('calendar-thread.mjs', { maxOldGenerationSizeMb: 256 });

/**
 * The busy days in an iCalendar text. It comes from outside, so it is read in a thread with an end to time and memory.
 * @param asker whose calendar it is
 * @param mostMs how long it may take
 * @throws Refusal `invalid` at `file` when it is no calendar or takes too long, `tooMany`, `unavailable`
 */
export async function calendarDays(calendar: CalendarToRead, asker: string, mostMs = MOST_MS): Promise<readonly Day[]> {
  const read = await thread.ask<CalendarRead>(calendar, { mostMs, asker }).catch((error: unknown) => {
    const long: CalendarRead = { problem: 'This calendar repeats too much to be read. Export only the coming months.' };
    if (error instanceof Refusal && error.kind === 'unavailable') return long;
    throw error;
  });
  if ('problem' in read) throw invalid([{ path: 'file', message: read.problem }]);
  return read.days;
}
