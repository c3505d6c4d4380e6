import { authorize, rolesOnBooking, rolesOnListing } from '../authorize.ts';
import { conflict, forbidden, notFound } from '../errors.ts';
import { Booking, Listing, Photo, SawyerProfile } from '../models/index.ts';
import { holdActive } from '../standing.ts';
import { baseRoles, type Viewer } from '../viewer.ts';

/**
 * Reads and locks a listing whose photographs the viewer wants to change.
 * @throws Refusal `notFound` when it is not theirs, `conflict` when its photographs are settled
 */
export async function lockForPhotos(by: Viewer, listingId: string): Promise<Listing> {
  const listing = await Listing.findByPk(listingId, { lock: true });
  const roles = listing ? rolesOnListing(by, listing) : null;
  if (!listing || !roles?.has('owner')) throw notFound('listing');
  authorize(by, 'listing', 'addPhoto', roles, listing.status);
  return listing;
}

/**
 * Locks the viewer's own profile, whose photographs of work are to change.
 * @throws Refusal `forbidden` for who is no sawyer, `conflict` before a profile is saved
 */
export async function lockForWorkPhotos(by: Viewer): Promise<void> {
  authorize(by, 'sawyer', 'keepProfile', baseRoles(by));
  if (!(await holdActive(by.id))) throw forbidden('This account is suspended.');
  if (!(await SawyerProfile.findByPk(by.id, { lock: true }))) throw conflict('Save your profile first: the photographs belong to it.');
}

/** Locks the booking of a photograph of the milling day: whoever took it may change it. */
async function lockForDayPhoto(by: Viewer, bookingId: string, ownerId: string): Promise<void> {
  const booking = await Booking.findByPk(bookingId, { lock: true, rejectOnEmpty: true });
  if (ownerId !== by.id) throw notFound('photograph');
  authorize(by, 'booking', 'addDayPhoto', rolesOnBooking(by, booking), booking.status);
}

/** Reads and locks a photograph, its listing, booking or profile first, so that two deeds on one listing wait for each other in one order. */
export async function lockPhoto(by: Viewer, photoId: string): Promise<Photo> {
  const found = await Photo.findByPk(photoId, { attributes: ['listingId', 'sawyerId', 'bookingId', 'ownerId'] });
  if (!found || (found.sawyerId !== null && found.sawyerId !== by.id)) throw notFound('photograph');
  if (found.bookingId) await lockForDayPhoto(by, found.bookingId, found.ownerId);
  else if (found.listingId) await lockForPhotos(by, found.listingId);
  else await lockForWorkPhotos(by);
  const photo = await Photo.findByPk(photoId, { lock: true, rejectOnEmpty: true });
  if (photo.removedAt) throw notFound('photograph');
  return photo;
}
