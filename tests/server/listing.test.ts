import { beforeAll, describe, expect, it } from 'vitest';
import { estimateLogs } from '~/domain/timber/estimate.ts';
import { coarsePoint } from '~/domain/geo.ts';
import { closeToBids, lapseListings } from '~/server/commands/close-listings.ts';
import { publishListing } from '~/server/commands/publish-listing.ts';
import { reviseListing } from '~/server/commands/revise-listing.ts';
import { SAVED_ELSEWHERE, saveDraft } from '~/server/commands/save-draft.ts';
import { withdrawListing } from '~/server/commands/withdraw-listing.ts';
import { seePlace } from '~/server/commands/see-place.ts';
import { listingPage } from '~/server/queries/listing-page.ts';
import { myListings } from '~/server/queries/my-listings.ts';
import { rows } from '~/server/db.ts';
import { Refusal } from '~/server/errors.ts';
import { Account, Bid, Booking, Event, Listing, Log, Mill, Outing, Piece } from '~/server/models/index.ts';
import type { Viewer } from '~/server/viewer.ts';
import { makeCast, makeAccount, viewerFor, type Cast } from '../support/cast.ts';
import { LISTED_AT, openListing, typedListing, typedLog, typedPiece } from '../support/listings.ts';

const at = LISTED_AT;
const later = new Date('2026-07-21T15:00:00Z');
let cast: Cast;

beforeAll(async () => {
  cast = await makeCast();
});

const letters = async (to: string): Promise<string[]> =>
  (await rows<{ subject: string }>(`SELECT data->>'subject' AS subject FROM pgboss.job WHERE name = 'send-mail' AND data->>'to' = $1 ORDER BY created_on, id`, [to])).map(({ subject }) => subject);

/** A bid straight in the database: working one out is another command's business. */
async function bidOn(listing: Listing, sawyer: Viewer, status: Bid['status'] = 'open'): Promise<Bid> {
  const mill = await Mill.create({
    sawyerId: sawyer.id, name: 'Band mill', kind: 'band', kerfIn: 0.094, largestLogIn: 30, widestCutIn: 26, widestBoardIn: 24, longestFt: 18, shortestFt: 4, paceBfPerHour: 250, turnsLogsBy: 'hand', createdAt: at,
  });
  return Bid.create({
    listingId: listing.id, listingRevision: listing.revision, sawyerId: sawyer.id, millId: mill.id, status, mill: {}, card: {}, estimate: {}, roadMiles: 10, expectedBfHundredths: 40_000,
    expectedBy: 'log scale, International ¼', expectedCents: 20_000, lowCents: 18_000, highCents: 22_000, holdCents: 30_000, offBearer: 'sawyer-brings', createdAt: at, updatedAt: at,
  });
}

const refusal = async (work: Promise<unknown>): Promise<Refusal> => {
  const error = await work.then(() => null, (thrown: unknown) => thrown);
  if (!(error instanceof Refusal)) throw new Error(`It was not refused: ${String(error)}`);
  return error;
};

describe('a draft', () => {
  it('keeps whatever was typed, however wrong, and gives it back', async () => {
    const typed = typedListing({ zip: 'nowhere', cameDownOn: 'last Tuesday', logs: [typedLog({ smallEnd: 'as wide as my arm', length: '90 ft' }), typedLog()] });
    const draft = await saveDraft(cast.ada, { number: null, typedVersion: null, typed }, at);
    const row = await Listing.findByPk(draft.id, { rejectOnEmpty: true });
    expect(row).toMatchObject({ status: 'draft', typedVersion: 1, ownerId: cast.ada.id });
    expect(row.typed).toEqual(typed);
    // The second row is understood already, so photographs can be tied to it under the id that was typed with it.
    expect((await Log.findAll({ where: { listingId: draft.id } })).map(({ id }) => id)).toEqual([typed.logs[1]?.id]);
  });

  it('is never overwritten by a second device that did not see the first one save', async () => {
    const draft = await saveDraft(cast.ada, { number: null, typedVersion: null, typed: typedListing() }, at);
    const phone = await saveDraft(cast.ada, { number: draft.number, typedVersion: 1, typed: typedListing({ note: 'from the phone' }) }, later);
    expect(phone.typedVersion).toBe(2);
    expect(await refusal(saveDraft(cast.ada, { number: draft.number, typedVersion: 1, typed: typedListing({ note: 'from the desk' }) }, later))).toMatchObject({ kind: 'conflict', message: SAVED_ELSEWHERE });
    expect((await Listing.findByPk(draft.id, { rejectOnEmpty: true })).typed['note']).toBe('from the phone');
    await saveDraft(cast.ada, { number: draft.number, typedVersion: null, typed: typedListing({ note: 'from the desk' }) }, later);
    expect((await Listing.findByPk(draft.id, { rejectOnEmpty: true })).typed['note']).toBe('from the desk');
  });

  it('saved by eight windows at once is saved by one', async () => {
    const draft = await saveDraft(cast.ada, { number: null, typedVersion: null, typed: typedListing() }, at);
    const tries = await Promise.allSettled(Array.from({ length: 8 }, (_, n) => saveDraft(cast.ada, { number: draft.number, typedVersion: 1, typed: typedListing({ note: `window ${n}` }) }, later)));
    expect(tries.filter(({ status }) => status === 'fulfilled')).toHaveLength(1);
    expect((await Listing.findByPk(draft.id, { rejectOnEmpty: true })).typedVersion).toBe(2);
  });

  it('belongs to its owner alone, and asks for a confirmed address', async () => {
    const draft = await saveDraft(cast.ada, { number: null, typedVersion: null, typed: typedListing() }, at);
    expect(await refusal(saveDraft(cast.bram, { number: draft.number, typedVersion: 1, typed: typedListing() }, at))).toMatchObject({ kind: 'forbidden' });
    expect(await refusal(saveDraft(null, { number: null, typedVersion: null, typed: typedListing() }, at))).toMatchObject({ kind: 'signedOut' });
    const new_ = await viewerFor((await makeAccount({ name: 'Nell', landowner: true, confirmed: false })).id);
    expect((await refusal(saveDraft(new_, { number: null, typedVersion: null, typed: typedListing() }, at))).message).toMatch(/Confirm your e-mail/);
  });

  it('makes a sawyer who has a tree of their own a landowner too', async () => {
    await saveDraft(cast.cleo, { number: null, typedVersion: null, typed: typedListing() }, at);
    expect((await Account.findByPk(cast.cleo.id, { rejectOnEmpty: true })).isLandowner).toBe(true);
  });

  it('does not take over the logs of another listing', async () => {
    const theirs = await openListing(cast.dora);
    const [log] = await Log.findAll({ where: { listingId: theirs.id } });
    const draft = await saveDraft(cast.ada, { number: null, typedVersion: null, typed: typedListing({ logs: [typedLog({ id: log?.id ?? '', smallEnd: '5' })] }) }, at);
    expect(draft.typed.logs[0]?.id).not.toBe(log?.id);
    expect(await Log.findByPk(log?.id ?? '', { rejectOnEmpty: true })).toMatchObject({ listingId: theirs.id, smallEndIn: log?.smallEndIn });
  });
});

describe('publishing', () => {
  it('writes what was understood: logs, cut list, scale, place, time zone, dates', async () => {
    const listing = await openListing(cast.ada);
    expect(listing).toMatchObject({
      status: 'open', revision: 1, title: 'White oak, 3 logs', treeOwner: 'mine', howDown: 'uprooted', cameDownOn: '2026-07-18', endsSealed: true, zip: '54665', town: 'Viroqua', state: 'WI',
      timeZone: 'America/Chicago', metalRisk: 'lawn-tree', species: ['white-oak'], logCount: 3,
    });
    const logs = await Log.findAll({ where: { listingId: listing.id }, order: ['position'] });
    expect(logs.map(({ smallEndIn, largeEndIn, lengthFt }) => [smallEndIn, largeEndIn, lengthFt])).toEqual([[18, 20.5, 12.5], [16.5, 20.5, 12.5], [14.375, null, 10]]);
    // The sum of the published International ¼ cells: 18 in and 17 in (16 1/2 rounds up) at 12 ft, 14 in at 10 ft.
    const sum = [[18, 12], [17, 12], [14, 10]].map(([smallEndIn = 0, lengthFt = 0]) => estimateLogs({ logs: [{ species: 'white-oak', smallEndIn, lengthFt }] }).totals.boardFeet.internationalQuarter).reduce((a, b) => a + b);
    expect(listing.boardFeet).toBe(sum);
    // 20.5 in inside bark at the large end, with white oak's bark on.
    expect(listing.largestEndObIn).toBeGreaterThan(20.5);
    expect(listing.largestEndObIn).toBeLessThan(23);
    // Midnight at the end of 10 August in Wisconsin, summer time.
    expect(listing.closesAt).toEqual(new Date('2026-08-11T05:00:00Z'));
    expect(listing.sawBy && listing.sawBy > '2026-07-20').toBe(true);
    expect(listing.access).toEqual({ truck: 'to-the-logs', gateWidthIn: 144, slope: 'level', lines: 'none', machine: 'tractor', machineNote: '', water: 'yes', helpers: 2 });
    const coarse = coarsePoint({ lat: 43.5561, lng: -90.8884 });
    expect(listing.coarse?.coordinates).toEqual([coarse.lng, coarse.lat]);
    expect(await Piece.findAll({ where: { listingId: listing.id }, raw: true })).toMatchObject([{ position: 1, label: 'Table top', thicknessIn: 2, widthIn: 8, lengthFt: 8, count: 6, sizing: 'full-sawn', forDwelling: false }]);
    expect(await letters(cast.ada.email)).toContain('On show: White oak, 3 logs');
  });

  it('takes the bark off what was measured over it', async () => {
    const listing = await openListing(cast.ada, { measured: 'over', logs: [typedLog({ smallEnd: '20', largeEnd: '' })] });
    const [log] = await Log.findAll({ where: { listingId: listing.id } });
    expect(log?.smallEndIn).toBeLessThan(20);
    expect(log?.smallEndIn).toBeGreaterThan(17.5);
  });

  it('names everything that is wrong at once, each at its field, and keeps the draft', async () => {
    const typed = typedListing({
      zip: '00000', cameDownOn: '2026-07-25', closesOn: '2026-07-20', treeOwner: '', ownerConfirmed: '',
      logs: [typedLog({ smallEnd: '', largeEnd: '', length: '', species: '' }), typedLog({ smallEnd: '21', largeEnd: '20' }), typedLog({ length: '90 ft' }), typedLog({ smallEnd: '0' })],
      pieces: [typedPiece({ count: 'many' })],
    });
    const draft = await saveDraft(cast.ada, { number: null, typedVersion: null, typed }, at);
    const no = await refusal(publishListing(cast.ada, { number: draft.number, typedVersion: 1, typed }, at));
    expect(no.kind).toBe('invalid');
    expect(no.problems.map(({ path }) => path).sort()).toEqual(['cameDownOn', 'closesOn', 'logs.1.largeEnd', 'logs.2.length', 'logs.3.smallEnd', 'ownerConfirmed', 'pieces.0.count', 'treeOwner', 'zip']);
    expect(await Listing.findByPk(draft.id, { rejectOnEmpty: true })).toMatchObject({ status: 'draft', typedVersion: 1 });
  });

  it('refuses a pin that lies far from its ZIP code', async () => {
    const draft = await saveDraft(cast.ada, { number: null, typedVersion: null, typed: typedListing({ lat: '35.1', lng: '-90.05' }) }, at);
    expect((await refusal(publishListing(cast.ada, { number: draft.number, typedVersion: 1, typed: draft.typed }, at))).problems).toMatchObject([{ path: 'lat' }]);
  });

  it('clicked eight times at once happens once', async () => {
    const draft = await saveDraft(cast.ada, { number: null, typedVersion: null, typed: typedListing() }, at);
    const tries = await Promise.allSettled(Array.from({ length: 8 }, () => publishListing(cast.ada, { number: draft.number, typedVersion: 1, typed: draft.typed }, at)));
    expect(tries.filter(({ status }) => status === 'fulfilled')).toHaveLength(1);
    expect(await Event.count({ where: { thingId: draft.id, action: 'publish' } })).toBe(1);
  });

  it('is not for strangers', async () => {
    const draft = await saveDraft(cast.ada, { number: null, typedVersion: null, typed: typedListing() }, at);
    expect(await refusal(publishListing(cast.dora, { number: draft.number, typedVersion: 1, typed: draft.typed }, at))).toMatchObject({ kind: 'forbidden' });
    expect(await refusal(publishListing(null, { number: draft.number, typedVersion: 1, typed: draft.typed }, at))).toMatchObject({ kind: 'signedOut' });
  });
});

describe('revising', () => {
  const typedOf = (listing: Listing) => listing.typed as unknown as ReturnType<typeof typedListing>;
  const revise = (listing: Listing, changes: Partial<ReturnType<typeof typedListing>>) =>
    reviseListing(cast.ada, { number: listing.number ?? 0, typedVersion: listing.typedVersion, typed: { ...typedOf(listing), ...changes } }, later);

  it('puts open bids on hold when what they were worked out on changes, keeps log ids, and tells the sawyers', async () => {
    const listing = await openListing(cast.ada);
    const bid = await bidOn(listing, cast.bram);
    const gone = await bidOn(listing, cast.cleo, 'withdrawn');
    const [first, second, third] = typedOf(listing).logs;
    if (!first || !second || !third) throw new Error('three logs');
    const { changed } = await revise(listing, { logs: [third, first, typedLog({ species: 'Red pine' })] });
    expect(changed).toEqual(['logs']);
    const after = await Listing.findByPk(listing.id, { rejectOnEmpty: true });
    expect(after).toMatchObject({ status: 'open', revision: 2, title: 'White oak and red pine, 3 logs', logCount: 3 });
    const logs = await Log.findAll({ where: { listingId: listing.id, removedAt: null }, order: ['position'] });
    expect(logs.slice(0, 2).map(({ id }) => id)).toEqual([third.id, first.id]);
    expect(await Log.findByPk(second.id, { rejectOnEmpty: true })).toMatchObject({ removedAt: later });
    expect((await Bid.findByPk(bid.id, { rejectOnEmpty: true })).status).toBe('toConfirm');
    expect((await Bid.findByPk(gone.id, { rejectOnEmpty: true })).status).toBe('withdrawn');
    expect(await letters(cast.bram.email)).toContain('Changed: White oak and red pine, 3 logs');
  });

  it.each([
    ['cut list', { pieces: [typedPiece({ count: '7' })] }],
    ['access', { gateWidth: '8 ft' }],
    ['metal risk', { metal: 'known-metal' }],
    ['place', { lat: '43.7', lng: '-90.9' }],
  ] as const)('counts %s as a new revision', async (part, change) => {
    const listing = await openListing(cast.ada);
    expect((await revise(listing, change as never)).changed).toEqual([part]);
    expect((await Listing.findByPk(listing.id, { rejectOnEmpty: true })).revision).toBe(2);
  });

  it('leaves bids standing when only the note or the date changes', async () => {
    const listing = await openListing(cast.ada);
    const bid = await bidOn(listing, cast.bram);
    expect((await revise(listing, { note: 'The dog is friendly.', closesOn: '2026-08-20' })).changed).toEqual(['closing date', 'notes']);
    expect((await Listing.findByPk(listing.id, { rejectOnEmpty: true })).revision).toBe(1);
    expect((await Bid.findByPk(bid.id, { rejectOnEmpty: true })).status).toBe('open');
  });

  it('is not noticed when nothing that counts was changed', async () => {
    const listing = await openListing(cast.ada);
    expect((await revise(listing, { gateWidth: '144 in' })).changed).toEqual([]);
  });

  it('is refused once the listing is no longer open', async () => {
    const listing = await openListing(cast.ada);
    await withdrawListing(cast.ada, { number: listing.number ?? 0, reason: '' }, later);
    expect(await refusal(revise(listing, { note: 'too late' }))).toMatchObject({ kind: 'conflict' });
  });
});

describe('withdrawing', () => {
  it('lapses the bids and tells the sawyers why, once, however often it is clicked', async () => {
    const listing = await openListing(cast.ada, { logs: [typedLog({ species: 'Tamarack' })] });
    const bids = [await bidOn(listing, cast.bram), await bidOn(listing, cast.dora, 'toConfirm')];
    const tries = await Promise.allSettled(Array.from({ length: 8 }, () => withdrawListing(cast.ada, { number: listing.number ?? 0, reason: 'Sold the logs.' }, later)));
    expect(tries.filter(({ status }) => status === 'fulfilled')).toHaveLength(1);
    for (const bid of bids) expect(await Bid.findByPk(bid.id, { rejectOnEmpty: true })).toMatchObject({ status: 'lapsed', decidedAt: later });
    expect((await letters(cast.bram.email)).filter((subject) => subject === 'Withdrawn: Tamarack, 1 log')).toHaveLength(1);
  });

  it('is not for strangers, moderators included', async () => {
    const listing = await openListing(cast.ada);
    for (const who of [cast.dora, cast.mo]) expect(await refusal(withdrawListing(who, { number: listing.number ?? 0, reason: '' }, later))).toMatchObject({ kind: 'forbidden' });
  });
});

describe('who reads what', () => {
  const place = { point: { lat: 43.5561, lng: -90.8884 }, pinned: true, directions: 'Blue gate, second lane on the left.' };

  it('shows the exact place to the owner, and to a moderator only on the record', async () => {
    const listing = await openListing(cast.ada);
    const number = listing.number ?? 0;
    expect((await listingPage(cast.ada, number)).place).toEqual(place);
    for (const who of [null, cast.bram, cast.dora, cast.mo]) expect((await listingPage(who, number)).place).toBeNull();
    expect(await Event.count({ where: { thingId: listing.id, action: 'seePlace' } })).toBe(0);
    expect(await seePlace(cast.mo, number, later)).toEqual(place);
    expect(await Event.findAll({ where: { thingId: listing.id, action: 'seePlace' }, raw: true })).toMatchObject([{ actorId: cast.mo.id }]);
    for (const who of [cast.bram, cast.dora]) expect(await refusal(seePlace(who, number, later))).toMatchObject({ kind: 'forbidden' });
  });

  it('shows it to the chosen sawyer once the money is held, and to no other', async () => {
    const listing = await openListing(cast.ada);
    const number = listing.number ?? 0;
    const bid = await bidOn(listing, cast.bram, 'chosen');
    await bidOn(listing, cast.cleo, 'declined');
    const outing = await Outing.create({ sawyerId: cast.bram.id, kind: 'booking', createdAt: at });
    const booking = await Booking.create({ listingId: listing.id, bidId: bid.id, landownerId: cast.ada.id, sawyerId: cast.bram.id, outingId: outing.id, status: 'agreed', timeZone: 'America/Chicago', startsAt: later, createdAt: at, updatedAt: at });
    expect(await listingPage(cast.bram, number)).toMatchObject({ place: null, booking: booking.number });
    for (const status of ['held', 'sawing', 'settled'] as const) {
      await booking.update({ status });
      expect((await listingPage(cast.bram, number)).place).toEqual(place);
      for (const who of [null, cast.cleo, cast.dora, cast.mo]) expect((await listingPage(who, number)).place).toBeNull();
    }
    await booking.update({ status: 'cancelled' });
    expect((await listingPage(cast.bram, number)).place).toBeNull();
  });

  it('does not show a hidden listing or a draft to others', async () => {
    const listing = await openListing(cast.ada);
    const number = listing.number ?? 0;
    await listing.update({ hiddenAt: later, hiddenReason: 'Not a tree.' });
    for (const who of [null, cast.bram]) expect(await refusal(listingPage(who, number))).toMatchObject({ kind: 'notFound' });
    for (const who of [cast.ada, cast.mo]) expect((await listingPage(who, number)).hiddenBecause).toBe('Not a tree.');
    const draft = await saveDraft(cast.ada, { number: null, typedVersion: null, typed: typedListing() }, at);
    for (const who of [null, cast.ada, cast.mo]) expect(await refusal(listingPage(who, draft.number))).toMatchObject({ kind: 'notFound' });
  });

  it('counts the bids, and lists one’s own with those that wait first', async () => {
    const listing = await openListing(cast.dora);
    await bidOn(listing, cast.bram);
    await bidOn(listing, cast.cleo, 'withdrawn');
    expect(await listingPage(cast.bram, listing.number ?? 0)).toMatchObject({ bids: 1, ownBid: 'open', closesOn: '2026-08-10', isOwner: false });
    expect((await myListings(cast.dora)).find(({ number }) => number === listing.number)).toMatchObject({ status: 'open', openBids: 1, toConfirm: 0, booking: null, title: 'White oak, 3 logs' });
  });
});

describe('the sweep', () => {
  const closing = new Date('2026-08-11T05:00:00Z');
  const lapsing = new Date('2026-08-18T05:00:00Z');

  it('closes a listing at the end of its closing day, not before, and lapses it a week later', async () => {
    const listing = await openListing(cast.ada, { logs: [typedLog({ species: 'Black walnut' })] });
    const bid = await bidOn(listing, cast.bram);
    await closeToBids(new Date(closing.getTime() - 1));
    expect((await Listing.findByPk(listing.id, { rejectOnEmpty: true })).status).toBe('open');
    await Promise.all([closeToBids(closing), closeToBids(closing)]);
    expect(await Listing.findByPk(listing.id, { rejectOnEmpty: true })).toMatchObject({ status: 'closed', lapsesAt: lapsing });
    expect((await letters(cast.ada.email)).filter((subject) => subject === 'Closed to bids: Black walnut, 1 log')).toHaveLength(1);
    expect((await Bid.findByPk(bid.id, { rejectOnEmpty: true })).status).toBe('open');

    await lapseListings(new Date(lapsing.getTime() - 1));
    expect((await Listing.findByPk(listing.id, { rejectOnEmpty: true })).status).toBe('closed');
    await lapseListings(lapsing);
    await lapseListings(lapsing);
    expect((await Listing.findByPk(listing.id, { rejectOnEmpty: true })).status).toBe('lapsed');
    expect((await Bid.findByPk(bid.id, { rejectOnEmpty: true })).status).toBe('lapsed');
    expect((await letters(cast.bram.email)).filter((subject) => subject === 'No choice made: Black walnut, 1 log')).toHaveLength(1);
  });
});
