import { randomUUID } from 'node:crypto';
import { largestPhotoBytes, mostPhotos, photoProblem, photoType, type PhotoView } from '~/domain/photo.ts';
import { originalKey } from '~/domain/photo-keys.ts';
import type { BeginPhoto } from '~/schemas/photo.ts';
import { inTransaction } from '../db.ts';
import { conflict, invalid } from '../errors.ts';
import { countTry } from '../http/limits.ts';
import { Log, Photo } from '../models/index.ts';
import { onePhoto } from '../queries/photos.ts';
import { uploadForm, type UploadForm } from '../services/storage.ts';
import type { Viewer } from '../viewer.ts';
import { lockForPhotos } from './lock-photo.ts';

export interface BegunUpload {
  readonly photo: PhotoView;
  readonly upload: UploadForm;
}

/** @throws Refusal `invalid` when the log is not one of the listing's */
export async function checkLog(listingId: string, logId: string | null | undefined): Promise<void> {
  if (!logId) return;
  if (!(await Log.findOne({ where: { id: logId, listingId, removedAt: null } }))) throw invalid([{ path: 'logId', message: 'That log is not on this listing any more. Choose another.' }]);
}

/**
 * Begins an upload: a photograph that awaits its file, and a form that lets the browser store exactly that file.
 * The form is good for an hour and admits one key, one type and 25 MB.
 */
export async function beginPhotoUpload(by: Viewer, input: BeginPhoto, at: Date): Promise<BegunUpload> {
  const problem = photoProblem(input.fileName, input.type, input.bytes);
  const type = photoType(input.fileName, input.type);
  if (problem !== null || type === null) throw invalid([{ path: 'file', message: problem ?? 'This is not a picture.' }], problem ?? undefined);
  await countTry('upload', by.id);
  const photo = await inTransaction(async () => {
    await lockForPhotos(by, input.listingId);
    await checkLog(input.listingId, input.logId);
    const there = await Photo.findAll({ where: { listingId: input.listingId, bookingId: null, removedAt: null }, attributes: ['position', 'status'] });
    if (there.filter(({ status }) => status !== 'refused').length >= mostPhotos) throw conflict(`A listing has at most ${mostPhotos} photographs. Remove one first.`);
    const id = randomUUID();
    return Photo.create({
      id, listingId: input.listingId, ownerId: by.id, logId: input.logId ?? null, position: Math.max(0, ...there.map(({ position }) => position)) + 1,
      caption: input.caption ?? '', fileName: input.fileName, originalKey: originalKey(input.listingId, id), status: 'awaiting', createdAt: at,
    });
  });
  return { photo: await onePhoto(photo.id), upload: await uploadForm(photo.originalKey, type, largestPhotoBytes) };
}
