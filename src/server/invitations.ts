import { ICalCalendarMethod, ICalEventStatus, default as ical } from 'ical-generator';
import { calendarNote } from '~/emails/booking-letters.ts';
import { dayStart, type Day } from '~/domain/time.ts';
import { rows } from './db.ts';
import { enqueue } from './jobs/queue.ts';
import { Booking, Listing } from './models/index.ts';
import type { GeoPoint } from './models/table.ts';
import { bookingLink, partiesOf, type Party } from './parties.ts';

/** A milling day in a calendar is this long, in hours: common practice, no source. */
const MILLING_DAY_HOURS = 8;

export interface Invitation {
  readonly ics: string;
  readonly summary: string;
}

/** The states in which the exact place may be told to the sawyer. */
const placeTold = new Set(['held', 'sawing', 'tallied', 'queried', 'signed', 'settled']);

const placeText = (listing: Listing, exact: boolean): string => {
  const town = [listing.town, listing.state].filter(Boolean).join(', ');
  const point: GeoPoint | null = listing.place;
  return exact && point ? `${town} (${point.coordinates[1].toFixed(5)}, ${point.coordinates[0].toFixed(5)})` : town;
};

/**
 * The booking's days as an iCalendar file: one event a day, each with a lasting UID, so that a change updates and a removed day is taken
 * out. The place is the town only until the money is held.
 * @param reader whose calendar it is for: the only one it names, so that nobody's mail address goes to the other side; null for a moderator
 * @param gone how many further day events of an earlier plan to cancel
 */
export function invitationFor(booking: Booking, listing: Listing, days: readonly Day[], startTime: string, reader: Party | null, gone: number, cancelled: boolean): Invitation {
  const summary = `Milling: ${listing.title ?? 'logs'}`;
  const link = bookingLink(booking);
  const exact = placeTold.has(booking.status);
  const calendar = ical({ prodId: { company: 'Skidway', product: 'Bookings', language: 'EN' }, method: cancelled ? ICalCalendarMethod.CANCEL : ICalCalendarMethod.REQUEST });
  const all = [...days.map((day) => ({ day, off: cancelled })), ...Array.from({ length: gone }, () => ({ day: days[0] ?? '2000-01-01', off: true }))];
  all.forEach(({ day, off }, index) => {
    const start = dayStart(day, booking.timeZone, startTime);
    const event = calendar.createEvent({
      id: `booking-${booking.number}-${index + 1}@skidway`,
      sequence: booking.invitationSequence,
      start,
      end: new Date(start.getTime() + MILLING_DAY_HOURS * 3_600_000),
      stamp: booking.updatedAt,
      summary: days.length > 1 ? `${summary} (day ${index + 1} of ${days.length})` : summary,
      location: placeText(listing, exact),
      description: exact ? 'The money is held. Place and access notes are on the booking page.' : 'The exact place is shown once the money is held.',
      url: link,
      status: off ? ICalEventStatus.CANCELLED : ICalEventStatus.CONFIRMED,
      organizer: { name: 'Skidway', email: 'post@skidway.example' },
    });
    if (reader) event.createAttendee({ name: reader.name, email: reader.email });
  });
  return { ics: calendar.toString(), summary };
}

/** The days a booking has now, in order. */
export const bookedDaysOf = async (bookingId: string): Promise<Day[]> =>
  (await rows<{ day: string }>('SELECT day::text AS day FROM booked_day WHERE booking_id = $1 AND active ORDER BY day', [bookingId])).map(({ day }) => day);

/** The wall-clock start agreed for a booking, `HH:MM`. */
export async function startTimeOf(bookingId: string): Promise<string> {
  const [confirmed] = await rows<{ time: string }>(`SELECT to_char(start_time, 'HH24:MI') AS time FROM day_proposal WHERE booking_id = $1 AND status = 'confirmed' ORDER BY decided_at DESC LIMIT 1`, [bookingId]);
  return confirmed?.time ?? '08:00';
}

/**
 * Sends both sides the calendar events of a booking, in the caller's transaction: after agreeing, after the hold (now with the place),
 * after a move, or with `cancelled` days when it ends.
 * @param before the days that the last invitation named
 */
export async function sendInvitations(booking: Booking, before: readonly Day[], cancelled = false): Promise<void> {
  const listing = await Listing.findByPk(booking.listingId, { rejectOnEmpty: true });
  const days = cancelled ? before : await bookedDaysOf(booking.id);
  if (days.length === 0) return;
  await booking.update({ invitationSequence: booking.invitationSequence + 1 });
  const parties = await partiesOf(booking);
  const startTime = await startTimeOf(booking.id);
  for (const person of [parties.landowner, parties.sawyer]) {
    const { ics, summary } = invitationFor(booking, listing, days, startTime, person, Math.max(0, before.length - days.length), cancelled);
    await enqueue('send-mail', { ...calendarNote(person, summary, bookingLink(booking), cancelled), calendar: { method: cancelled ? 'CANCEL' : 'REQUEST', ics } });
  }
}
