import type { PhotoView } from '~/domain/photo.ts';
import { photoStates } from '~/domain/states/photo.ts';
import { inTransaction } from '../db.ts';
import { enqueue } from '../jobs/queue.ts';
import { onePhoto } from '../queries/photos.ts';
import { transition } from '../transition.ts';
import type { Viewer } from '../viewer.ts';
import { lockPhoto } from './lock-photo.ts';

/** The browser says that the file is in storage: it is checked and its renditions are made. Said twice, it happens once. */
export async function finishPhotoUpload(by: Viewer, photoId: string, at: Date): Promise<PhotoView> {
  await inTransaction(async () => {
    const photo = await lockPhoto(by, photoId);
    if (photo.status !== 'awaiting') return;
    await transition(photoStates, 'arrive', photo, by, at);
    await enqueue('process-photo', { photoId });
  });
  return onePhoto(photoId);
}
