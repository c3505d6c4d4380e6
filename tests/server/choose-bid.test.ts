import { beforeAll, beforeEach, describe, expect, it } from 'vitest';
import { changeBid } from '~/server/commands/change-bid.ts';
import { chooseBid } from '~/server/commands/choose-bid.ts';
import { placeBid } from '~/server/commands/place-bid.ts';
import { rows } from '~/server/db.ts';
import { agreementOf } from '~/server/queries/agreement.ts';
import { bidToChoose } from '~/server/queries/bid-to-choose.ts';
import { compareBids } from '~/server/queries/compare-bids.ts';
import { Booking, Conversation, Outing, WorkAgreement } from '~/server/models/booking.ts';
import { Listing } from '~/server/models/listing.ts';
import { Bid } from '~/server/models/sawyer.ts';
import type { Viewer } from '~/server/viewer.ts';
import { type Cast, makeAccount, makeCast, viewerFor } from '../support/cast.ts';
import { OAK_CARD } from '../support/rate-cards.ts';
import { bidOf, makeOpenListing, MARKET_AT, setUpSawyer } from '../support/sawing-market.ts';

let cast: Cast;
const sawyers: { viewer: Viewer; mill: string }[] = [];
let listing: Listing;
let bids: string[];

beforeAll(async () => {
  cast = await makeCast();
  for (let number = 1; number <= 8; number++) {
    const viewer = await viewerFor((await makeAccount({ name: `Sawyer ${number}`, sawyer: true })).id);
    sawyers.push({ viewer, mill: await setUpSawyer(viewer.id, { ...OAK_CARD, setUpPerLanding: 5_000 + number * 500 }) });
  }
});
beforeEach(async () => {
  listing = await makeOpenListing(cast.ada.id);
  bids = [];
  for (const { viewer, mill } of sawyers) bids.push(await placeBid(viewer, listing.number, bidOf(mill), MARKET_AT));
});

describe('choosing', () => {
  it('matches the listing, declines the others, opens a booking and freezes the terms', async () => {
    const number = await chooseBid(cast.ada, bids[2] ?? '', 1, MARKET_AT);
    const booking = await Booking.findOne({ where: { number }, rejectOnEmpty: true });
    expect(booking).toMatchObject({ status: 'proposed', landownerId: cast.ada.id, sawyerId: sawyers[2]?.viewer.id, timeZone: 'America/Chicago' });
    expect((await Listing.findByPk(listing.id))?.status).toBe('matched');
    expect((await Bid.findAll({ where: { listingId: listing.id }, order: [['createdAt', 'ASC'], ['id', 'ASC']] })).map(({ status }) => status).sort()).toEqual(['chosen', ...Array.from({ length: 7 }, () => 'declined')]);
    expect(await Conversation.findOne({ where: { bookingId: booking.id } })).toMatchObject({ sawyerId: booking.sawyerId });
    const told = await rows<{ to: string }>(`SELECT data->>'to' AS "to" FROM pgboss.job WHERE name = 'send-mail' AND data->>'subject' LIKE 'Another bid was chosen%'`);
    expect(told).toHaveLength(7);

    const agreement = await agreementOf(sawyers[2]?.viewer ?? null, number);
    expect(agreement).toMatchObject({ intact: true, terms: { landowner: 'Ada', sawyer: 'Sawyer 3', feeBasisPoints: 500, listing: { revision: 1 } } });
    expect(agreement.terms.figures.holdCents).toBe((await Bid.findByPk(bids[2]))?.holdCents);
    await expect(WorkAgreement.update({ textVersion: 'other' }, { where: { bookingId: booking.id } })).rejects.toThrow(/never changed/);
    await expect(agreementOf(sawyers[0]?.viewer ?? null, number)).rejects.toMatchObject({ kind: 'notFound' });
  });

  it('lets exactly one of eight win when they choose different bids at once', async () => {
    const tries = await Promise.allSettled(bids.map((bid) => chooseBid(cast.ada, bid, 1, MARKET_AT)));
    expect(tries.filter(({ status }) => status === 'fulfilled')).toHaveLength(1);
    for (const one of tries) if (one.status === 'rejected') expect(one.reason).toMatchObject({ kind: 'conflict' });
    expect(await Bid.count({ where: { listingId: listing.id, status: 'chosen' } })).toBe(1);
    expect(await Booking.count({ where: { listingId: listing.id } })).toBe(1);
  });

  it('of the same bid eight times at once opens one booking', async () => {
    const before = await Outing.count();
    const tries = await Promise.allSettled(Array.from({ length: 8 }, () => chooseBid(cast.ada, bids[0] ?? '', 1, MARKET_AT)));
    expect(tries.filter(({ status }) => status === 'fulfilled')).toHaveLength(1);
    expect((await Outing.count()) - before).toBe(1);
  });

  it('refuses a stale revision, and a bid that was not confirmed on the new one', async () => {
    await listing.update({ revision: 2 });
    await Bid.update({ status: 'toConfirm' }, { where: { listingId: listing.id } });
    await expect(chooseBid(cast.ada, bids[0] ?? '', 1, MARKET_AT)).rejects.toMatchObject({ kind: 'conflict' });
    await expect(chooseBid(cast.ada, bids[0] ?? '', 2, MARKET_AT)).rejects.toMatchObject({ kind: 'conflict' });
    expect(await Booking.count({ where: { listingId: listing.id } })).toBe(0);
  });

  it('is of the terms that were read: never of what the bid was changed to meanwhile', async () => {
    const bid = bids[0] ?? '';
    const read = await bidToChoose(cast.ada, listing.number, bid, MARKET_AT);
    const { viewer, mill } = sawyers[0] ?? { viewer: cast.bram, mill: '' };
    await changeBid(viewer, bid, bidOf(mill, { roadMiles: 200 }), MARKET_AT);
    const now = await bidToChoose(cast.ada, listing.number, bid, MARKET_AT);
    expect(now.terms.figures.holdCents).toBeGreaterThan(read.terms.figures.holdCents);
    await expect(chooseBid(cast.ada, bid, 1, MARKET_AT, read.termsSha256)).rejects.toMatchObject({ kind: 'conflict', message: expect.stringContaining('changed this bid') });
    await expect(chooseBid(cast.ada, bid, 1, MARKET_AT, '')).rejects.toMatchObject({ kind: 'conflict' });
    const number = await chooseBid(cast.ada, bid, 1, MARKET_AT, now.termsSha256);
    expect((await agreementOf(cast.ada, number)).terms.figures).toEqual(now.terms.figures);
    expect(await WorkAgreement.count({ where: { sha256: now.termsSha256 } })).toBe(1);
  });

  it('is the owner’s alone', async () => {
    await expect(chooseBid(cast.dora, bids[0] ?? '', 1, MARKET_AT)).rejects.toMatchObject({ kind: 'forbidden' });
    await expect(chooseBid(cast.mo, bids[0] ?? '', 1, MARKET_AT)).rejects.toMatchObject({ kind: 'forbidden' });
    await expect(chooseBid(cast.ada, 'no-such-bid', 1, MARKET_AT)).rejects.toMatchObject({ kind: 'notFound' });
  });
});

describe('comparing', () => {
  it('shows every live bid on the same logs, in the order asked for, to the owner only', async () => {
    const { bids: compared } = await compareBids(cast.ada, listing.number, 'estimate', MARKET_AT);
    expect(compared.map(({ sawyer }) => sawyer)).toEqual(Array.from({ length: 8 }, (_, i) => `Sawyer ${i + 1}`));
    expect(compared[0]).toMatchObject({ expectedBf: 377.82, expectedBy: 'plan × 0.85', roadMiles: 31, settledJobs: 0, certificate: null });
    await expect(compareBids(cast.bram, listing.number, 'estimate', MARKET_AT)).rejects.toMatchObject({ kind: 'notFound' });
    await expect(compareBids(null, listing.number, 'estimate', MARKET_AT)).rejects.toMatchObject({ kind: 'signedOut' });
  });
});
