import type { RenditionFormat, RenditionSize } from '~/domain/photo.ts';
import { renditionKey } from '~/domain/photo-keys.ts';
import { notFound, unavailable } from './errors.ts';
import { log } from './log.ts';
import { MissingObject, openObject, type OpenObject } from './services/storage.ts';

/** The bytes of one rendition, as a stream. Ask `photoAudience` first. @throws Refusal `notFound`, `unavailable` when storage is away */
export async function openRendition(photoId: string, size: RenditionSize, format: RenditionFormat): Promise<OpenObject> {
  try {
    return await openObject(renditionKey(photoId, size, format));
  } catch (error) {
    if (error instanceof MissingObject) throw notFound('photograph');
    log().error({ err: error, photoId }, 'storage did not give a photograph');
    throw unavailable('Photographs cannot be shown just now. Try again in a minute.');
  }
}
