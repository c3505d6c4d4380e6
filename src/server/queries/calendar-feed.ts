import { ICalEventStatus, ICalEventTransparency, default as ical, type ICalCalendar } from 'ical-generator';
import { paths } from '~/domain/paths.ts';
import { addDays, dayAt, dayStart, type Day } from '~/domain/time.ts';
import { runsOf } from '~/domain/month.ts';
import { oneRow, rows } from '../db.ts';
import { notFound } from '../errors.ts';
import { feedSecretHash } from '../feed-secret.ts';
import { linkTo } from '../parties.ts';

/** How far back a feed reaches, in days. */
const BACK_DAYS = 90;
/** A milling day in a calendar is this long, in hours: common practice, no source. */
const MILLING_DAY_HOURS = 8;
/** How often a subscribed calendar is asked to look again, in seconds. */
const READ_AGAIN_S = 3600;

interface Milling {
  readonly id: string;
  readonly day: Day;
  readonly startTime: string;
  readonly zone: string;
  readonly number: number;
  readonly held: boolean;
  readonly title: string;
  readonly town: string;
  readonly updatedAt: Date;
}

interface Offer {
  readonly id: string;
  readonly day: Day;
  readonly listing: number;
  readonly title: string;
  readonly town: string;
  readonly updatedAt: Date;
}

const millingDays = (sawyerId: string, from: Day): Promise<Milling[]> =>
  rows<Milling>(
    `SELECT booked.id, booked.day::text AS day, booking.time_zone AS zone, booking.number, booking.status <> 'agreed' AS held, coalesce(listing.title, 'logs') AS title,
       concat_ws(', ', listing.town, listing.state) AS town, booking.updated_at AS "updatedAt",
       coalesce((SELECT to_char(start_time, 'HH24:MI') FROM day_proposal WHERE booking_id = booking.id AND status = 'confirmed' ORDER BY decided_at DESC LIMIT 1), '08:00') AS "startTime"
     FROM booked_day booked JOIN booking ON booking.id = booked.booking_id JOIN listing ON listing.id = booking.listing_id
     WHERE booked.sawyer_id = $1 AND booked.active AND booked.day >= $2 ORDER BY booked.day`,
    [sawyerId, from],
  );

const offeredDays = (sawyerId: string, from: Day): Promise<Offer[]> =>
  rows<Offer>(
    `SELECT bid.id, day::text AS day, listing.number AS listing, coalesce(listing.title, 'logs') AS title, concat_ws(', ', listing.town, listing.state) AS town, bid.updated_at AS "updatedAt"
     FROM bid JOIN listing ON listing.id = bid.listing_id, unnest(bid.days_offered) AS day
     WHERE bid.sawyer_id = $1 AND bid.status IN ('open', 'toConfirm') AND day >= $2 ORDER BY day`,
    [sawyerId, from],
  );

/** Midnight of a day as whole-day entries are written: they carry no time zone. */
const wholeDay = (day: Day): Date => new Date(`${day}T00:00:00Z`);

function addMilling(calendar: ICalCalendar, { id, day, startTime, zone, number, held, title, town, updatedAt }: Milling): void {
  const start = dayStart(day, zone, startTime);
  calendar.createEvent({
    id: `day-${id}@skidway`, start, end: new Date(start.getTime() + MILLING_DAY_HOURS * 3_600_000), stamp: updatedAt, summary: `Milling: ${title}`, location: town, url: linkTo(paths.booking(number)),
    description: held ? 'The money is held. Place and access notes are on the booking page.' : 'Agreed, but the money is not held yet.',
    status: held ? ICalEventStatus.CONFIRMED : ICalEventStatus.TENTATIVE, transparency: ICalEventTransparency.OPAQUE,
  });
}

/**
 * A sawyer's calendar as an iCalendar feed: milling days, offered days, days off. Whoever has the address can read it, so it names the
 * town and never the exact place, and nobody but the sawyer.
 * @throws Refusal `notFound` for an address that was never given out, was renewed, or whose account is not active
 */
export async function calendarFeed(secret: string, at: Date): Promise<string> {
  const feed = await oneRow<{ sawyerId: string; zone: string }>(
    `SELECT feed.sawyer_id AS "sawyerId", coalesce(profile.time_zone, 'UTC') AS zone FROM calendar_feed feed JOIN account ON account.id = feed.sawyer_id
       LEFT JOIN sawyer_profile profile ON profile.account_id = feed.sawyer_id WHERE feed.secret_hash = $1 AND account.status = 'active' AND account.is_sawyer`,
    [feedSecretHash(secret)],
  );
  if (!feed) throw notFound('calendar');
  const today = dayAt(at, feed.zone);
  const from = addDays(today, -BACK_DAYS);
  const calendar = ical({ name: 'Skidway', prodId: { company: 'Skidway', product: 'Sawyer calendar', language: 'EN' }, ttl: READ_AGAIN_S });
  for (const day of await millingDays(feed.sawyerId, from)) addMilling(calendar, day);
  for (const { id, day, listing, title, town, updatedAt } of await offeredDays(feed.sawyerId, today)) {
    calendar.createEvent({
      id: `offer-${id}-${day}@skidway`, start: wholeDay(day), end: wholeDay(addDays(day, 1)), allDay: true, stamp: updatedAt, summary: `Offered: ${title}`, location: town,
      url: linkTo(paths.listing(listing)), status: ICalEventStatus.TENTATIVE, transparency: ICalEventTransparency.TRANSPARENT,
    });
  }
  const off = await rows<{ day: Day }>('SELECT day::text AS day FROM sawyer_off WHERE sawyer_id = $1 AND day >= $2', [feed.sawyerId, from]);
  for (const run of runsOf(off.map(({ day }) => day))) {
    calendar.createEvent({ id: `off-${run.from}-${feed.sawyerId}@skidway`, start: wholeDay(run.from), end: wholeDay(addDays(run.to, 1)), allDay: true, stamp: wholeDay(run.from), summary: 'Day off', transparency: ICalEventTransparency.OPAQUE });
  }
  return calendar.toString();
}
