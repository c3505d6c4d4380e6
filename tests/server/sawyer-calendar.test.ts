import { spawnSync } from 'node:child_process';
import ICAL from 'ical.js';
import { beforeAll, describe, expect, it } from 'vitest';
import { addDays, dayAt } from '~/domain/time.ts';
import { renewCalendarFeed, stopCalendarFeed } from '~/server/commands/calendar-feed.ts';
import { chooseBid } from '~/server/commands/choose-bid.ts';
import { confirmDays } from '~/server/commands/confirm-days.ts';
import { forgetBusyDays, importCalendar } from '~/server/commands/busy-days.ts';
import { changeDaysOff } from '~/server/commands/days-off.ts';
import { placeBid } from '~/server/commands/place-bid.ts';
import { proposeDays } from '~/server/commands/propose-days.ts';
import { rows } from '~/server/db.ts';
import { Booking, DayProposal } from '~/server/models/index.ts';
import { CalendarFeed } from '~/server/models/sawyer.ts';
import { calendarFeed } from '~/server/queries/calendar-feed.ts';
import { earliestOpenDayOf } from '~/server/queries/open-days.ts';
import { sawyerCalendar } from '~/server/queries/sawyer-calendar.ts';
import { busySpans } from '~/server/services/read-calendar.ts';
import { type Cast, makeCast } from '../support/cast.ts';
import { bidOf, makeOpenListing, MARKET_AT, setUpSawyer } from '../support/sawing-market.ts';

const ZONE = 'America/Chicago';
const today = dayAt(MARKET_AT, ZONE);
const day = (ahead: number): string => addDays(today, ahead);
let cast: Cast;
let mill = '';

beforeAll(async () => {
  cast = await makeCast();
  mill = await setUpSawyer(cast.bram.id);
  await setUpSawyer(cast.cleo.id);
});

const daysOff = async (): Promise<string[]> => (await rows<{ day: string }>('SELECT day::text AS day FROM sawyer_off WHERE sawyer_id = $1 ORDER BY day', [cast.bram.id])).map((row) => row.day);
async function chosen(offered: readonly string[]): Promise<number> {
  const listing = await makeOpenListing(cast.ada.id);
  return chooseBid(cast.ada, await placeBid(cast.bram, listing.number, bidOf(mill, { days: [...offered] }), MARKET_AT), 1, MARKET_AT);
}
const proposal = async (number: number): Promise<string> => {
  const booking = await Booking.findOne({ where: { number }, rejectOnEmpty: true });
  return (await DayProposal.findOne({ where: { bookingId: booking.id, status: 'open' }, rejectOnEmpty: true })).id;
};

describe('days off', () => {
  it('are only a sawyer’s to take, and past days are left alone', async () => {
    await expect(changeDaysOff(cast.ada, { add: [day(3)], remove: [] }, MARKET_AT)).rejects.toMatchObject({ kind: 'forbidden' });
    expect(await changeDaysOff(cast.bram, { add: [day(-1), day(3), day(3)], remove: [] }, MARKET_AT)).toEqual({ added: 1, removed: 0, booked: [] });
    expect(await daysOff()).toEqual([day(3)]);
    expect(await changeDaysOff(cast.bram, { add: [], remove: [day(3), day(30)] }, MARKET_AT)).toMatchObject({ removed: 1 });
  });

  it('move the earliest open day, and beat a day that was offered', async () => {
    const before = await earliestOpenDayOf(cast.cleo.id, ZONE, MARKET_AT);
    await changeDaysOff(cast.cleo, { add: [before ?? ''], remove: [] }, MARKET_AT);
    const after = await earliestOpenDayOf(cast.cleo.id, ZONE, MARKET_AT);
    expect(after! > before!).toBe(true);
  });

  it('can be neither proposed nor confirmed, and a booked day cannot be taken off', async () => {
    const number = await chosen([day(8)]);
    await proposeDays(cast.bram, { booking: number, days: [day(8)], startTime: '08:00', note: '' }, MARKET_AT);
    await changeDaysOff(cast.bram, { add: [day(8)], remove: [] }, MARKET_AT);
    await expect(confirmDays(cast.ada, { booking: number, proposal: await proposal(number) }, MARKET_AT)).rejects.toMatchObject({ kind: 'conflict', message: expect.stringContaining('now has') });
    await expect(proposeDays(cast.ada, { booking: number, days: [day(8)], startTime: '08:00', note: '' }, MARKET_AT)).rejects.toMatchObject({ kind: 'conflict', message: expect.stringContaining('The sawyer has') });
    await expect(proposeDays(cast.bram, { booking: number, days: [day(8)], startTime: '08:00', note: '' }, MARKET_AT)).rejects.toMatchObject({ kind: 'conflict', message: expect.stringContaining('You have') });
    await proposeDays(cast.bram, { booking: number, days: [day(9)], startTime: '07:30', note: '' }, MARKET_AT);
    await confirmDays(cast.ada, { booking: number, proposal: await proposal(number) }, MARKET_AT);
    expect(await changeDaysOff(cast.bram, { add: [day(9), day(10)], remove: [] }, MARKET_AT)).toEqual({ added: 1, removed: 0, booked: [day(9)] });
  });

  it('taken and booked at the same instant end as one of the two', async () => {
    const number = await chosen([day(20)]);
    await proposeDays(cast.bram, { booking: number, days: [day(20)], startTime: '08:00', note: '' }, MARKET_AT);
    const id = await proposal(number);
    const [taken, confirmed] = await Promise.allSettled([changeDaysOff(cast.bram, { add: [day(20)], remove: [] }, MARKET_AT), confirmDays(cast.ada, { booking: number, proposal: id }, MARKET_AT)]);
    const isOff = (await daysOff()).includes(day(20));
    expect(confirmed.status === 'fulfilled').toBe(!isOff);
    expect(taken).toMatchObject({ status: 'fulfilled', value: { booked: isOff ? [] : [day(20)] } });
  });
});

const calendarOf = (...entries: string[]): string => ['BEGIN:VCALENDAR', 'VERSION:2.0', 'PRODID:-//check//EN', ...entries, 'END:VCALENDAR', ''].join('\r\n');
const entry = (uid: string, ...lines: string[]): string => ['BEGIN:VEVENT', `UID:${uid}`, 'DTSTAMP:20260701T000000Z', ...lines, 'END:VEVENT'].join('\r\n');
const plain = (text: string): string => text.replaceAll('-', '');

describe('a calendar that is brought along', () => {
  it('gives whole days, times by zone, and repeating entries without their exceptions', () => {
    const text = calendarOf(
      entry('a', `DTSTART;VALUE=DATE:${plain(day(2))}`, `DTEND;VALUE=DATE:${plain(day(4))}`),
      entry('b', 'DTSTART:20260728T140000Z', 'DTEND:20260728T200000Z'),
      entry('c', 'DTSTART;TZID=America/Chicago:20260803T080000', 'DTEND;TZID=America/Chicago:20260803T120000', 'RRULE:FREQ=WEEKLY;COUNT=3', 'EXDATE;TZID=America/Chicago:20260810T080000'),
      entry('d', 'DTSTART:20260729T140000Z', 'DTEND:20260729T200000Z', 'TRANSP:TRANSPARENT'),
      entry('e', 'DTSTART:20260730T140000Z', 'DTEND:20260730T200000Z', 'STATUS:CANCELLED'),
      entry('f@skidway', 'DTSTART:20260731T140000Z', 'DTEND:20260731T200000Z'),
    );
    expect(busySpans(text, ZONE, today, day(60))).toEqual([
      { from: day(2), until: day(4) },
      { start: new Date('2026-07-28T14:00:00Z'), end: new Date('2026-07-28T20:00:00Z') },
      { start: new Date('2026-08-03T13:00:00Z'), end: new Date('2026-08-03T17:00:00Z') },
      { start: new Date('2026-08-17T13:00:00Z'), end: new Date('2026-08-17T17:00:00Z') },
    ]);
  });

  it('reads the zone that a file brings, and an unnamed time on the sawyer’s clock', () => {
    const zone = ['BEGIN:VTIMEZONE', 'TZID:Far east', 'BEGIN:STANDARD', 'DTSTART:19700101T000000', 'TZOFFSETFROM:+0900', 'TZOFFSETTO:+0900', 'END:STANDARD', 'END:VTIMEZONE'].join('\r\n');
    const text = calendarOf(zone, entry('a', 'DTSTART;TZID=Far east:20260728T090000', 'DURATION:PT2H'), entry('b', 'DTSTART:20260729T090000', 'DTEND:20260729T100000'));
    expect(busySpans(text, ZONE, today, day(60))).toEqual([
      { start: new Date('2026-07-28T00:00:00Z'), end: new Date('2026-07-28T02:00:00Z') },
      { start: new Date('2026-07-29T14:00:00Z'), end: new Date('2026-07-29T15:00:00Z') },
    ]);
  });

  it.each(['', 'not a calendar', 'BEGIN:VCARD\r\nVERSION:3.0\r\nFN:x\r\nEND:VCARD', '<html></html>'])('is refused when it is none: %j', (text) => {
    expect(() => busySpans(text, ZONE, today, day(60))).toThrow(expect.objectContaining({ kind: 'invalid' }));
  });

  it('is refused when it repeats without measure', () => {
    const text = calendarOf(entry('a', 'DTSTART:19000101T000000Z', 'DTEND:19000101T000100Z', 'RRULE:FREQ=MINUTELY'));
    expect(() => busySpans(text, ZONE, today, day(60))).toThrow(expect.objectContaining({ problems: [expect.objectContaining({ message: expect.stringContaining('repeats too much') })] }));
  });

  it('replaces what it brought before and keeps the sawyer’s own days off', async () => {
    await changeDaysOff(cast.bram, { add: [day(40)], remove: await daysOff() }, MARKET_AT);
    const whole = (ahead: number): string => entry(`w${ahead}`, `DTSTART;VALUE=DATE:${plain(day(ahead))}`);
    expect(await importCalendar(cast.bram, { text: calendarOf(whole(40), whole(41), whole(9), whole(500)), name: 'mine.ics', leastHours: 4 }, MARKET_AT)).toEqual({ added: 1, removed: 0, booked: [day(9)] });
    expect(await importCalendar(cast.bram, { text: calendarOf(whole(42)), name: 'mine.ics', leastHours: 4 }, MARKET_AT)).toMatchObject({ added: 1, removed: 1 });
    expect((await daysOff()).filter((one) => one >= day(40))).toEqual([day(40), day(42)]);
    expect(await sawyerCalendar(cast.bram, day(42).slice(0, 7), MARKET_AT)).toMatchObject({ busyAhead: [{ by: 'file', calendar: 'mine.ics', days: 1 }] });
    expect(await forgetBusyDays(cast.bram, 'file', MARKET_AT)).toBe(1);
    expect((await daysOff()).filter((one) => one >= day(40))).toEqual([day(40)]);
  });
});

describe('the private feed', () => {
  const secretOf = async (): Promise<string> => /\/calendar\/([\w-]{43})\.ics$/.exec((await sawyerCalendar(cast.bram, '', MARKET_AT)).feed ?? '')?.[1] ?? '';

  it('tells milling days, offers and days off, and never the place', async () => {
    await renewCalendarFeed(cast.bram, MARKET_AT);
    const text = await calendarFeed(await secretOf(), MARKET_AT);
    const events = new ICAL.Component(ICAL.parse(text)).getAllSubcomponents('vevent').map((component) => new ICAL.Event(component));
    const milling = events.find((event) => event.summary === 'Milling: White oak, 3 logs' && event.startDate.toJSDate().toISOString().startsWith(day(9)));
    expect(milling?.startDate.toJSDate().toISOString()).toBe(`${day(9)}T12:30:00.000Z`);
    expect(milling?.location).toBe('Viroqua, WI');
    expect(events.filter((event) => event.summary === 'Day off').map((event) => [event.startDate.isDate, event.startDate.toString(), event.endDate.toString()])).toContainEqual([true, day(40), day(41)]);
    for (const leak of ['43.65', '-90.64', cast.ada.name, cast.ada.email, '54665']) expect(text).not.toContain(leak);
  });

  it('is read by a calendar library of another make', async () => {
    const text = await calendarFeed(await secretOf(), MARKET_AT);
    const program = `import sys, json, icalendar
feed = icalendar.Calendar.from_ical(sys.stdin.buffer.read())
print(json.dumps([[str(e["summary"]), e.decoded("dtstart").isoformat(), e.decoded("dtend").isoformat(), str(e.get("status", "")), str(e["uid"])] for e in feed.walk("VEVENT")]))`;
    const read = spawnSync('/usr/bin/python3', ['-c', program], { input: text, encoding: 'utf8' });
    expect([read.status, read.stderr]).toEqual([0, '']);
    const entries = JSON.parse(read.stdout) as readonly (readonly string[])[];
    const own = new ICAL.Component(ICAL.parse(text)).getAllSubcomponents('vevent');
    expect(entries.length).toBe(own.length);
    expect(new Set(entries.map(([, , , , uid]) => uid)).size).toBe(entries.length);
    expect(entries.find(([summary, start]) => summary === 'Milling: White oak, 3 logs' && start?.startsWith(day(9)))?.[1]).toBe(`${day(9)}T12:30:00+00:00`);
    expect(entries).toContainEqual(['Day off', day(40), day(41), '', expect.stringContaining('@skidway')]);
  });

  it('keeps its address hashed, and stops at once when renewed or stopped', async () => {
    const old = await secretOf();
    const row = await CalendarFeed.findByPk(cast.bram.id, { rejectOnEmpty: true });
    expect(JSON.stringify(row)).not.toContain(old);
    await renewCalendarFeed(cast.bram, MARKET_AT);
    await expect(calendarFeed(old, MARKET_AT)).rejects.toMatchObject({ kind: 'notFound' });
    const renewed = await secretOf();
    expect(await calendarFeed(renewed, MARKET_AT)).toContain('BEGIN:VCALENDAR');
    await stopCalendarFeed(cast.bram, MARKET_AT);
    await expect(calendarFeed(renewed, MARKET_AT)).rejects.toMatchObject({ kind: 'notFound' });
    await expect(renewCalendarFeed(cast.ada, MARKET_AT)).rejects.toMatchObject({ kind: 'forbidden' });
  });

  it('answers nobody when the account is suspended', async () => {
    await renewCalendarFeed(cast.bram, MARKET_AT);
    const secret = await secretOf();
    await rows(`UPDATE account SET status = 'suspended' WHERE id = $1 RETURNING id`, [cast.bram.id]);
    await expect(calendarFeed(secret, MARKET_AT)).rejects.toMatchObject({ kind: 'notFound' });
    await rows(`UPDATE account SET status = 'active' WHERE id = $1 RETURNING id`, [cast.bram.id]);
  });
});
