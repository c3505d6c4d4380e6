import type { Point } from '~/domain/geo.ts';
import { listingsQuery, type ListingsQuery } from '~/schemas/listings.ts';
import { invalid } from '~/server/errors.ts';
import { openEndpoint } from '~/server/http/endpoint.ts';
import { openListings, publicItem } from '~/server/queries/open-listings.ts';
import { pointOfZip } from '~/server/services/places.ts';

function whence({ lat, lng, zip }: ListingsQuery): Point | null {
  if (lat !== undefined && lng !== undefined) return { lat, lng };
  if (zip === undefined) return null;
  const point = pointOfZip(zip);
  if (!point) throw invalid([{ path: 'zip', message: 'We do not know where this ZIP code is. Try one nearby.' }]);
  return point;
}

export const GET = openEndpoint({
  query: listingsQuery,
  run: async ({ query, at }) => {
    const from = whence(query);
    const found = await openListings({ ...query, from, sort: query.sort ?? (from ? 'distance' : 'newest') }, at);
    return { ...found, items: found.items.map(publicItem) };
  },
});
