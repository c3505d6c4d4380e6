import type { PhotoView } from '~/domain/photo.ts';
import type { OrderPhotos, OrderWorkPhotos } from '~/schemas/photo.ts';
import { inTransaction } from '../db.ts';
import { Photo } from '../models/index.ts';
import { allPhotos, workPhotos } from '../queries/photos.ts';
import type { Viewer } from '../viewer.ts';
import { lockForPhotos, lockForWorkPhotos } from './lock-photo.ts';

/**
 * Puts photographs in this order. Those that are not named (added meanwhile on another device) keep their order and come last; names
 * that are not there any more are passed over.
 */
async function putInOrder(of: { readonly listingId: string; readonly bookingId: null } | { readonly sawyerId: string }, ids: readonly string[]): Promise<void> {
  const there = await Photo.findAll({ where: { ...of, removedAt: null }, order: [['position', 'ASC'], ['createdAt', 'ASC'], ['id', 'ASC']] });
  const wanted = [...new Set(ids)];
  const named = wanted.flatMap((id) => there.find((photo) => photo.id === id) ?? []);
  const inOrder = [...named, ...there.filter((photo) => !wanted.includes(photo.id))];
  for (const [index, photo] of inOrder.entries()) if (photo.position !== index + 1) await photo.update({ position: index + 1 });
}

/** Puts a listing's photographs in order. */
export async function orderPhotos(by: Viewer, { listingId, ids }: OrderPhotos): Promise<PhotoView[]> {
  await inTransaction(async () => {
    await lockForPhotos(by, listingId);
    await putInOrder({ listingId, bookingId: null }, ids);
  });
  return allPhotos(listingId);
}

/** Puts the photographs of a sawyer's own work in order. */
export async function orderWorkPhotos(by: Viewer, { ids }: OrderWorkPhotos): Promise<PhotoView[]> {
  await inTransaction(async () => {
    await lockForWorkPhotos(by);
    await putInOrder({ sawyerId: by.id }, ids);
  });
  return workPhotos(by.id);
}
