import { beforeAll, describe, expect, it } from 'vitest';
import { coarsePoint, greatCircleMiles, type Point } from '~/domain/geo.ts';
import { execute, rows } from '~/server/db.ts';
import { Account } from '~/server/models/index.ts';
import { openListings, type ListingsAsked } from '~/server/queries/open-listings.ts';
import { generator } from '../support/random.ts';

// Lists are read in different ways when few, many and very many meet what is asked; all must answer the same.
const at = new Date('2026-08-01T15:00:00Z');
const from: Point = { lat: 43.532, lng: -90.9286 };
const LISTINGS = 7_000;

interface Known {
  readonly id: string;
  readonly number: number;
  readonly miles: number;
  readonly closes: string;
  readonly sawBy: string | null;
  readonly published: string;
  readonly species: string;
  readonly boardFeet: number;
}
let all: readonly Known[] = [];

beforeAll(async () => {
  const ownerId = (await Account.create({ email: 'ada@cast.example', passwordHash: 'x', name: 'Ada', isLandowner: true, createdAt: at })).id;
  const random = generator(7);
  const points = Array.from({ length: LISTINGS }, (_, index) => {
    // Dense near by, so that many share a cell of the grid, and some as far as 300 miles.
    const reach = index % 10 === 0 ? 8 : 0.8;
    return coarsePoint({ lat: from.lat + reach * (random() - 0.5), lng: from.lng + reach * (random() - 0.5) });
  });
  await execute(
    `INSERT INTO listing (owner_id, status, revision, title, tree_owner, tree_owner_confirmed_at, how_down, came_down_on, time_zone, place, coarse, metal_risk, closes_at, saw_by, species, log_count, board_feet, largest_end_ob_in, created_at, updated_at, published_at)
     SELECT $1::uuid, CASE WHEN n % 50 = 0 THEN 'withdrawn' ELSE 'open' END, 1, 'Logs ' || n, 'mine', $2::timestamptz, 'uprooted', '2026-07-15', 'America/Chicago', p, p, 'unknown', $2::timestamptz + (n % 97 - 1) * interval '1 hour',
       CASE WHEN n % 7 = 0 THEN NULL ELSE date '2026-08-02' + n % 60 END, ARRAY[CASE WHEN n % 400 = 0 THEN 'black-walnut' ELSE 'white-oak' END], 1, 100 + n % 900, 20, $2::timestamptz, $2::timestamptz, $2::timestamptz - (n * 7919 % 5003) * interval '1 minute'
     FROM (SELECT row_number() OVER ()::int AS n, ST_SetSRID(ST_MakePoint(lng, lat), 4326)::geography AS p FROM unnest($3::float8[], $4::float8[]) AS spot (lat, lng)) made`,
    [ownerId, at, points.map(({ lat }) => lat), points.map(({ lng }) => lng)],
  );
  await execute('ANALYZE listing');
  const found = await rows<Omit<Known, 'miles'> & Point>(
    `SELECT id, number, ST_Y(coarse::geometry) AS lat, ST_X(coarse::geometry) AS lng, closes_at::text AS closes, saw_by::text AS "sawBy", published_at::text AS published, species[1] AS species, board_feet AS "boardFeet"
     FROM listing WHERE status = 'open' AND closes_at > $1`,
    [at],
  );
  all = found.map(({ lat, lng, ...row }) => ({ ...row, miles: Math.round(greatCircleMiles(from, { lat, lng }) * 1e6) / 1e6 }));
}, 120_000);

const keys: Readonly<Record<ListingsAsked['sort'], (row: Known) => number | string>> = {
  distance: ({ miles }) => miles,
  closing: ({ closes }) => closes,
  newest: ({ published }) => -Date.parse(published),
  sawBy: ({ sawBy }) => sawBy ?? '9999',
};
const meets = ({ radiusMi, species, minBoardFeet }: Partial<ListingsAsked>) => (row: Known): boolean =>
  (radiusMi === undefined || row.miles <= radiusMi) && (species === undefined || row.species === species) && (minBoardFeet === undefined || row.boardFeet >= minBoardFeet);
const inOrder = (sort: ListingsAsked['sort']) => (a: Known, b: Known): number => (keys[sort](a) < keys[sort](b) ? -1 : keys[sort](a) > keys[sort](b) ? 1 : a.id < b.id ? -1 : 1);

describe('seven thousand listings', () => {
  it.each<[string, Partial<ListingsAsked>]>([
    ['a hundred or so near by', { radiusMi: 5 }],
    ['a few thousand near by', { radiusMi: 14 }],
    ['more than are gathered, near by', { radiusMi: 60 }],
    ['nearly all of them, far', { radiusMi: 240 }],
    ['a few of a rare species, near by', { radiusMi: 60, species: 'black-walnut' }],
    ['a few of a rare species, far', { radiusMi: 240, species: 'black-walnut' }],
    ['the largest, from anywhere', { minBoardFeet: 998 }],
    ['more than are counted of the larger, from anywhere', { minBoardFeet: 700 }],
    ['more than are counted of the larger, far', { radiusMi: 240, minBoardFeet: 700 }],
    ['all of them', {}],
    ['none', { radiusMi: 60, minBoardFeet: 5000 }],
  ])('come in order, each once, page by page: %s', async (_, wanted) => {
    const met = all.filter(meets(wanted));
    for (const sort of ['distance', 'closing', 'newest', 'sawBy'] as const) {
      const whole = [...met].sort(inOrder(sort)).slice(0, 100);
      const seen: number[] = [];
      let cursor: string | undefined;
      for (let page = 0; page < 4; page += 1) {
        const found = await openListings({ ...wanted, from, sort, limit: 25, cursor }, at);
        expect([found.total, found.totalIsExact]).toEqual([Math.min(1000, met.length), met.length <= 1000]);
        seen.push(...found.items.map(({ id }) => id));
        expect(found.nextCursor === null).toBe(met.length <= seen.length);
        if (found.nextCursor === null) break;
        cursor = found.nextCursor;
      }
      expect(seen).toEqual(whole.map(({ number }) => number));
    }
  });

  it('are looked through for the nearest few of those that meet what is asked', async () => {
    for (const wanted of [{ radiusMi: 60 }, { radiusMi: 60, species: 'black-walnut' }]) {
      const nearest = all.filter(meets(wanted)).sort(inOrder('distance')).slice(0, 30);
      const found = await openListings({ ...wanted, from, sort: 'distance', among: 30, limit: 30 }, at);
      expect(found.items.map(({ distanceMi }) => Math.round((distanceMi ?? 0) * 100))).toEqual(nearest.map(({ miles }) => Math.round(miles * 100)));
    }
  });
});
