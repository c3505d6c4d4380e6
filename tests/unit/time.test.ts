import { describe, expect, it } from 'vitest';
import { addDays, addSiteDays, cancelCutOff, checkMillingDay, dayAt, dayEnd, daysBetween, dayStart, formatClock, formatDay, formatInstant, isTimeZone, listingLapse, parseDay, paymentDeadline, signingDeadline } from '~/domain/time.ts';

const CHICAGO = 'America/Chicago';
// United States: clocks go back on Sunday 1 Nov 2026 and forward on Sunday 14 Mar 2027 (Energy Policy Act of 2005).

describe('a milling day', () => {
  it('starts at eight by the site’s own clock, winter and summer', () => {
    expect(dayStart('2026-12-10', CHICAGO).toISOString()).toBe('2026-12-10T14:00:00.000Z');
    expect(dayStart('2026-07-10', CHICAGO).toISOString()).toBe('2026-07-10T13:00:00.000Z');
    expect(dayStart('2026-07-10', 'America/Denver', '07:30').toISOString()).toBe('2026-07-10T13:30:00.000Z');
  });
  it('is shown by a clock of twelve hours', () => {
    expect(['08:00', '12:30', '00:05', '17:45'].map(formatClock)).toEqual(['8:00 am', '12:30 pm', '12:05 am', '5:45 pm']);
  });
  it('is shown with the name of the site’s time', () => {
    expect(formatInstant(dayStart('2026-12-10', CHICAGO), CHICAGO)).toBe('Thu 10 Dec, 8:00 am CST');
    expect(formatInstant(dayStart('2026-07-10', CHICAGO), CHICAGO)).toBe('Fri 10 Jul, 8:00 am CDT');
    expect(formatDay('2026-12-10')).toBe('Thu 10 Dec');
  });
  it('lies ahead, and at most 60 days', () => {
    const now = new Date('2026-12-01T18:00:00Z');
    expect(checkMillingDay('2026-12-01', CHICAGO, now)).toMatchObject({ ok: false });
    expect(checkMillingDay('2026-12-02', CHICAGO, now).ok).toBe(true);
    expect(checkMillingDay('2027-01-30', CHICAGO, now).ok).toBe(true);
    expect(checkMillingDay('2027-01-31', CHICAGO, now)).toMatchObject({ problems: [{ message: 'At most 60 days ahead: Sat 30 Jan is the last.' }] });
  });
});

describe('deadlines over the change of the clocks', () => {
  it('48 hours are elapsed hours', () => {
    // Monday 2 Nov 08:00 CST less 48 elapsed hours is Saturday 31 Oct 09:00 CDT.
    const cutOff = cancelCutOff(dayStart('2026-11-02', CHICAGO));
    expect(cutOff.toISOString()).toBe('2026-10-31T14:00:00.000Z');
    expect(formatInstant(cutOff, CHICAGO)).toBe('Sat 31 Oct, 9:00 am CDT');
  });
  it('72 hours are elapsed hours', () => {
    expect(formatInstant(signingDeadline(new Date('2027-03-12T22:00:00Z')), CHICAGO)).toBe('Mon 15 Mar, 5:00 pm CDT'); // from Fri 4:00 pm CST
  });
  it('five days are days of the site’s calendar', () => {
    const agreed = new Date('2026-10-30T20:00:00Z'); // Fri 3:00 pm CDT
    expect(formatInstant(paymentDeadline(agreed, CHICAGO), CHICAGO)).toBe('Wed 4 Nov, 3:00 pm CST');
    expect(addSiteDays(agreed, 0, CHICAGO)).toEqual(agreed);
  });
  it('a listing lapses seven days after the end of its closing day', () => {
    expect(listingLapse('2026-10-30', CHICAGO).toISOString()).toBe('2026-11-07T06:00:00.000Z');
  });
});

describe('days', () => {
  it('belong to the site: late evening in Chicago is the next day in London', () => {
    const instant = new Date('2026-12-10T03:30:00Z');
    expect(dayAt(instant, CHICAGO)).toBe('2026-12-09');
    expect(dayAt(instant, 'Europe/London')).toBe('2026-12-10');
    expect(dayEnd('2026-12-09', CHICAGO).toISOString()).toBe('2026-12-10T06:00:00.000Z');
  });
  it('are added and counted on the calendar', () => {
    expect(addDays('2028-02-28', 1)).toBe('2028-02-29');
    expect(daysBetween('2026-10-30', '2026-11-04')).toBe(5);
  });
  it('that do not exist are refused', () => {
    for (const text of ['2026-02-30', '2026-13-01', '10 Dec', '']) expect(parseDay(text).ok).toBe(false);
    expect(parseDay(' 2026-12-10 ')).toEqual({ ok: true, value: '2026-12-10' });
  });
  it('need a real time zone', () => {
    expect([CHICAGO, 'UTC', 'Mars/Olympus', '../etc'].map(isTimeZone)).toEqual([true, true, false, false]);
  });
});
