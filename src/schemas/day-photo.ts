import { z } from 'zod';
import { beginPhotoSchema, photoViewSchema } from './photo.ts';

/** What a photograph of the day shows. */
export const shownOnTheDay = z.enum(['metal', 'boards']);
export type ShownOnTheDay = z.infer<typeof shownOnTheDay>;

/** `POST /api/bookings/{number}/photos`: begins an upload. `id` is made on the phone, so that a repeated sending adds nothing. */
export const beginDayPhotoSchema = z.strictObject({
  account: z.uuid().optional(),
  id: z.uuid(),
  shows: shownOnTheDay,
  hitId: z.uuid().nullable().default(null),
  fileName: beginPhotoSchema.shape.fileName,
  type: beginPhotoSchema.shape.type,
  bytes: beginPhotoSchema.shape.bytes,
});
export type BeginDayPhoto = z.infer<typeof beginDayPhotoSchema>;

/** `upload` is null for a photograph whose file has arrived before. */
export const beginDayPhotoAnswer = z.object({ photo: photoViewSchema, upload: z.object({ url: z.string(), fields: z.record(z.string(), z.string()) }).nullable() });

export const removeDayPhotoForm = z.object({ photo: z.uuid() });
