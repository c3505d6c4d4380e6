import type { PhotoView } from '~/domain/photo.ts';
import type { OrderPhotos } from '~/schemas/photo.ts';
import { inTransaction } from '../db.ts';
import { Photo } from '../models/index.ts';
import { allPhotos } from '../queries/photos.ts';
import type { Viewer } from '../viewer.ts';
import { lockForPhotos } from './lock-photo.ts';

/**
 * Puts a listing's photographs in this order. Those that are not named (added meanwhile on another device) keep their order and
 * come last; names that are not there any more are passed over.
 */
export async function orderPhotos(by: Viewer, input: OrderPhotos): Promise<PhotoView[]> {
  await inTransaction(async () => {
    await lockForPhotos(by, input.listingId);
    const there = await Photo.findAll({ where: { listingId: input.listingId, bookingId: null, removedAt: null }, order: [['position', 'ASC'], ['createdAt', 'ASC'], ['id', 'ASC']] });
    const wanted = [...new Set(input.ids)];
    const named = wanted.flatMap((id) => there.find((photo) => photo.id === id) ?? []);
    const inOrder = [...named, ...there.filter((photo) => !wanted.includes(photo.id))];
    for (const [index, photo] of inOrder.entries()) if (photo.position !== index + 1) await photo.update({ position: index + 1 });
  });
  return allPhotos(input.listingId);
}
