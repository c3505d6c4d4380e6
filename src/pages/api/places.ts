import { placeQuery } from '~/schemas/place.ts';
import { openEndpoint } from '~/server/http/endpoint.ts';
import { placeForZip } from '~/server/queries/place-of-zip.ts';

export const GET = openEndpoint({ query: placeQuery, run: async ({ query }) => placeForZip(query.zip) });
