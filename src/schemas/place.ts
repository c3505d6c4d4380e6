import { z } from 'zod';

/** `GET /api/places` */
export const placeQuery = z.strictObject({ zip: z.string({ error: 'Give a ZIP code.' }).regex(/^\d{5}(-\d{4})?$/, { error: 'A ZIP code has five digits.' }) });

const point = { lat: z.number(), lng: z.number() };

/** A ZIP code's place: the middle of its area, what it is called, and the towns about it. */
export const placeAnswer = z.object({ zip: z.string(), town: z.string(), county: z.string(), state: z.string(), ...point, towns: z.array(z.object({ name: z.string(), ...point })) });

export type PlaceAnswer = z.infer<typeof placeAnswer>;
