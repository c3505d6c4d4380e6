import { addDays, dayAt, dayStart, type Day } from '../../src/domain/time.ts';

/** The clock that the hills around ZIP 54665 go by. */
export const ZONE = 'America/Chicago';

/** The story's days, counted from the day it is told: `day(-3)` was three days ago. */
export interface Calendar {
  readonly now: Date;
  readonly day: (offset: number) => Day;
  /** A day on which sawyers work: a Sunday to come becomes the Monday after it. What is past was sawn on the day told, by agreement on a Sunday too. */
  readonly workday: (offset: number) => Day;
  /** An instant of that day on the local clock, never after the moment of telling. */
  readonly at: (offset: number, clock: string) => Date;
}

export function calendarFrom(now: Date): Calendar {
  const today = dayAt(now, ZONE);
  const day = (offset: number): Day => addDays(today, offset);
  return {
    now,
    day,
    workday: (offset) => (offset > 0 && new Date(`${day(offset)}T00:00:00Z`).getUTCDay() === 0 ? day(offset + 1) : day(offset)),
    at: (offset, clock) => {
      const instant = dayStart(day(offset), ZONE, clock);
      return instant < now ? instant : now;
    },
  };
}
