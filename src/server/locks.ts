import { notFound } from './errors.ts';
import { Booking, Listing } from './models/index.ts';

/** Reads and locks a booking by its public number. @throws Refusal `notFound` */
export async function lockBooking(number: number): Promise<Booking> {
  const booking = Number.isSafeInteger(number) ? await Booking.findOne({ where: { number }, lock: true }) : null;
  if (!booking) throw notFound('booking');
  return booking;
}

/** Reads and locks a listing by its public number. @throws Refusal `notFound` */
export async function lockListing(number: number): Promise<Listing> {
  const listing = Number.isSafeInteger(number) ? await Listing.findOne({ where: { number }, lock: true }) : null;
  if (!listing) throw notFound('listing');
  return listing;
}
