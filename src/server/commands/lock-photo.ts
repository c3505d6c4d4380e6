import { authorize, rolesOnListing } from '../authorize.ts';
import { notFound } from '../errors.ts';
import { Listing, Photo } from '../models/index.ts';
import type { Viewer } from '../viewer.ts';

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

/** Reads and locks a photograph, its listing first, so that two deeds on one listing wait for each other in one order. */
export async function lockPhoto(by: Viewer, photoId: string): Promise<Photo> {
  const found = await Photo.findByPk(photoId, { attributes: ['listingId'] });
  if (!found) throw notFound('photograph');
  await lockForPhotos(by, found.listingId);
  const photo = await Photo.findByPk(photoId, { lock: true, rejectOnEmpty: true });
  if (photo.removedAt) throw notFound('photograph');
  return photo;
}
