import { beforeAll, describe, expect, it } from 'vitest';
import { coarsePoint, type Point } from '~/domain/geo.ts';
import { readLogsPage } from '~/schemas/logs-page.ts';
import { execute, oneRow } from '~/server/db.ts';
import { Listing, Log } from '~/server/models/listing.ts';
import { listingPage } from '~/server/queries/listing-page.ts';
import { jobOnListing } from '~/server/queries/jobs-for-sawyer.ts';
import { NEAREST_WEIGHED, perHourOf } from '~/server/queries/logs-by-worth.ts';
import { logsPageView } from '~/server/queries/logs-page.ts';
import { type Cast, makeCast } from '../support/cast.ts';
import { makeOpenListing, MARKET_AT, setUpSawyer } from '../support/sawing-market.ts';

let cast: Cast;
const near: Point = { lat: 43.65, lng: -90.64 };

async function listAt(place: Point, title: string, lengthFt = 12): Promise<Listing> {
  const listing = await makeOpenListing(cast.ada.id);
  const coarse = coarsePoint(place);
  const geo = { type: 'Point' as const, coordinates: [coarse.lng, coarse.lat] as const };
  await listing.update({ title, coarse: geo, place: geo, access: { helpers: 1 } });
  if (lengthFt !== 12) await Log.update({ lengthFt }, { where: { listingId: listing.id, position: 3 } });
  return listing;
}

const view = (query: string, viewer = cast.bram) => logsPageView(readLogsPage(new URLSearchParams(query)), viewer, MARKET_AT);

beforeAll(async () => {
  cast = await makeCast();
  await setUpSawyer(cast.bram.id);
  await listAt(near, 'near');
  await listAt({ lat: 43.3, lng: -90.2 }, 'far');
  await listAt({ lat: 43.7, lng: -90.7 }, 'too long', 22);
  await listAt({ lat: 43.93, lng: -90.8 }, 'next door');
});

describe('a listing held against the sawyer’s mill', () => {
  it('stands in every row: fits or why not, and what it brings', async () => {
    const { found, weighs } = await view('zip=54656&radiusMi=100');
    expect(weighs).toBe(true);
    expect(found.items.map(({ title, job }) => [title, job?.fit.fits])).toEqual([['next door', true], ['too long', false], ['near', true], ['far', true]]);
    const [nextDoor, tooLong, , far] = found.items;
    expect(tooLong?.job?.fit.reasons).toEqual(['Log 3: 22 ft is over the longest, 18 ft.']);
    // Within the free miles: 400 × 0.50 + 75 = 275.00, less 5 % = 261.25.
    expect(nextDoor?.job?.worth).toMatchObject({ estimateCents: 27_500, netCents: 26_125 });
    expect(far?.job?.worth?.estimateCents).toBeGreaterThan(27_500);
  });

  it('says nothing of mills to others', async () => {
    expect((await view('zip=54656&radiusMi=100', cast.ada)).found.items.every(({ job }) => job === null)).toBe(true);
    expect((await view('zip=54656&radiusMi=100&sort=perHour', cast.cleo)).sort).toBe('distance');
  });

  it('is ordered and bounded by money an hour, a page at a time', async () => {
    const all = (await view('zip=54656&radiusMi=100&sort=perHour')).found;
    const figures = all.items.map(perHourOf);
    expect(figures).toEqual([...figures].sort((a, b) => b - a));
    expect(all.items.at(-1)?.title).toBe('too long');
    expect(all.among).toBeNull();

    const walked: string[] = [];
    for (let cursor = '', page = 0; page < 4; page += 1) {
      const { found } = await view(`zip=54656&radiusMi=100&sort=perHour&limit=1${cursor && `&cursor=${cursor}`}`);
      walked.push(...found.items.map(({ title }) => title));
      cursor = found.nextCursor ?? '';
    }
    expect(walked).toEqual(all.items.map(({ title }) => title));

    const least = Math.ceil((figures[1] ?? 0) / 100);
    const few = (await view(`zip=54656&radiusMi=100&minPerHour=${least}&sort=distance`)).found;
    expect(few.items.map(({ title }) => title)).toEqual([all.items[0]?.title]);
    expect(few.total).toBe(1);
  });

  it('on its own page has every reason, the pieces too wide, and what is missing', async () => {
    const tooLong = await Listing.findOne({ where: { title: 'too long' }, rejectOnEmpty: true });
    const page = await listingPage(cast.bram, tooLong.number);
    const said = await jobOnListing(cast.bram, { ...page, pieces: [{ label: 'Slab', thicknessIn: 2, widthIn: 28, lengthFt: 8, count: 1, sizing: 'full-sawn', forDwelling: false, kind: 'slab' }] });
    expect(said).toMatchObject({ missing: null, pieces: ['Slab: 28 in wide is over the widest board, 24 in.'] });
    expect(await jobOnListing(cast.cleo, page)).toBeNull();
    expect(await jobOnListing(null, page)).toBeNull();
  });
});

it('the database keeps the shortest and longest log beside the listing', async () => {
  const listing = await listAt(near, 'changing');
  const lengths = () => oneRow<{ shortest: number; longest: number }>('SELECT shortest_log_ft AS shortest, longest_log_ft AS longest FROM listing WHERE id = $1', [listing.id]);
  expect(await lengths()).toEqual({ shortest: 12, longest: 12 });
  await Log.update({ lengthFt: 20 }, { where: { listingId: listing.id, position: 1 } });
  expect(await lengths()).toEqual({ shortest: 12, longest: 20 });
  await Log.update({ removedAt: MARKET_AT }, { where: { listingId: listing.id, position: 1 } });
  await Log.destroy({ where: { listingId: listing.id, position: 2 } });
  await Log.update({ lengthFt: 9 }, { where: { listingId: listing.id, position: 3 } });
  expect(await lengths()).toEqual({ shortest: 9, longest: 9 });
  await listing.update({ status: 'withdrawn' });
});

it('more than can be worked out are bounded by distance, and that is said', async () => {
  const copied = `INSERT INTO listing (owner_id, status, revision, title, tree_owner, tree_owner_confirmed_at, how_down, came_down_on, zip, town, state, time_zone, place, coarse, metal_risk, closes_at,
      species, log_count, board_feet, largest_end_ob_in, created_at, updated_at, published_at)
    SELECT owner_id, 'open', 1, 'copy', tree_owner, tree_owner_confirmed_at, how_down, came_down_on, zip, town, state, time_zone, place, coarse, metal_risk, closes_at,
      species, 3, 400, 21, created_at, updated_at, published_at FROM listing, generate_series(1, $1::int) WHERE title = 'near'`;
  await execute(copied, [NEAREST_WEIGHED]);
  const { found } = await view('zip=54656&radiusMi=100&sort=perHour');
  expect([found.among, found.total, found.items.length]).toEqual([NEAREST_WEIGHED, NEAREST_WEIGHED, 20]);
  expect(found.items.some(({ title }) => title === 'far')).toBe(false);
});
