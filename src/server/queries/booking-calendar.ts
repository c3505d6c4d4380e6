import { abilities, rolesOnBooking } from '../authorize.ts';
import { notFound } from '../errors.ts';
import { bookedDaysOf, invitationFor, startTimeOf } from '../invitations.ts';
import { Booking, Listing } from '../models/index.ts';
import { partyOf } from '../parties.ts';
import { notePlaceSeen } from '../place-views.ts';
import type { Viewer } from '../viewer.ts';

/** The iCalendar text of a booking's days. @throws Refusal `notFound` for others, or while no day is agreed */
export async function bookingCalendar(viewer: Viewer, number: number, at: Date): Promise<string> {
  const booking = Number.isSafeInteger(number) ? await Booking.findOne({ where: { number } }) : null;
  const can = booking && abilities('booking', rolesOnBooking(viewer, booking), booking.status);
  if (!booking || !can?.see) throw notFound('booking');
  const days = await bookedDaysOf(booking.id);
  if (days.length === 0) throw notFound('calendar entry: no day is agreed yet');
  const listing = await Listing.findByPk(booking.listingId, { rejectOnEmpty: true });
  if (can.seePlace && listing.place) await notePlaceSeen(viewer, listing, at, { booking: booking.number });
  const reader = viewer.id === booking.landownerId || viewer.id === booking.sawyerId ? await partyOf(viewer.id) : null;
  return invitationFor(booking, listing, days, await startTimeOf(booking.id), reader, 0, false).ics;
}
