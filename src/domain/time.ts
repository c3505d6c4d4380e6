/**
 * Instants and site days. Two rules keep this safe over daylight saving:
 * hours are elapsed hours between instants (48 hours before 08:00 on Monday after the clocks change is not 08:00 on Saturday);
 * days are days of the site's own calendar (5 days after 15:00 on Friday is 15:00 on Wednesday, whatever the clocks did).
 */
import { fromZonedTime, formatInTimeZone } from 'date-fns-tz';
import { good, refused, type Result } from './result.ts';

/** A calendar day of the site, `2026-12-10`. Compares as text. */
export type Day = string;

const HOUR_MS = 3_600_000;
const DAY_MS = 24 * HOUR_MS;

export const DAY_STARTS_AT = '08:00';
export const CANCEL_FREE_HOURS = 48;
export const SIGNING_HOURS = 72;
/** How long somebody who is said not to have come has to answer. */
export const NO_SHOW_ANSWER_HOURS = 48;
export const PAYMENT_DAYS = 5;
export const FURTHEST_DAYS = 60;
export const LISTING_LAPSES_DAYS = 7;

/** Whether the runtime knows this IANA time zone (`America/Chicago`). */
export function isTimeZone(zone: string): boolean {
  if (!/^[A-Za-z_]+(?:\/[A-Za-z0-9_+-]+)*$/.test(zone)) return false;
  try {
    new Intl.DateTimeFormat('en-US', { timeZone: zone });
    return true;
  } catch {
    return false;
  }
}

/** Reads `2026-12-10`; refuses a day that is not in the calendar. */
export function parseDay(text: string): Result<Day> {
  const day = text.trim();
  const real = /^\d{4}-\d{2}-\d{2}$/.test(day) && Number.isFinite(utc(day)) && new Date(utc(day)).toISOString().startsWith(day);
  return real ? good(day) : refused('day', 'Write the day as year, month and day, like 2026-12-10.');
}

/** The site's calendar day at an instant. */
export const dayAt = (instant: Date, zone: string): Day => formatInTimeZone(instant, zone, 'yyyy-MM-dd');

/** The day `count` days later (earlier when negative). */
export const addDays = (day: Day, count: number): Day => new Date(utc(day) + count * DAY_MS).toISOString().slice(0, 10);

/** Calendar days from one day to another. */
export const daysBetween = (from: Day, to: Day): number => Math.round((utc(to) - utc(from)) / DAY_MS);

/** The instant a milling day starts: 08:00 in the site's zone unless another wall-clock time was agreed. */
export const dayStart = (day: Day, zone: string, at: string = DAY_STARTS_AT): Date => fromZonedTime(`${day}T${at}:00`, zone);

/** The instant a site's day is over: the next midnight there. */
export const dayEnd = (day: Day, zone: string): Date => fromZonedTime(`${addDays(day, 1)}T00:00:00`, zone);

/** Elapsed hours after an instant (before, when negative). */
export const addHours = (instant: Date, hours: number): Date => new Date(instant.getTime() + hours * HOUR_MS);

/** Until this instant, itself included, cancelling is free: 48 elapsed hours before the first day's start. */
export const cancelCutOff = (firstDayStart: Date): Date => addHours(firstDayStart, -CANCEL_FREE_HOURS);

/** A tally not answered by this instant counts as signed: 72 elapsed hours after it was handed in. */
export const signingDeadline = (talliedAt: Date): Date => addHours(talliedAt, SIGNING_HOURS);

/** Same wall-clock time at the site, so many calendar days later. */
export function addSiteDays(instant: Date, days: number, zone: string): Date {
  const day = addDays(dayAt(instant, zone), days);
  return fromZonedTime(`${day}T${formatInTimeZone(instant, zone, 'HH:mm:ss.SSS')}`, zone);
}

/** An agreed booking not paid by this instant lapses: five site days after it was agreed. */
export const paymentDeadline = (agreedAt: Date, zone: string): Date => addSiteDays(agreedAt, PAYMENT_DAYS, zone);

/** A listing that drew no choice lapses seven days after the end of its closing day. */
export const listingLapse = (closesOn: Day, zone: string): Date => dayEnd(addDays(closesOn, LISTING_LAPSES_DAYS), zone);

/** A milling day must lie ahead (its start after now) and at most 60 days from the site's today. */
export function checkMillingDay(day: Day, zone: string, now: Date, at: string = DAY_STARTS_AT): Result<Day> {
  const parsed = parseDay(day);
  if (!parsed.ok) return parsed;
  if (dayStart(day, zone, at) <= now) return refused('day', 'That day has begun or is past. Choose a later one.');
  const last = addDays(dayAt(now, zone), FURTHEST_DAYS);
  return day > last ? refused('day', `At most ${FURTHEST_DAYS} days ahead: ${formatDay(last)} is the last.`) : good(day);
}

/** `Thu 10 Dec`. */
export const formatDay = (day: Day): string => formatInTimeZone(new Date(utc(day)), 'UTC', 'EEE d MMM');

/** `Thu 10 Dec 2026`. */
export const formatDayWithYear = (day: Day): string => formatInTimeZone(new Date(utc(day)), 'UTC', 'EEE d MMM yyyy');

/** `Thu 10 Dec, 8:00 am CST`: the site's own clock, its name said. */
export const formatInstant = (instant: Date, zone: string): string => `${formatInTimeZone(instant, zone, 'EEE d MMM, h:mm aaa')} ${zoneName(instant, zone)}`;

/** `8:00 am` for the `08:00` of a clock. */
export const formatClock = (time: string): string => formatInTimeZone(new Date(`1970-01-01T${time}:00Z`), 'UTC', 'h:mm aaa');

/** `8:00 am`. */
export const formatTimeOfDay = (instant: Date, zone: string): string => formatInTimeZone(instant, zone, 'h:mm aaa');

function zoneName(instant: Date, zone: string): string {
  const parts = new Intl.DateTimeFormat('en-US', { timeZone: zone, timeZoneName: 'short' }).formatToParts(instant);
  return parts.find(({ type }) => type === 'timeZoneName')?.value ?? zone;
}

const utc = (day: Day): number => Date.parse(`${day}T00:00:00Z`);
