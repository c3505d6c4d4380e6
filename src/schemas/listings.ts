import { z } from 'zod';
import { checkPoint } from '~/domain/geo.ts';
import { readCursor } from '~/domain/finding/cursor.ts';
import { listingSorts } from '~/domain/finding/sorts.ts';
import { speciesCode } from './timber-fields.ts';

/** A number written in a query string, between two limits. */
export const numberText = (low: number, high: number, what: string) =>
  z
    .string()
    .trim()
    .regex(/^-?\d{1,12}(\.\d{1,12})?$/, { error: `${what} is a number.` })
    .transform(Number)
    .refine((value) => value >= low && value <= high, { error: `${what} is between ${low.toLocaleString('en-US')} and ${high.toLocaleString('en-US')}.` });

const wholeText = (low: number, high: number, what: string) => numberText(low, high, what).refine(Number.isInteger, { error: `${what} is a whole number.` });

/** What a list of open listings may be asked for; shared by the page's address and the endpoint. */
export const findingFields = {
  lat: numberText(-90, 90, 'The latitude').optional(),
  lng: numberText(-180, 180, 'The longitude').optional(),
  zip: z.string().trim().regex(/^\d{5}(-\d{4})?$/, { error: 'Write the five digits of a ZIP code.' }).optional(),
  radiusMi: numberText(1, 500, 'The distance, in miles,').optional(),
  species: speciesCode.optional(),
  minBoardFeet: numberText(0, 1_000_000, 'The least board feet').optional(),
  maxLargestEndIn: numberText(1, 200, 'The largest log, in inches,').optional(),
  sort: z.enum(listingSorts, { error: 'Sort by distance, closing, sawBy or newest.' }).optional(),
  cursor: z.string().max(300).optional(),
  limit: wholeText(1, 100, 'The limit').default(20),
};

interface Whereabouts {
  readonly lat?: number | undefined;
  readonly lng?: number | undefined;
  readonly zip?: string | undefined;
  readonly radiusMi?: number | undefined;
  readonly sort?: string | undefined;
  readonly cursor?: string | undefined;
}

/** A place is a latitude with a longitude, or a ZIP; distance needs one; a cursor goes on with the sort it came from. */
export function checkWhereabouts(asked: Whereabouts, context: z.RefinementCtx): void {
  const say = (path: string, message: string): void => context.addIssue({ code: 'custom', path: [path], message });
  const { lat, lng, zip, radiusMi, sort, cursor } = asked;
  if ((lat === undefined) !== (lng === undefined)) say(lat === undefined ? 'lat' : 'lng', 'Give latitude and longitude together.');
  if (lat !== undefined && zip !== undefined) say('zip', 'Give a ZIP code or a latitude and longitude, not both.');
  if (lat !== undefined && lng !== undefined) {
    const point = checkPoint(lat, lng);
    if (!point.ok) for (const problem of point.problems) say(problem.path, problem.message);
  }
  const placed = lat !== undefined || zip !== undefined;
  if (!placed && radiusMi !== undefined) say('radiusMi', 'Say from where: give a ZIP code, or a latitude and longitude.');
  if (!placed && sort === 'distance') say('sort', 'Sorting by distance needs a ZIP code, or a latitude and longitude.');
  if (cursor !== undefined && readCursor(cursor, sort ?? (placed ? 'distance' : 'newest')) === null) say('cursor', 'This cursor does not belong to this list. Begin again without it.');
}

/** `GET /api/listings` */
export const listingsQuery = z.strictObject(findingFields).superRefine(checkWhereabouts);
export type ListingsQuery = z.output<typeof listingsQuery>;

export const listingItem = z.object({
  id: z.number().int(),
  title: z.string(),
  species: z.array(z.string()),
  logCount: z.number().int(),
  /** International ¼. */
  boardFeet: z.number(),
  largestEndOutsideBarkIn: z.number(),
  /** Great circle to `place`; null when no place was asked from. */
  distanceMi: z.number().nullable(),
  /** The middle of a grid cell of about a mile, the same for every asker. */
  place: z.object({ lat: z.number(), lng: z.number(), town: z.string() }),
  closesOn: z.string(),
  sawBy: z.string().nullable(),
  bidCount: z.number().int(),
  photo: z.object({ src: z.string(), srcset: z.string(), width: z.number(), height: z.number(), alt: z.string(), blur: z.string() }).optional(),
});
export type ListingItem = z.output<typeof listingItem>;

export const listingsAnswer = z.object({ items: z.array(listingItem), nextCursor: z.string().nullable(), total: z.number().int(), totalIsExact: z.boolean() });
