import type { PhotoView } from '~/domain/photo.ts';
import type { ChangePhoto } from '~/schemas/photo.ts';
import { inTransaction } from '../db.ts';
import { onePhoto } from '../queries/photos.ts';
import type { Viewer } from '../viewer.ts';
import { checkLog } from './begin-photo-upload.ts';
import { lockPhoto } from './lock-photo.ts';

/** Changes a photograph's caption, or which log it shows. What is left out stays. */
export async function changePhoto(by: Viewer, photoId: string, input: ChangePhoto): Promise<PhotoView> {
  await inTransaction(async () => {
    const photo = await lockPhoto(by, photoId);
    await checkLog(photo.listingId, input.logId);
    await photo.update({
      ...(input.caption === undefined ? {} : { caption: input.caption }),
      ...(input.logId === undefined ? {} : { logId: input.logId }),
    });
  });
  return onePhoto(photoId);
}
