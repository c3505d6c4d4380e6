import { beforeAll, describe, expect, it } from 'vitest';
import { coarsePoint, greatCircleMiles, type Point } from '~/domain/geo.ts';
import { execute } from '~/server/db.ts';
import { Account, Bid, Listing, Log, Mill } from '~/server/models/index.ts';
import { openListings, publicItem, type ListingsAsked } from '~/server/queries/open-listings.ts';

const at = new Date('2026-08-01T15:00:00Z');
const from: Point = { lat: 43.532, lng: -90.9286 };
let ownerId = '';
let sawyerId = '';

interface Made {
  readonly title: string;
  readonly place: Point;
  readonly species?: readonly string[];
  readonly boardFeet?: number;
  readonly largest?: number;
  readonly lengthFt?: number;
  readonly closes?: string;
  readonly sawBy?: string | null;
  readonly published?: string;
  readonly status?: 'open' | 'withdrawn' | 'closed';
  readonly hidden?: boolean;
}

const geo = ({ lat, lng }: Point) => ({ type: 'Point', coordinates: [lng, lat] }) as const;

async function make(given: Made): Promise<Listing> {
  const listing = await Listing.create({
    ownerId, status: given.status ?? 'open', revision: 1, title: given.title, treeOwner: 'mine', treeOwnerConfirmedAt: at, howDown: 'uprooted', cameDownOn: '2026-07-15',
    zip: '54665', town: 'Viroqua', state: 'WI', timeZone: 'America/Chicago', place: geo(given.place), coarse: geo(coarsePoint(given.place)), metalRisk: 'unknown',
    closesAt: new Date(given.closes ?? '2026-09-01T05:00:00Z'), sawBy: given.sawBy === undefined ? '2026-09-20' : given.sawBy, species: [...(given.species ?? ['white-oak'])], logCount: 1,
    boardFeet: given.boardFeet ?? 500, largestEndObIn: given.largest ?? 20, createdAt: at, updatedAt: at, publishedAt: new Date(given.published ?? '2026-07-20T12:00:00Z'),
    hiddenAt: given.hidden ? at : null,
  });
  await Log.create({ listingId: listing.id, position: 1, species: 'white-oak', smallEndIn: 16, lengthFt: given.lengthFt ?? 10 });
  return listing;
}

const find = (asked: Partial<ListingsAsked>) => openListings({ from, sort: 'distance', limit: 20, ...asked }, at);
const titles = async (asked: Partial<ListingsAsked>): Promise<string[]> => (await find(asked)).items.map((item) => item.title);

beforeAll(async () => {
  ownerId = (await Account.create({ email: 'ada@cast.example', passwordHash: 'x', name: 'Ada', isLandowner: true, createdAt: at })).id;
  sawyerId = (await Account.create({ email: 'bram@cast.example', passwordHash: 'x', name: 'Bram', isSawyer: true, createdAt: at })).id;
  await make({ title: 'near', place: { lat: 43.56, lng: -90.89 }, boardFeet: 1180, largest: 24, closes: '2026-08-05T05:00:00Z', sawBy: '2026-09-01', published: '2026-07-21T12:00:00Z' });
  await make({ title: 'middle', place: { lat: 43.66, lng: -90.8 }, species: ['sugar-maple', 'black-cherry'], boardFeet: 200, largest: 15, sawBy: null, lengthFt: 24, published: '2026-07-22T12:00:00Z' });
  await make({ title: 'far', place: { lat: 44.1, lng: -90.5 }, boardFeet: 900, largest: 31, sawBy: '2026-08-20', published: '2026-07-23T12:00:00Z' });
  await make({ title: 'withdrawn', place: { lat: 43.56, lng: -90.89 }, status: 'withdrawn' });
  await make({ title: 'hidden', place: { lat: 43.56, lng: -90.89 }, hidden: true });
  await make({ title: 'past its closing date', place: { lat: 43.56, lng: -90.89 }, closes: '2026-08-01T05:00:00Z' });
});

describe('open listings', () => {
  it('come nearest first, by the great circle to the coarse point', async () => {
    const { items, total, totalIsExact, nextCursor } = await find({});
    expect(items.map((item) => item.title)).toEqual(['near', 'middle', 'far']);
    expect([total, totalIsExact, nextCursor]).toEqual([3, true, null]);
    const coarse = coarsePoint({ lat: 43.56, lng: -90.89 });
    expect(items[0]?.place).toEqual({ ...coarse, town: 'Viroqua' });
    // Tolerance: metres of difference between the two spheres' radii.
    expect(items[0]?.distanceMi).toBeCloseTo(greatCircleMiles(from, coarse), 2);
  });

  it('never give the exact place away, whoever asks from wherever', async () => {
    const answers = await Promise.all([from, { lat: 43.56, lng: -90.89 }, { lat: 44, lng: -91 }].map((point) => find({ from: point })));
    const places = answers.map(({ items }) => items.find((item) => item.title === 'near')?.place);
    expect(new Set(places.map((place) => JSON.stringify(place))).size).toBe(1);
    expect(JSON.stringify(answers)).not.toContain('-90.89,');
    expect(Object.keys(publicItem(answers[0]!.items[0]!)).sort()).toEqual(
      ['bidCount', 'boardFeet', 'closesOn', 'distanceMi', 'id', 'largestEndOutsideBarkIn', 'logCount', 'place', 'sawBy', 'species', 'title'].sort(),
    );
  });

  it('are filtered by distance, species, board feet, largest end and closing date', async () => {
    expect(await titles({ radiusMi: 12 })).toEqual(['near', 'middle']);
    expect(await titles({ species: 'black-cherry' })).toEqual(['middle']);
    expect(await titles({ minBoardFeet: 900 })).toEqual(['near', 'far']);
    expect(await titles({ maxLargestEndIn: 24 })).toEqual(['near', 'middle']);
    expect(await titles({ closesBefore: new Date('2026-08-08T15:00:00Z') })).toEqual(['near']);
  });

  it('are sorted by closing, saw-by (those without one last) and newest', async () => {
    expect(await titles({ sort: 'closing' })).toEqual(expect.arrayContaining(['near', 'middle', 'far']));
    expect((await titles({ sort: 'closing' }))[0]).toBe('near');
    expect(await titles({ sort: 'sawBy' })).toEqual(['far', 'near', 'middle']);
    expect(await titles({ sort: 'newest', from: null })).toEqual(['far', 'middle', 'near']);
  });

  it.each(['distance', 'closing', 'sawBy', 'newest'] as const)('page by page (%s) give every listing once, in the same order', async (sort) => {
    const whole = await titles({ sort });
    const seen: string[] = [];
    let cursor: string | undefined;
    do {
      const page = await find({ sort, limit: 1, cursor });
      expect(page.total).toBe(3);
      seen.push(...page.items.map((item) => item.title));
      cursor = page.nextCursor ?? undefined;
    } while (cursor);
    expect(seen).toEqual(whole);
  });

  it('that fit a mill take its largest log and its longest', async () => {
    await Mill.create({
      sawyerId, name: 'Band mill', kind: 'band', kerfIn: 0.094, largestLogIn: 26, widestCutIn: 24, widestBoardIn: 20, longestFt: 17, shortestFt: 4, paceBfPerHour: 200, turnsLogsBy: 'machine', createdAt: at,
    });
    expect(await titles({ fitsMillsOf: sawyerId })).toEqual(['near']);
    await execute('UPDATE mill SET largest_log_in = 40, longest_ft = 30 WHERE sawyer_id = $1', [sawyerId]);
    expect(await titles({ fitsMillsOf: sawyerId })).toEqual(['near', 'middle', 'far']);
  });

  it('count the bids that stand and say the day bidding closes at the site', async () => {
    const listing = await Listing.findOne({ where: { title: 'near' }, rejectOnEmpty: true });
    const mill = await Mill.findOne({ where: { sawyerId }, rejectOnEmpty: true });
    const bid = { listingId: listing.id, listingRevision: 1, millId: mill.id, mill: {}, card: {}, estimate: {}, roadMiles: 5, expectedBfHundredths: 1, expectedBy: 'x', expectedCents: 1, lowCents: 1, highCents: 1, holdCents: 1, offBearer: 'sawyer-brings' as const, createdAt: at, updatedAt: at };
    await Bid.create({ ...bid, sawyerId, status: 'open' });
    await Bid.create({ ...bid, sawyerId: ownerId, status: 'withdrawn' });
    const item = (await find({})).items[0];
    // Bidding closes at midnight after the last day: 05:00 UTC on 5 August is the end of 4 August in Chicago.
    expect(item).toMatchObject({ bidCount: 1, closesOn: '2026-08-04' });
  });
});
