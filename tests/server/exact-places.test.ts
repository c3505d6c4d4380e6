import fc from 'fast-check';
import { beforeAll, describe, expect, it } from 'vitest';
import { coarsePoint, greatCircleMiles, type Point } from '~/domain/geo.ts';
import { openListings } from '~/server/queries/open-listings.ts';
import { DEEPEST_TILE, mapPlace, type Tile } from '~/domain/finding/tiles.ts';
import { logsTile } from '~/server/queries/logs-tile.ts';
import { listingPage } from '~/server/queries/listing-page.ts';
import { publicThings } from '~/server/queries/sitemap.ts';
import { Listing } from '~/server/models/listing.ts';
import { type Cast, makeCast } from '../support/cast.ts';
import { LISTED_AT, openListing } from '../support/listings.ts';

/** The place somebody wants to find out, and two others in the same cell of the grid. */
const exact: Point = { lat: 43.55613, lng: -90.88841 };
const cell = coarsePoint(exact);
const sameCell: readonly Point[] = [
  { lat: cell.lat + 0.0055, lng: cell.lng - 0.0075 },
  { lat: cell.lat - 0.0061, lng: cell.lng + 0.0081 },
];
const SEARCHES = 1_000;
let cast: Cast;
let listing: Listing;

/** Origins an attacker would choose: close in on the place from all sides, with radii down to the smallest that may be asked for. */
const asked = fc.sample(
  fc.record({
    lat: fc.double({ min: cell.lat - 0.08, max: cell.lat + 0.08, noNaN: true }),
    lng: fc.double({ min: cell.lng - 0.1, max: cell.lng + 0.1, noNaN: true }),
    radiusMi: fc.oneof(fc.constant(1), fc.double({ min: 1, max: 6, noNaN: true })),
  }),
  { numRuns: SEARCHES, seed: 54_665 },
);

/** Everything that the searches answer about the listing, one line a search. */
async function whatIsLearnt(): Promise<readonly (number | null)[]> {
  const learnt: (number | null)[] = [];
  for (let start = 0; start < SEARCHES; start += 8) {
    const answers = await Promise.all(asked.slice(start, start + 8).map(({ lat, lng, radiusMi }) => openListings({ from: { lat, lng }, radiusMi, sort: 'distance', limit: 20 }, LISTED_AT)));
    for (const { items } of answers) {
      const found = items.find(({ id }) => id === listing.number);
      if (found) expect(found.place).toMatchObject(cell);
      learnt.push(found?.distanceMi ?? null);
    }
  }
  return learnt;
}

/** The tile over a place at each zoom, and its neighbours. */
const tilesOver = (place: Point): readonly Tile[] =>
  Array.from({ length: DEEPEST_TILE + 1 }, (_, z) => z).flatMap((z) => {
    const { x, y } = mapPlace(place);
    const [column, row] = [Math.floor(x / 2 ** (26 - z)), Math.floor(y / 2 ** (26 - z))];
    return [-1, 0, 1].flatMap((east) => [-1, 0, 1].map((south) => ({ z, x: column + east, y: row + south }))).filter((tile) => Math.min(tile.x, tile.y) >= 0 && Math.max(tile.x, tile.y) < 2 ** z);
  });

/** Every tile that could show the place, as bytes. */
async function whatTilesShow(): Promise<readonly string[]> {
  const shown: string[] = [];
  for (const tile of tilesOver(exact)) shown.push((await logsTile(tile, {}, LISTED_AT)).toString('hex'));
  return shown;
}

beforeAll(async () => {
  cast = await makeCast();
  listing = await openListing(cast.ada, { lat: String(exact.lat), lng: String(exact.lng) });
});

describe('an attacker with a thousand searches from chosen origins', () => {
  it(
    'learns the same wherever in its cell the place lies, and nothing that the cell’s middle does not tell',
    async () => {
      const learnt = await whatIsLearnt();
      expect(learnt.filter((distance) => distance !== null).length).toBeGreaterThan(SEARCHES / 10);
      learnt.forEach((distance, index) => {
        const { lat, lng, radiusMi } = asked[index] ?? { lat: 0, lng: 0, radiusMi: 0 };
        const toMiddle = greatCircleMiles({ lat, lng }, cell);
        // Found or not, and how far: both follow from the middle of the cell alone (but for the last metres of two spheres).
        if (Math.abs(toMiddle - radiusMi) > 0.01) expect(distance !== null).toBe(toMiddle < radiusMi);
        if (distance !== null) expect(Math.abs(distance - toMiddle)).toBeLessThan(0.01);
      });
      for (const other of sameCell) {
        expect(coarsePoint(other)).toEqual(cell);
        await listing.update({ place: { type: 'Point', coordinates: [other.lng, other.lat] } });
        expect(await whatIsLearnt()).toEqual(learnt);
      }
    },
    240_000,
  );

  it('sees the same map tiles to the last byte, at every zoom, wherever in its cell the place lies', async () => {
    const shown = await whatTilesShow();
    expect(shown.filter((tile) => tile !== '').length).toBeGreaterThanOrEqual(DEEPEST_TILE + 1);
    for (const other of sameCell) {
      await listing.update({ place: { type: 'Point', coordinates: [other.lng, other.lat] } });
      expect(await whatTilesShow()).toEqual(shown);
    }
  });

  it('reads nothing of it in the listing’s page, the site map or an answer’s source', async () => {
    await listing.update({ place: { type: 'Point', coordinates: [exact.lng, exact.lat] } });
    for (const viewer of [null, cast.bram, cast.dora]) {
      const page = await listingPage(viewer, listing.number);
      expect(page.place).toBeNull();
      expect(JSON.stringify(page)).not.toMatch(/43\.5561|90\.8884|Blue gate/);
    }
    const { items } = await openListings({ from: exact, sort: 'distance', limit: 20 }, LISTED_AT);
    expect(JSON.stringify([items, await publicThings(LISTED_AT)])).not.toMatch(/43\.5561|90\.8884/);
  });
});
