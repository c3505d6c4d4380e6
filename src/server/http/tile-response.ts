import { createHash } from 'node:crypto';

/** How long a browser or a cache before us uses a tile without asking, and how long it may show an old one while it asks, s. */
const FRESH_S = 60;
const STALE_S = 600;

/** A vector tile with its tag (a weak one: it is the same tag compressed or not), or 304 when the reader has it already. Anybody's tile, so any cache may keep it. */
export function tileResponse(request: Request, tile: Buffer): Response {
  const etag = `W/"${createHash('sha256').update(tile).digest('base64url').slice(0, 27)}"`;
  const headers = { etag, 'cache-control': `public, max-age=${FRESH_S}, stale-while-revalidate=${STALE_S}`, 'content-type': 'application/vnd.mapbox-vector-tile' };
  const known = (request.headers.get('if-none-match') ?? '').split(',').some((one) => one.trim() === etag);
  return known ? new Response(null, { status: 304, headers }) : new Response(new Uint8Array(tile), { headers });
}
