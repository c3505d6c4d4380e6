import { describe, expect, it } from 'vitest';
import { calendarDays } from '~/server/services/calendar-days.ts';
import type { CalendarRead, CalendarToRead } from '~/server/services/calendar-thread.ts';
import { Thread } from '~/server/services/thread.ts';

const calendar = (...lines: readonly string[]): CalendarToRead => ({
  text: ['BEGIN:VCALENDAR', 'VERSION:2.0', 'PRODID:x', 'BEGIN:VEVENT', ...lines, 'END:VEVENT', 'END:VCALENDAR', ''].join('\r\n'),
  zone: 'America/Chicago', first: '2026-07-20', last: '2027-07-21', leastHours: 4,
});
const oneDay = calendar('DTSTART;VALUE=DATE:20260803');
/** Looked for day after day, and no February has one. */
const endless = calendar('DTSTART;VALUE=DATE:20260101', 'RRULE:FREQ=DAILY;BYMONTH=2;BYMONTHDAY=31');
const endlessZone: CalendarToRead = {
  ...oneDay,
  text: [
    'BEGIN:VCALENDAR', 'VERSION:2.0', 'PRODID:x', 'BEGIN:VTIMEZONE', 'TZID:A', 'BEGIN:STANDARD', 'DTSTART:00010101T000000', 'TZOFFSETFROM:+0100', 'TZOFFSETTO:+0200', 'RRULE:FREQ=SECONDLY', 'END:STANDARD',
    'END:VTIMEZONE', 'BEGIN:VEVENT', 'DTSTART;TZID=A:20260801T000000', 'END:VEVENT', 'END:VCALENDAR', '',
  ].join('\r\n'),
};
const LONG_MS = 15_000;

describe('a thread', () => {
  it.each([['an entry', endless], ['a time zone', endlessZone]])('ends %s that repeats without end by itself, and goes on with what waits behind it', async (_, hostile) => {
    const thread = new Thread<CalendarToRead>('calendar-thread.mjs');
    // Begun once, so that no test of time is one of starting.
    expect(await thread.ask<CalendarRead>(oneDay, { mostMs: LONG_MS })).toEqual({ days: ['2026-08-03'] });
    const late = thread.ask(hostile, { mostMs: 500 });
    const behind = thread.ask<CalendarRead>(oneDay, { mostMs: LONG_MS });
    await expect(late).rejects.toMatchObject({ kind: 'unavailable' });
    expect(await behind).toEqual({ days: ['2026-08-03'] });
  });

  it('takes at most two tasks of one asker at a time, and others’ beside them', async () => {
    const thread = new Thread<CalendarToRead>('calendar-thread.mjs');
    const own = [1, 2, 3].map(() => thread.ask(oneDay, { mostMs: LONG_MS, asker: 'one' }));
    const other = thread.ask(oneDay, { mostMs: LONG_MS, asker: 'another' });
    expect((await Promise.allSettled(own)).map(({ status }) => status)).toEqual(['fulfilled', 'fulfilled', 'rejected']);
    await expect(own[2]).rejects.toMatchObject({ kind: 'tooMany', retryAfterS: 5 });
    expect(await other).toEqual({ days: ['2026-08-03'] });
    expect(await thread.ask(oneDay, { mostMs: LONG_MS, asker: 'one' })).toEqual({ days: ['2026-08-03'] });
  });
});

describe('a calendar from outside', () => {
  it('that is read without end is refused in words for its sawyer, and the next one is read', async () => {
    expect(await calendarDays(oneDay, 'bram')).toEqual(['2026-08-03']);
    await expect(calendarDays(endless, 'bram', 500)).rejects.toMatchObject({ kind: 'invalid', problems: [{ path: 'file', message: expect.stringContaining('repeats too much') }] });
    expect(await calendarDays(oneDay, 'bram')).toEqual(['2026-08-03']);
  });

  it('is no calendar: the refusal says so', async () => {
    await expect(calendarDays({ ...oneDay, text: 'x' }, 'bram')).rejects.toMatchObject({ kind: 'invalid', problems: [{ path: 'file', message: expect.stringContaining('not a calendar') }] });
  });
});
