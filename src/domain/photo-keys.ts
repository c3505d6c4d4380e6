import { renditionSizes, renditionTypes, type RenditionFormat, type RenditionSize } from './photo.ts';

/** Where a photograph's files lie in storage. Originals are never served; renditions are passed on by our own address. */

/** @param ofId the listing it belongs to, or the sawyer */
export const originalKey = (ofId: string, photoId: string): string => `originals/${ofId}/${photoId}`;

export const renditionKey = (photoId: string, size: RenditionSize, format: RenditionFormat): string => `renditions/${photoId}/${size}.${format}`;

/** Every key a photograph may have files under. */
export const allKeys = (photo: { readonly id: string; readonly originalKey: string }): string[] => [
  photo.originalKey,
  ...renditionSizes.flatMap((size) => (Object.keys(renditionTypes) as RenditionFormat[]).map((format) => renditionKey(photo.id, size, format))),
];
