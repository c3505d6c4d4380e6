import { largestPhotoBytes, renditionTypes } from '~/domain/photo.ts';
import { renditionKey } from '~/domain/photo-keys.ts';
import { now } from '../../clock.ts';
import { acceptPhoto, refusePhoto } from '../../commands/settle-photo.ts';
import { Photo } from '../../models/index.ts';
import { PictureRefused, renderPicture } from '../../services/picture.ts';
import { MissingObject, ObjectTooLarge, readObject, writeObject } from '../../services/storage.ts';

/** In words for the sender, when the fault is in the file; anything else is worth another try. */
function reasonOf(error: unknown): string | null {
  if (error instanceof PictureRefused) return error.message;
  if (error instanceof MissingObject) return 'The file did not arrive. Add it again.';
  if (error instanceof ObjectTooLarge) return 'This picture is larger than 25 MB. Save it smaller or choose another one.';
  return null;
}

/**
 * Checks a photograph that has arrived and makes its renditions. Running twice writes the same files again and changes nothing
 * else.
 * @throws when storage or the database fails; the queue tries again
 */
export async function processPhoto({ photoId }: { photoId: string }): Promise<void> {
  const photo = await Photo.findByPk(photoId);
  if (!photo || photo.removedAt !== null || photo.status !== 'checking') return;
  try {
    const original = await readObject(photo.originalKey, largestPhotoBytes);
    const { renditions, width, height, blur } = await renderPicture(original);
    for (const { size, format, bytes } of renditions) await writeObject(renditionKey(photoId, size, format), bytes, renditionTypes[format]);
    await acceptPhoto(photoId, { width, height, blur, bytes: original.length }, now());
  } catch (error) {
    const reason = reasonOf(error);
    if (reason === null) throw error;
    await refusePhoto(photoId, reason, now());
  }
}
