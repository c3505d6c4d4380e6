import { z } from 'zod';
import { largestPhotoBytes, longestCaption, mostPhotos, mostWorkPhotos } from '~/domain/photo.ts';

const id = z.uuid('This is not the id of anything here.');
const caption = z.string().trim().max(longestCaption, `A caption has at most ${longestCaption} letters.`);

/** `POST /api/photos`: begins an upload. `type` may be empty: then the file name's ending decides. */
export const beginPhotoSchema = z.strictObject({
  listingId: id,
  fileName: z.string().min(1, 'Say what the file is called.').max(255, 'The file name is too long.'),
  type: z.string().max(100),
  bytes: z.int('Give the size in bytes.').min(0).max(largestPhotoBytes * 1000),
  logId: id.nullish(),
  caption: caption.optional(),
});
export type BeginPhoto = z.infer<typeof beginPhotoSchema>;

/** `POST /api/work-photos`: begins the upload of a photograph of one's own work. */
export const beginWorkPhotoSchema = beginPhotoSchema.omit({ listingId: true, logId: true });
export type BeginWorkPhoto = z.infer<typeof beginWorkPhotoSchema>;

/** `PATCH /api/photos/{id}`. What is left out stays. */
export const changePhotoSchema = z.strictObject({ caption: caption.optional(), logId: id.nullable().optional() });
export type ChangePhoto = z.infer<typeof changePhotoSchema>;

/** `PUT /api/photos/order`: every photograph of the listing, first to last. */
export const orderPhotosSchema = z.strictObject({ listingId: id, ids: z.array(id).max(mostPhotos * 2) });
export type OrderPhotos = z.infer<typeof orderPhotosSchema>;

/** `PUT /api/work-photos/order`: every photograph of one's own work, first to last. */
export const orderWorkPhotosSchema = z.strictObject({ ids: z.array(id).max(mostWorkPhotos * 2) });
export type OrderWorkPhotos = z.infer<typeof orderWorkPhotosSchema>;

/** `GET /api/photos` */
export const listPhotosSchema = z.strictObject({ listingId: id });

export const pictureViewSchema = z.object({ src: z.string(), srcset: z.string(), width: z.int(), height: z.int(), alt: z.string(), blur: z.string() });
export const photoViewSchema = z.object({
  id: z.uuid(),
  status: z.enum(['awaiting', 'checking', 'ready', 'refused']),
  refusedBecause: z.string().nullable(),
  fileName: z.string(),
  caption: z.string(),
  logId: z.uuid().nullable(),
  picture: pictureViewSchema.nullable(),
});
export const photosAnswerSchema = z.object({ photos: z.array(photoViewSchema) });
/** The form to send the file with: every field first, then the file as `file`. */
export const beginPhotoAnswerSchema = z.object({ photo: photoViewSchema, upload: z.object({ url: z.string(), fields: z.record(z.string(), z.string()) }) });

const NO_PHOTO = '00000000-0000-0000-0000-000000000000';
/** An id from an address. What is not an id becomes one that no photograph has, so that both are simply not found. */
export const photoId = (text: string | undefined): string => (id.safeParse(text).success ? (text ?? NO_PHOTO) : NO_PHOTO);
