import { beforeAll, describe, expect, inject, it } from 'vitest';
import { DEEPEST_TILE } from '~/domain/finding/tiles.ts';
import { publishListing } from '../support/bidding-forms.ts';
import { Browser } from '../support/browser.ts';
import { readMarks, tileAt, type ReadMark } from '../support/read-tile.ts';

const origin = inject('origin');
const get = (path: string, headers: Record<string, string> = {}): Promise<Response> => fetch(new URL(path, origin), { headers });
const middle = { lat: 43.5561, lng: -90.8884 };
const owner = new Browser(origin);

/** The list's answer, every page of it. */
async function listed(filters: string): Promise<readonly { readonly id: number }[]> {
  const items: { id: number }[] = [];
  for (let cursor: string | null = ''; cursor !== null; ) {
    const page = (await (await get(`/api/listings?lat=${middle.lat}&lng=${middle.lng}&radiusMi=500&limit=100${filters}${cursor === '' ? '' : `&cursor=${cursor}`}`)).json()) as { items: { id: number }[]; nextCursor: string | null };
    items.push(...page.items);
    cursor = page.nextCursor;
  }
  return items;
}

async function marksOver(z: number, filters = ''): Promise<readonly ReadMark[]> {
  const tile = tileAt(middle, z);
  const answer = await get(`/api/tiles/${tile.z}/${tile.x}/${tile.y}${filters.replace('&', '?')}`);
  expect(answer.status).toBe(200);
  return readMarks(new Uint8Array(await answer.arrayBuffer()), tile);
}

beforeAll(async () => {
  await owner.signUp({ name: 'Tia Tile', email: 'tia@tiles.example', as: ['landowner'] }, inject('mailPage'));
  await publishListing(owner);
  await publishListing(owner, { lat: '43.5861', lng: '-90.8484' });
});

describe('GET /api/tiles/{z}/{x}/{y}', () => {
  it.each(['', '&species=white-oak', '&species=black-walnut', '&minBoardFeet=100000', '&maxLargestEndIn=12'])('holds what the list holds (%s)', async (filters) => {
    const items = await listed(filters);
    expect((await marksOver(0, filters)).reduce((sum, { listings }) => sum + listings, 0)).toBe(items.length);
  });

  it('near the ground names each listing that stands alone', async () => {
    const ids = new Set((await listed('')).map(({ id }) => id));
    const marks = await marksOver(DEEPEST_TILE);
    expect(marks.length).toBeGreaterThan(0);
    for (const { number } of marks) if (number !== undefined) expect(ids.has(number)).toBe(true);
  });

  it('is tagged, and not sent again to whoever has it', async () => {
    const first = await get('/api/tiles/3/2/2');
    const etag = first.headers.get('etag') ?? '';
    expect(first.headers.get('content-type')).toBe('application/vnd.mapbox-vector-tile');
    expect(first.headers.get('cache-control')).toMatch(/^public, max-age=\d+/);
    expect(first.headers.get('set-cookie')).toBeNull();
    const again = await get('/api/tiles/3/2/2', { 'if-none-match': `"other", ${etag}` });
    expect([again.status, again.headers.get('etag'), (await again.arrayBuffer()).byteLength]).toEqual([304, etag, 0]);
    expect((await get('/api/tiles/3/2/2', { 'if-none-match': '"other"' })).status).toBe(200);
  });

  it('is the same for somebody signed in, without a cookie', async () => {
    const own = await owner.get('/api/tiles/3/2/2');
    expect(own.headers.get('set-cookie')).toBeNull();
    expect(own.headers.get('etag')).toBe((await get('/api/tiles/3/2/2')).headers.get('etag'));
  });

  it.each(['13/0/0', '3/8/0', '3/0/8', '3/-1/0', '3/1.5/0', 'a/0/0', '03/0/0', '3/0/0?species=nope', '3/0/0?radiusMi=5', '3/0/0?closing=yes', '3/0/0?fits=30', '3/0/0?fits=30x18x4x1', '3/0/0?minBoardFeet=-1', '3/0/0?species=white-oak&species=white-oak'])('refuses %s in plain words', async (address) => {
    const answer = await get(`/api/tiles/${address}`);
    expect(answer.status).toBe(422);
    const { errors } = (await answer.json()) as { errors: { path: string; message: string }[] };
    for (const { path, message } of errors) expect([path, message.endsWith('.')]).toEqual([expect.stringMatching(/./), true]);
    expect(errors.length).toBeGreaterThan(0);
  });

  it('has no other form', async () => {
    for (const path of ['/api/tiles/3/2', '/api/tiles/3/2/2/1', '/api/tiles/3/2/2%2f']) expect([400, 404]).toContain((await get(path)).status);
    expect((await fetch(new URL('/api/tiles/3/2/2', origin), { method: 'POST', headers: { origin } })).status).toBe(404);
  });
});
