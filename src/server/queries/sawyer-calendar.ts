import { addMonths, daysOfMonth, monthOf, parseMonth, weekdayOf, type Month } from '~/domain/month.ts';
import { paths } from '~/domain/paths.ts';
import type { BookingState } from '~/domain/states/booking.ts';
import { dayAt, type Day } from '~/domain/time.ts';
import { authorize } from '../authorize.ts';
import { rows } from '../db.ts';
import { openFeedSecret } from '../feed-secret.ts';
import { CalendarFeed, OtherCalendar, SawyerProfile, type BroughtBy } from '../models/sawyer.ts';
import { linkTo } from '../parties.ts';
import { baseRoles, type Viewer } from '../viewer.ts';

export interface CalendarDay {
  readonly day: Day;
  readonly past: boolean;
  /** Whether this day of the week is worked. */
  readonly worked: boolean;
  readonly off: 'own' | 'busy' | null;
  /** The other calendars that call the day busy, by the names the sawyer knows them by. */
  readonly busyIn: readonly string[];
  readonly booked: readonly { readonly number: number; readonly title: string; readonly town: string; readonly status: BookingState }[];
  readonly offered: readonly { readonly listing: number; readonly title: string; readonly town: string }[];
}

export interface SawyerCalendar {
  readonly month: Month;
  readonly today: Day;
  readonly before: Month | null;
  readonly after: Month | null;
  readonly days: readonly CalendarDay[];
  readonly workingDays: readonly number[];
  readonly noticeDays: number;
  readonly hasProfile: boolean;
  /** How many days ahead are off because a calendar names them, by how it was brought. */
  readonly busyAhead: readonly { readonly by: BroughtBy; readonly calendar: string; readonly days: number }[];
  /** The address to subscribe to; null until one is made. */
  readonly feed: string | null;
  /** Another calendar that is read again by itself; null when there is none. */
  readonly other: { readonly host: string; readonly readAt: Date; readonly failedBecause: string | null; readonly timeZone: string } | null;
}

/** How many months back and ahead can be looked at. */
const REACH_MONTHS = 13;

/** What stands booked on a sawyer's days, from one day to another. */
export const bookedIn = (sawyerId: string, from: Day, to: Day) =>
  rows<{ day: Day; number: number; title: string; town: string; status: BookingState }>(
    `SELECT booked.day::text AS day, booking.number, booking.status, coalesce(listing.title, '') AS title, concat_ws(', ', listing.town, listing.state) AS town
     FROM booked_day booked JOIN booking ON booking.id = booked.booking_id JOIN listing ON listing.id = booking.listing_id
     WHERE booked.sawyer_id = $1 AND booked.active AND booked.day BETWEEN $2 AND $3 ORDER BY booked.day, booking.starts_at`,
    [sawyerId, from, to],
  );

/** What a sawyer's live bids offer, from one day to another. */
export const offeredIn = (sawyerId: string, from: Day, to: Day) =>
  rows<{ day: Day; listing: number; title: string; town: string }>(
    `SELECT day::text AS day, listing.number AS listing, coalesce(listing.title, '') AS title, concat_ws(', ', listing.town, listing.state) AS town
     FROM bid JOIN listing ON listing.id = bid.listing_id, unnest(bid.days_offered) AS day
     WHERE bid.sawyer_id = $1 AND bid.status IN ('open', 'toConfirm') AND day BETWEEN $2 AND $3 ORDER BY day`,
    [sawyerId, from, to],
  );

/**
 * One month of a sawyer's calendar. Leans on one_outing_a_day (by sawyer and day) and bid_of_sawyer.
 * @param asked the month in the address; anything strange shows the current one
 * @throws Refusal when the viewer is no sawyer
 */
export async function sawyerCalendar(viewer: Viewer | null, asked: string, at: Date): Promise<SawyerCalendar> {
  authorize(viewer, 'sawyer', 'keepCalendar', baseRoles(viewer));
  const profile = await SawyerProfile.findByPk(viewer.id);
  const today = dayAt(at, profile?.timeZone ?? 'UTC');
  const [earliest, latest] = [addMonths(monthOf(today), -REACH_MONTHS), addMonths(monthOf(today), REACH_MONTHS)];
  const read = parseMonth(asked);
  const month = read !== null && read >= earliest && read <= latest ? read : monthOf(today);
  const all = daysOfMonth(month);
  const [from, to] = [all[0] ?? today, all.at(-1) ?? today];
  const booked = await bookedIn(viewer.id, from, to);
  const offered = await offeredIn(viewer.id, from, to);
  const own = await rows<{ day: Day }>('SELECT day::text AS day FROM day_off WHERE sawyer_id = $1 AND day BETWEEN $2 AND $3', [viewer.id, from, to]);
  const busy = await rows<{ day: Day; calendar: string; off: boolean }>('SELECT day::text AS day, calendar, given_back_at IS NULL AS off FROM busy_day WHERE sawyer_id = $1 AND day BETWEEN $2 AND $3 ORDER BY brought_by', [viewer.id, from, to]);
  const busyAhead = await rows<{ by: BroughtBy; calendar: string; days: number }>(
    'SELECT brought_by AS by, min(calendar) AS calendar, (count(*) FILTER (WHERE given_back_at IS NULL))::int AS days FROM busy_day WHERE sawyer_id = $1 AND day >= $2 GROUP BY brought_by ORDER BY brought_by',
    [viewer.id, today],
  );
  const workingDays = profile?.workingDays ?? [1, 2, 3, 4, 5, 6];
  const other = await OtherCalendar.findByPk(viewer.id, { attributes: ['host', 'readAt', 'failedBecause'] });
  const feed = await CalendarFeed.findByPk(viewer.id);
  const secret = feed ? openFeedSecret(viewer.id, feed.secretSealed) : null;
  return {
    month, today,
    before: month > earliest ? addMonths(month, -1) : null,
    after: month < latest ? addMonths(month, 1) : null,
    days: all.map((day) => ({
      day, past: day < today, worked: workingDays.includes(weekdayOf(day)),
      off: own.some((one) => one.day === day) ? 'own' : busy.some((one) => one.day === day && one.off) ? 'busy' : null,
      busyIn: busy.filter((one) => one.day === day).map(({ calendar }) => calendar),
      booked: booked.filter((one) => one.day === day),
      offered: offered.filter((one) => one.day === day),
    })),
    workingDays, noticeDays: profile?.noticeDays ?? 1, hasProfile: profile !== null, busyAhead,
    feed: secret === null ? null : linkTo(paths.calendarFeed(secret)),
    other: other && { host: other.host, readAt: other.readAt, failedBecause: other.failedBecause, timeZone: profile?.timeZone ?? 'UTC' },
  };
}
