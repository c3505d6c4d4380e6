import { randomUUID } from 'node:crypto';
import { largestPhotoBytes, mostPhotos, photoProblem, photoType, type PhotoStatus, type PhotoType, type PhotoView } from '~/domain/photo.ts';
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
export async function checkLog(listingId: string | null, logId: string | null | undefined): Promise<void> {
  if (!logId) return;
  if (listingId === null) throw invalid([{ path: 'logId', message: 'A photograph of your work shows no log of a listing.' }]);
  if (!(await Log.findOne({ where: { id: logId, listingId, removedAt: null } }))) throw invalid([{ path: 'logId', message: 'That log is not on this listing any more. Choose another.' }]);
}

/**
 * The type of a file that is about to be sent; a try is counted.
 * @throws Refusal `invalid` when it can be known already that the file cannot be used
 */
export async function checkFile(by: Viewer, file: { readonly fileName: string; readonly type: string; readonly bytes: number }): Promise<PhotoType> {
  const problem = photoProblem(file.fileName, file.type, file.bytes);
  const type = photoType(file.fileName, file.type);
  if (problem !== null || type === null) throw invalid([{ path: 'file', message: problem ?? 'This is not a picture.' }], problem ?? undefined);
  await countTry('upload', by.id);
  return type;
}

/** The place after the last of these photographs. @throws Refusal `conflict` when they are as many as there may be */
export function nextPosition(there: readonly { readonly position: number; readonly status: PhotoStatus }[], most: number, full: string): number {
  if (there.filter(({ status }) => status !== 'refused').length >= most) throw conflict(full);
  return Math.max(0, ...there.map(({ position }) => position)) + 1;
}

/**
 * Begins an upload: a photograph that awaits its file, and a form that lets the browser store exactly that file.
 * The form is good for an hour and admits one key, one type and 25 MB.
 */
export async function beginPhotoUpload(by: Viewer, input: BeginPhoto, at: Date): Promise<BegunUpload> {
  const type = await checkFile(by, input);
  const photo = await inTransaction(async () => {
    await lockForPhotos(by, input.listingId);
    await checkLog(input.listingId, input.logId);
    const there = await Photo.findAll({ where: { listingId: input.listingId, bookingId: null, removedAt: null }, attributes: ['position', 'status'] });
    const position = nextPosition(there, mostPhotos, `A listing has at most ${mostPhotos} photographs. Remove one first.`);
    const id = randomUUID();
    return Photo.create({
      id, listingId: input.listingId, ownerId: by.id, logId: input.logId ?? null, position,
      caption: input.caption ?? '', fileName: input.fileName, originalKey: originalKey(input.listingId, id), status: 'awaiting', createdAt: at,
    });
  });
  return { photo: await onePhoto(photo.id), upload: await uploadForm(photo.originalKey, type, largestPhotoBytes) };
}
