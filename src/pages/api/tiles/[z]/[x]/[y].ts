import { CLOSING_HOURS } from '~/domain/finding/sorts.ts';
import { addHours } from '~/domain/time.ts';
import { readTile, tileQuery } from '~/schemas/tiles.ts';
import { valueOf } from '~/server/errors.ts';
import { clientAddress } from '~/server/http/client-address.ts';
import { openEndpoint } from '~/server/http/endpoint.ts';
import { countTry } from '~/server/http/limits.ts';
import { tileResponse } from '~/server/http/tile-response.ts';
import { KeptAnswers } from '~/server/kept-answers.ts';
import { logsTile } from '~/server/queries/logs-tile.ts';

/** A tile that gathers very many listings takes longer, and changes by a few of them in a minute. */
const kept = new KeptAnswers<Buffer>({ costlyMs: 80, freshMs: 60_000, staleMs: 600_000, most: 500 });

/** A tile of the map of logs. Session and cookies have no part in it. */
export const GET = openEndpoint({
  query: tileQuery,
  run: async ({ query: { closing, ...wanted }, params, at, context }) => {
    const tile = valueOf(readTile(params['z'], params['x'], params['y']));
    const key = JSON.stringify([tile.z, tile.x, tile.y, closing, wanted]);
    if (!kept.has(key)) await countTry('map tiles', clientAddress(context.request));
    return tileResponse(context.request, await kept.get(key, () => logsTile(tile, { ...wanted, closesBefore: closing ? addHours(at, CLOSING_HOURS) : undefined }, at)));
  },
});
