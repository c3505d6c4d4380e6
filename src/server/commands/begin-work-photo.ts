import { randomUUID } from 'node:crypto';
import { largestPhotoBytes, mostWorkPhotos } from '~/domain/photo.ts';
import { originalKey } from '~/domain/photo-keys.ts';
import type { BeginWorkPhoto } from '~/schemas/photo.ts';
import { inTransaction } from '../db.ts';
import { Photo } from '../models/index.ts';
import { onePhoto } from '../queries/photos.ts';
import { uploadForm } from '../services/storage.ts';
import type { Viewer } from '../viewer.ts';
import { type BegunUpload, checkFile, nextPosition } from './begin-photo-upload.ts';
import { lockForWorkPhotos } from './lock-photo.ts';

/**
 * Begins the upload of a photograph of a sawyer's own work, for their own page.
 * @throws Refusal `forbidden` for who is no sawyer, `conflict` before a profile is saved or when there are as many as there may be
 */
export async function beginWorkPhoto(by: Viewer, input: BeginWorkPhoto, at: Date): Promise<BegunUpload> {
  const type = await checkFile(by, input);
  const photo = await inTransaction(async () => {
    await lockForWorkPhotos(by);
    const there = await Photo.findAll({ where: { sawyerId: by.id, removedAt: null }, attributes: ['position', 'status'] });
    const position = nextPosition(there, mostWorkPhotos, `Your page has at most ${mostWorkPhotos} photographs. Remove one first.`);
    const id = randomUUID();
    return Photo.create({ id, sawyerId: by.id, ownerId: by.id, position, caption: input.caption ?? '', fileName: input.fileName, originalKey: originalKey(by.id, id), status: 'awaiting', createdAt: at });
  });
  return { photo: await onePhoto(photo.id), upload: await uploadForm(photo.originalKey, type, largestPhotoBytes) };
}
