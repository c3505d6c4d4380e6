import type { PlaceAnswer } from '~/schemas/place.ts';
import { notFound } from '../errors.ts';
import { placeOfZip, townsNear } from '../services/places.ts';

/** What a ZIP code is called and where it lies. @throws Refusal `notFound` for a code without an area */
export function placeForZip(zip: string): PlaceAnswer {
  const place = placeOfZip(zip);
  if (!place) throw notFound('ZIP code');
  const { point, town, county, state } = place;
  return { zip: place.zip, town, county, state, ...point, towns: townsNear(point, 25, 12).map((near) => ({ name: near.name, ...near.point })) };
}

/** Where a ZIP code lies, for pages that only need the point. */
export { pointOfZip } from '../services/places.ts';
