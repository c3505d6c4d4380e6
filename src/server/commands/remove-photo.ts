import { inTransaction } from '../db.ts';
import { record } from '../transition.ts';
import type { Viewer } from '../viewer.ts';
import { lockPhoto } from './lock-photo.ts';

/** Takes a photograph off its listing, its day or the sawyer's page, at whatever point it is. Its files are deleted by the sweep. */
export async function removePhoto(by: Viewer, photoId: string, at: Date): Promise<void> {
  await inTransaction(async () => {
    const photo = await lockPhoto(by, photoId);
    await photo.update({ removedAt: at, caption: '', fileName: '' });
    await record(by, 'remove', 'photo', photoId, at, { data: photo.listingId === null ? {} : { listingId: photo.listingId } });
  });
}
