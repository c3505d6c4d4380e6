import { randomUUID } from 'node:crypto';
import { beforeAll, describe, expect, it } from 'vitest';
import { cellOf, DEEPEST_TILE, mapPlace, markLevel, type Tile } from '~/domain/finding/tiles.ts';
import { coarsePoint, greatCircleMiles, type Point } from '~/domain/geo.ts';
import { countMap } from '~/server/commands/count-map.ts';
import { execute, rows } from '~/server/db.ts';
import { Account, Listing } from '~/server/models/index.ts';
import { logsTile } from '~/server/queries/logs-tile.ts';
import { openListings, type FoundListing, type ListingsWanted } from '~/server/queries/open-listings.ts';
import { readMarks, tileAt, type ReadMark } from '../support/read-tile.ts';
import { generator } from '../support/random.ts';

const at = new Date('2026-08-01T15:00:00Z');
const middle: Point = { lat: 43.56, lng: -90.89 };
const random = generator(11);

async function make(count: number): Promise<void> {
  const ownerId = (await Account.create({ email: `${randomUUID()}@cast.example`, passwordHash: 'x', name: 'Ada', isLandowner: true, createdAt: at })).id;
  for (let index = 0; index < count; index += 1) {
    // Half of them close together, so that some share a cell of the grid.
    const wide = index % 2 === 0 ? 0.7 : 0.03;
    const place = { lat: middle.lat + wide * (random() - 0.5), lng: middle.lng + wide * (random() - 0.5) };
    const geo = (point: Point) => ({ type: 'Point', coordinates: [point.lng, point.lat] }) as const;
    await Listing.create({
      ownerId, status: index % 17 === 0 ? 'withdrawn' : 'open', revision: 1, title: `Logs ${index}`, treeOwner: 'mine', treeOwnerConfirmedAt: at, howDown: 'uprooted', cameDownOn: '2026-07-15', zip: '54665', town: 'Viroqua', state: 'WI',
      timeZone: 'America/Chicago', place: geo(place), coarse: geo(coarsePoint(place)), metalRisk: 'unknown', closesAt: new Date(at.getTime() + (1 + (index % 20)) * 86_400_000), species: [index % 3 === 0 ? 'black-walnut' : 'white-oak'], logCount: 1,
      boardFeet: 100 * (1 + (index % 12)), largestEndObIn: 12 + (index % 20), createdAt: at, updatedAt: at, publishedAt: at, hiddenAt: index % 19 === 0 ? at : null,
    });
  }
}

/** Every mark of a zoom over all that was made. */
async function marksAt(z: number, wanted: ListingsWanted = {}): Promise<readonly ReadMark[]> {
  const [northWest, southEast] = [tileAt({ lat: middle.lat + 0.4, lng: middle.lng - 0.4 }, z), tileAt({ lat: middle.lat - 0.4, lng: middle.lng + 0.4 }, z)];
  const marks: ReadMark[] = [];
  for (let x = northWest.x; x <= southEast.x; x += 1) for (let y = northWest.y; y <= southEast.y; y += 1) marks.push(...readMarks(await logsTile({ z, x, y }, wanted, at), { z, x, y }));
  return marks;
}

const listed = async (wanted: ListingsWanted = {}): Promise<readonly FoundListing[]> => (await openListings({ ...wanted, from: middle, sort: 'distance', limit: 500 }, at)).items;

beforeAll(() => make(240));

describe('a tile', () => {
  it('has the columns that the rules work out, for every coarse point', async () => {
    const found = await rows<{ lat: number; lng: number; x: number; y: number; cell: string }>('SELECT ST_Y(coarse::geometry) AS lat, ST_X(coarse::geometry) AS lng, map_x AS x, map_y AS y, map_cell::text AS cell FROM listing');
    expect(found.length).toBe(240);
    for (const { lat, lng, x, y, cell } of found) expect({ x, y, cell: Number(cell) }).toEqual({ ...mapPlace({ lat, lng }), cell: cellOf({ lat, lng }, 26) });
  });

  it.each([0, 3, 6, 8, 10, 11, DEEPEST_TILE])('at zoom %i stands for exactly the listings of the list', async (z) => {
    const items = await listed();
    const byCell = new Map<number, FoundListing[]>();
    for (const item of items) {
      const cell = cellOf(item.place, markLevel(z));
      byCell.set(cell, [...(byCell.get(cell) ?? []), item]);
    }
    const marks = await marksAt(z);
    expect(new Set(marks.map(({ cell }) => cell)).size).toBe(marks.length);
    expect(new Map(marks.map(({ cell, listings }) => [cell, listings]))).toEqual(new Map([...byCell].map(([cell, inside]) => [cell, inside.length])));
    for (const mark of marks) {
      const inside = byCell.get(mark.cell) ?? [];
      expect(mark.largest).toBe(Math.round(Math.max(...inside.map(({ largestEndOutsideBarkIn }) => largestEndOutsideBarkIn))));
      const [first] = inside;
      if (inside.length === 1) expect({ number: mark.number, title: mark.title }).toEqual({ number: first?.id, title: first?.title });
      else expect([mark.number, mark.title]).toEqual([undefined, undefined]);
      // A unit of the tile is 25,000 miles / 2^z / 4096 wide at the equator.
      const mean = { lat: inside.reduce((sum, { place }) => sum + place.lat, 0) / inside.length, lng: inside.reduce((sum, { place }) => sum + place.lng, 0) / inside.length };
      expect(greatCircleMiles(mark.place, inside.length === 1 && first ? first.place : mean)).toBeLessThan((25_000 / 2 ** z / 4096) * (inside.length === 1 ? 1 : 30));
    }
  });

  it('near the ground has one mark for each point of the coarse grid, in its place', async () => {
    const places = new Set((await listed()).map(({ place }) => `${place.lat} ${place.lng}`));
    const marks = await marksAt(DEEPEST_TILE);
    expect(marks.length).toBe(places.size);
    expect(marks.some(({ listings }) => listings > 1)).toBe(true);
  });

  it.each<[string, ListingsWanted]>([
    ['species', { species: 'black-walnut' }],
    ['least board feet', { minBoardFeet: 900 }],
    ['largest end', { maxLargestEndIn: 20 }],
    ['closing soon', { closesBefore: new Date(at.getTime() + 7 * 86_400_000) }],
    ['what a mill takes', { fits: [{ largestLogIn: 18, longestFt: 20, shortestFt: 0 }, { largestLogIn: 14, longestFt: 40, shortestFt: 0 }] }],
  ])('is filtered as the list is: %s', async (_, wanted) => {
    const items = await listed(wanted);
    expect(items.length).toBeGreaterThan(0);
    expect(items.length).toBeLessThan((await listed()).length);
    for (const z of [2, 9, 12]) expect((await marksAt(z, wanted)).reduce((sum, { listings }) => sum + listings, 0)).toBe(items.length);
  });

  it('is empty where nothing lies, and the same bytes each time', async () => {
    const sea: Tile = { z: 5, x: 0, y: 12 };
    expect((await logsTile(sea, {}, at)).length).toBe(0);
    const here = tileAt(middle, 8);
    expect((await logsTile(here, {}, at)).equals(await logsTile(here, {}, at))).toBe(true);
  });

  it('is read from its own index', async () => {
    const [line] = await rows<{ indexdef: string }>(`SELECT indexdef FROM pg_indexes WHERE indexname = 'listing_open_map'`);
    expect(line?.indexdef).toContain(`WHERE ((status = 'open'::text) AND (hidden_at IS NULL))`);
  });
});

describe('the counts of a low zoom', () => {
  const low = [0, 2, 5, 6, 7] as const;
  const noted = async (): Promise<number> => (await rows('SELECT 1 AS one FROM map_changed')).length;
  /** The marks as they are counted one by one: a filter that leaves everything in. */
  const oneByOne = async (): Promise<unknown> => Promise.all(low.map((z) => marksAt(z, { minBoardFeet: 0 })));
  const asKept = async (): Promise<unknown> => Promise.all(low.map((z) => marksAt(z)));

  it('are the same from what is kept as one by one', async () => {
    await countMap(at);
    expect(await noted()).toBe(0);
    expect(await asKept()).toEqual(await oneByOne());
    // They are kept: listings that were never noted would not be in them.
    await execute('UPDATE map_count SET listings = listings + 1000');
    expect(await asKept()).not.toEqual(await oneByOne());
    await execute('INSERT INTO map_changed (cell) SELECT cell FROM map_count');
    expect(await asKept()).toEqual(await oneByOne());
    await countMap(at);
  });

  it('are never behind what was listed, hidden, changed, moved, closed or taken away, before they are counted again and after', async () => {
    const some = (change: string, share: number) => execute(`UPDATE listing SET ${change} WHERE number % 9 = ${share}`);
    const changes: readonly (() => Promise<unknown>)[] = [
      () => make(12),
      () => some('hidden_at = now()', 1),
      () => some('hidden_at = NULL', 1),
      () => some("status = 'withdrawn'", 2),
      () => some('largest_end_ob_in = 44', 3),
      () => some('coarse = ST_SetSRID(ST_MakePoint(-91.2, 43.9), 4326)::geography', 4),
      () => execute('DELETE FROM listing WHERE number % 9 = 5'),
      () => some("closes_at = '2026-07-01'", 6),
    ];
    for (const [index, change] of changes.entries()) {
      await change();
      expect(await noted()).toBeGreaterThan(0);
      expect(await asKept()).toEqual(await oneByOne());
      if (index % 2 === 1) await countMap(at);
      expect(await asKept()).toEqual(await oneByOne());
    }
  });

  it('are not counted again for what no map shows', async () => {
    await countMap(at);
    await execute("UPDATE listing SET title = 'Other words'");
    await execute("UPDATE listing SET largest_end_ob_in = 20 WHERE status = 'withdrawn'");
    expect(await noted()).toBe(0);
    expect(await asKept()).toEqual(await oneByOne());
  });

  it('hold what is committed while they are counted', async () => {
    await Promise.all([make(6), countMap(at), make(6), countMap(at)]);
    await countMap(at);
    expect(await noted()).toBe(0);
    expect(await asKept()).toEqual(await oneByOne());
  });
});
