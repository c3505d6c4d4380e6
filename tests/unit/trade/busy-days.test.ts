import { describe, expect, it } from 'vitest';
import { addMonths, daysOfMonth, parseMonth, runsOf, weekdayOf } from '~/domain/month.ts';
import { busyDays } from '~/domain/trade/busy-days.ts';
import { dayStates, earliestOpenDay } from '~/domain/trade/milling-days.ts';
import { whyLost, type BidOutcome } from '~/domain/trade/why-lost.ts';

const ZONE = 'America/Chicago';
const at = (text: string): Date => new Date(text);

describe('busy days of another calendar', () => {
  it('count whole-day entries to the day before their end', () => {
    expect(busyDays([{ from: '2026-12-10', until: '2026-12-12' }], ZONE, '2026-12-01', '2026-12-31', 24)).toEqual(['2026-12-10', '2026-12-11']);
  });
  it('add the hours of a day together, on the sawyer’s own clock', () => {
    // 08:00–10:00 and 20:00–23:00 in Chicago on the 10th: five hours, though the second ends on the 11th in Greenwich.
    const spans = [{ start: at('2026-12-10T14:00Z'), end: at('2026-12-10T16:00Z') }, { start: at('2026-12-11T02:00Z'), end: at('2026-12-11T05:00Z') }];
    expect(busyDays(spans, ZONE, '2026-12-01', '2026-12-31', 4)).toEqual(['2026-12-10']);
    expect(busyDays(spans, ZONE, '2026-12-01', '2026-12-31', 6)).toEqual([]);
  });
  it('cut an entry over midnight in two and stay within the days looked at', () => {
    const night = [{ start: at('2026-12-10T18:00-06:00'), end: at('2026-12-12T05:00-06:00') }];
    expect(busyDays(night, ZONE, '2026-12-11', '2026-12-11', 0)).toEqual(['2026-12-11']);
    expect(busyDays(night, ZONE, '2026-12-01', '2026-12-31', 6)).toEqual(['2026-12-10', '2026-12-11']);
  });
  it('leave out what takes no time', () => {
    expect(busyDays([{ start: at('2026-12-10T14:00Z'), end: at('2026-12-10T14:00Z') }], ZONE, '2026-12-01', '2026-12-31', 0)).toEqual([]);
  });
});

describe('a sawyer’s days', () => {
  it('hold a day off against an offer made before', () => {
    const states = dayStates('2026-12-07', 4, { workingDays: [1, 2, 3, 4, 5], notice: 0, booked: new Set(['2026-12-07']), off: new Set(['2026-12-08']), offered: new Set(['2026-12-08']) });
    expect(states.slice(0, 3)).toEqual([{ day: '2026-12-07', state: 'booked' }, { day: '2026-12-08', state: 'off', away: true }, { day: '2026-12-09', state: 'open' }]);
    expect(earliestOpenDay(states)).toBe('2026-12-09');
  });
});

describe('months', () => {
  it('are read, stepped and listed', () => {
    expect([parseMonth('2026-12'), parseMonth('2026-13'), parseMonth('2026-1'), parseMonth('x')]).toEqual(['2026-12', null, null, null]);
    expect([addMonths('2026-12', 1), addMonths('2026-01', -1), addMonths('2026-06', 19)]).toEqual(['2027-01', '2025-12', '2028-01']);
    expect(daysOfMonth('2028-02')).toHaveLength(29);
    expect([weekdayOf('2026-12-07'), weekdayOf('2026-12-13')]).toEqual([1, 7]);
  });
  it('join days that follow one another', () => {
    expect(runsOf(['2026-12-31', '2026-12-10', '2027-01-01', '2026-12-11'])).toEqual([{ from: '2026-12-10', to: '2026-12-11' }, { from: '2026-12-31', to: '2027-01-01' }]);
  });
});

describe('why a bid was lost', () => {
  const mine: BidOutcome = { status: 'declined', listingStatus: 'matched', expectedCents: 30_000, daysOffered: ['2026-12-10', '2026-12-08'], chosen: null, bookingStatus: null };
  const chosen = (expectedCents: number, ...daysOffered: string[]) => whyLost({ ...mine, chosen: { expectedCents, daysOffered } });
  it('says lower, sooner, both or neither, and never a figure', () => {
    expect(chosen(29_999, '2026-12-20')).toBe('The chosen bid was lower.');
    expect(chosen(30_000, '2026-12-07')).toBe('The chosen bid could come sooner.');
    expect(chosen(10_000, '2026-12-07')).toBe('The chosen bid was lower and could come sooner.');
    expect(chosen(30_000, '2026-12-08')).toBe('Chosen for another reason than price or day.');
  });
  it('tells how it ended otherwise', () => {
    expect(whyLost({ ...mine, status: 'lapsed', listingStatus: 'withdrawn' })).toBe('The landowner withdrew the listing.');
    expect(whyLost({ ...mine, status: 'lapsed', listingStatus: 'lapsed' })).toBe('Nobody was chosen in time.');
    expect(whyLost({ ...mine, status: 'released', bookingStatus: 'lapsed' })).toBe('Chosen, but the hold was not paid in time.');
    expect([whyLost({ ...mine, status: 'open' }), whyLost({ ...mine, status: 'chosen' })]).toEqual([null, null]);
  });
});
