import { largestPhotoBytes, mostDayPhotos, type PhotoView } from '~/domain/photo.ts';
import { originalKey } from '~/domain/photo-keys.ts';
import type { BeginDayPhoto } from '~/schemas/day-photo.ts';
import { authorize, rolesOnBooking } from '../authorize.ts';
import { inTransaction } from '../db.ts';
import { conflict, notFound } from '../errors.ts';
import { lockBooking } from '../locks.ts';
import { type Booking, MetalHit, Photo, Tally } from '../models/index.ts';
import { onePhoto } from '../queries/photos.ts';
import { uploadForm, type UploadForm } from '../services/storage.ts';
import type { Viewer } from '../viewer.ts';
import { checkFile } from './begin-photo-upload.ts';

/** The hit of this booking that a photograph names; null when it was taken back or never sent. */
async function hitOf(booking: Booking, hitId: string | null): Promise<string | null> {
  if (hitId === null) return null;
  const tally = await Tally.findOne({ where: { bookingId: booking.id, part: 1 }, attributes: ['id'] });
  const hit = tally && (await MetalHit.findOne({ where: { id: hitId, tallyId: tally.id }, attributes: ['id'] }));
  return hit?.id ?? null;
}

/**
 * Begins the upload of a photograph of the milling day, under the id that the phone made for it. Begun again before its file has arrived
 * it gets a new form; afterwards there is nothing left to send.
 * @throws Refusal `forbidden` for others than the two sides, `conflict` when the booking has as many as it may have
 */
export async function beginDayPhoto(by: Viewer, number: number, input: BeginDayPhoto, at: Date): Promise<{ readonly photo: PhotoView; readonly upload: UploadForm | null }> {
  const type = await checkFile(by, input);
  const photo = await inTransaction(async () => {
    const booking = await lockBooking(number);
    authorize(by, 'booking', 'addDayPhoto', rolesOnBooking(by, booking), booking.status);
    const before = await Photo.findByPk(input.id);
    if (before) {
      if (before.bookingId !== booking.id || before.ownerId !== by.id || before.removedAt) throw notFound('photograph');
      return before;
    }
    if ((await Photo.count({ where: { bookingId: booking.id, removedAt: null } })) >= mostDayPhotos) throw conflict(`A job has at most ${mostDayPhotos} photographs. Take one out first.`);
    return Photo.create({
      id: input.id, listingId: booking.listingId, bookingId: booking.id, shows: input.shows, hitId: input.shows === 'metal' ? await hitOf(booking, input.hitId) : null,
      ownerId: by.id, position: 0, fileName: input.fileName, originalKey: originalKey(booking.listingId, input.id), status: 'awaiting', createdAt: at,
    });
  });
  return { photo: await onePhoto(photo.id), upload: photo.status === 'awaiting' ? await uploadForm(photo.originalKey, type, largestPhotoBytes) : null };
}
