import { beforeAll, beforeEach, describe, expect, it } from 'vitest';
import { changeBid } from '~/server/commands/change-bid.ts';
import { confirmBid } from '~/server/commands/confirm-bid.ts';
import { placeBid } from '~/server/commands/place-bid.ts';
import { retireMill, saveMill } from '~/server/commands/save-mill.ts';
import { saveRateCard } from '~/server/commands/save-rate-card.ts';
import { saveSawyerProfile } from '~/server/commands/save-sawyer-profile.ts';
import { withdrawBid } from '~/server/commands/withdraw-bid.ts';
import { rows } from '~/server/db.ts';
import { AccountBlock } from '~/server/models/account.ts';
import { Listing, Log } from '~/server/models/listing.ts';
import { Bid, DayOff, Mill, RateCard, SawyerProfile } from '~/server/models/sawyer.ts';
import type { FrozenEstimate } from '~/server/bid-work.ts';
import { countMore } from '~/server/http/limits.ts';
import { type Cast, makeAccount, makeCast, viewerFor } from '../support/cast.ts';
import { OAK_CARD } from '../support/rate-cards.ts';
import { bidOf, makeOpenListing, MARKET_AT, setUpSawyer } from '../support/sawing-market.ts';

let cast: Cast;
let bramsMill = '';
let listing: Listing;

beforeAll(async () => {
  cast = await makeCast();
  bramsMill = await setUpSawyer(cast.bram.id);
  await setUpSawyer(cast.dora.id);
});
beforeEach(async () => {
  listing = await makeOpenListing(cast.ada.id);
});

const revise = async (): Promise<void> => {
  await listing.update({ revision: 2 });
  await Bid.update({ status: 'toConfirm' }, { where: { listingId: listing.id, status: 'open' } });
};

describe('a bid', () => {
  it('is worked out on the logs and frozen with the mill and the card', async () => {
    const bid = await Bid.findByPk(await placeBid(cast.bram, listing.number, bidOf(bramsMill), MARKET_AT), { rejectOnEmpty: true });
    // The mill's plans give 444.5 bf; × 0.85 = 377.82 bf; × 0.50 + 75 + 6 × 2 × 2 = 287.91
    expect(bid).toMatchObject({ status: 'open', listingRevision: 1, expectedCents: 28_791, expectedBfHundredths: 37_782, expectedBy: 'plan × 0.85', roadMiles: 31 });
    expect((bid.estimate as FrozenEstimate).estimate.lumber.best?.expected).toBeCloseTo(444.5, 6);
    expect(bid.lowCents).toBeLessThan(28_791);
    expect(bid.holdCents).toBe(bid.highCents + 10_500);
    expect((bid.estimate as FrozenEstimate).terms.card).toEqual(OAK_CARD);
    const mail = await rows<{ data: { to: string; subject: string } }>(`SELECT data FROM pgboss.job WHERE name = 'send-mail' ORDER BY created_on DESC LIMIT 1`);
    expect(mail[0]?.data).toMatchObject({ to: cast.ada.email, subject: 'A bid on White oak, 3 logs' });
  });

  it('offers no day that the sawyer has taken off', async () => {
    const id = await placeBid(cast.bram, listing.number, bidOf(bramsMill), MARKET_AT);
    const [day = ''] = (await Bid.findByPk(id, { rejectOnEmpty: true })).daysOffered;
    await DayOff.create({ sawyerId: cast.bram.id, day });
    const refusal = { kind: 'invalid', problems: [{ path: 'days', message: expect.stringContaining('You are off on') }] };
    await expect(changeBid(cast.bram, id, bidOf(bramsMill), MARKET_AT)).rejects.toMatchObject(refusal);
    await withdrawBid(cast.bram, id, MARKET_AT);
    await expect(placeBid(cast.bram, listing.number, bidOf(bramsMill), MARKET_AT)).rejects.toMatchObject(refusal);
    await DayOff.destroy({ where: { sawyerId: cast.bram.id } });
    await placeBid(cast.bram, listing.number, bidOf(bramsMill), MARKET_AT);
  });

  it('is refused when no card could pay its hold', async () => {
    await saveRateCard(cast.bram, { ...OAK_CARD, setUpPerLanding: 99_999_000 }, MARKET_AT);
    await expect(placeBid(cast.bram, listing.number, bidOf(bramsMill), MARKET_AT)).rejects.toMatchObject({ kind: 'invalid', problems: [{ path: '', message: expect.stringMatching(/more than the \$999,999\.99 that a card can pay/) }] });
    await saveRateCard(cast.bram, OAK_CARD, MARKET_AT);
    await placeBid(cast.bram, listing.number, bidOf(bramsMill), MARKET_AT);
  });

  it('stands though the rate card changes afterwards', async () => {
    const id = await placeBid(cast.bram, listing.number, bidOf(bramsMill), MARKET_AT);
    await saveRateCard(cast.bram, { ...OAK_CARD, setUpPerLanding: 20_000 }, MARKET_AT);
    expect((await Bid.findByPk(id, { rejectOnEmpty: true })).expectedCents).toBe(28_791);
    await changeBid(cast.bram, id, bidOf(bramsMill), MARKET_AT);
    expect((await Bid.findByPk(id, { rejectOnEmpty: true })).expectedCents).toBe(41_291); // 188.91 + 200 + 24
    await saveRateCard(cast.bram, OAK_CARD, MARKET_AT);
  });

  it('of one’s own figure says so with its reason', async () => {
    const id = await placeBid(cast.bram, listing.number, bidOf(bramsMill, { ownBf: 360, ownReason: 'The ends look shaken.' }), MARKET_AT);
    expect(await Bid.findByPk(id)).toMatchObject({ expectedBfHundredths: 36_000, expectedBy: 'the sawyer’s own figure', overrideReason: 'The ends look shaken.', expectedCents: 27_900 });
  });

  it('is one per sawyer, even when sent eight times at once', async () => {
    const tries = await Promise.allSettled(Array.from({ length: 8 }, () => placeBid(cast.bram, listing.number, bidOf(bramsMill), MARKET_AT)));
    expect(tries.filter(({ status }) => status === 'fulfilled')).toHaveLength(1);
    for (const one of tries) if (one.status === 'rejected') expect(one.reason).toMatchObject({ kind: 'conflict' });
    expect(await Bid.count({ where: { listingId: listing.id } })).toBe(1);
  });

  it('is refused to those who may not, on a closed, revised or own listing, with another’s mill or past days', async () => {
    const kind = async (work: Promise<unknown>): Promise<unknown> => work.then(() => 'accepted', (error: { kind?: string }) => error.kind);
    expect(await kind(placeBid(cast.ada, listing.number, bidOf(bramsMill), MARKET_AT))).toBe('forbidden');
    const doras = await makeOpenListing(cast.dora.id);
    expect(await kind(placeBid(cast.dora, doras.number, bidOf(bramsMill), MARKET_AT))).toBe('forbidden');
    expect(await kind(placeBid(cast.bram, listing.number, bidOf(bramsMill, { listingRevision: 7 }), MARKET_AT))).toBe('conflict');
    expect(await kind(placeBid(cast.dora, listing.number, bidOf(bramsMill), MARKET_AT))).toBe('invalid');
    expect(await kind(placeBid(cast.cleo, listing.number, bidOf(bramsMill), MARKET_AT))).toBe('invalid'); // no rate card yet
    expect(await kind(placeBid(cast.bram, listing.number, bidOf(bramsMill, { days: ['2026-07-01'] }), MARKET_AT))).toBe('invalid');
    expect(await kind(placeBid(cast.bram, listing.number, bidOf(bramsMill, { days: ['2026-10-30'] }), MARKET_AT))).toBe('invalid');
    const closed = await makeOpenListing(cast.ada.id, { closesAt: MARKET_AT });
    expect(await kind(placeBid(cast.bram, closed.number, bidOf(bramsMill), MARKET_AT))).toBe('conflict');
    expect(await kind(placeBid(cast.bram, 999_999, bidOf(bramsMill), MARKET_AT))).toBe('notFound');
  });

  it('is refused between people who have blocked each other', async () => {
    await AccountBlock.create({ blockerId: cast.ada.id, blockedId: cast.dora.id, createdAt: MARKET_AT });
    const mill = await Mill.findOne({ where: { sawyerId: cast.dora.id }, rejectOnEmpty: true });
    await expect(placeBid(cast.dora, listing.number, bidOf(mill.id), MARKET_AT)).rejects.toMatchObject({ kind: 'forbidden' });
    await AccountBlock.destroy({ where: {} });
  });

  it('is changed, or taken back and placed again, only so often: each sends the landowner a letter', async () => {
    const sent = async (): Promise<number> => (await rows(`SELECT 1 FROM pgboss.job WHERE name = 'send-mail' AND data->>'to' = $1`, [cast.ada.email])).length;
    const busy = await viewerFor((await makeAccount({ name: 'Busy', sawyer: true })).id);
    const itsMill = await setUpSawyer(busy.id);
    const id = await placeBid(busy, listing.number, bidOf(itsMill), MARKET_AT);
    await countMore('bid on a listing', `${busy.id} ${listing.number}`, 28);
    await changeBid(busy, id, bidOf(itsMill, { message: 'Once more.' }), MARKET_AT);
    const before = await sent();
    await expect(changeBid(busy, id, bidOf(itsMill, { message: 'And again.' }), MARKET_AT)).rejects.toMatchObject({ kind: 'tooMany' });
    await withdrawBid(busy, id, MARKET_AT);
    await expect(placeBid(busy, listing.number, bidOf(itsMill), MARKET_AT)).rejects.toMatchObject({ kind: 'tooMany' });
    expect(await sent()).toBe(before + 1);
  });

  it('is withdrawn only by its bidder, and may be made again', async () => {
    const id = await placeBid(cast.bram, listing.number, bidOf(bramsMill), MARKET_AT);
    await expect(withdrawBid(cast.dora, id, MARKET_AT)).rejects.toMatchObject({ kind: 'forbidden' });
    await withdrawBid(cast.bram, id, MARKET_AT);
    await expect(withdrawBid(cast.bram, id, MARKET_AT)).rejects.toMatchObject({ kind: 'conflict' });
    await placeBid(cast.bram, listing.number, bidOf(bramsMill), MARKET_AT);
    expect(await Bid.count({ where: { listingId: listing.id, status: 'open' } })).toBe(1);
  });
});

describe('a bid on a revised listing', () => {
  it('is confirmed on the logs as they stand now', async () => {
    const id = await placeBid(cast.bram, listing.number, bidOf(bramsMill), MARKET_AT);
    await Log.update({ smallEndIn: 20 }, { where: { listingId: listing.id, position: 1 } });
    await revise();
    await expect(confirmBid(cast.bram, id, 1, MARKET_AT)).rejects.toMatchObject({ kind: 'conflict' });
    await confirmBid(cast.bram, id, 2, MARKET_AT);
    // The plans give 490.33 bf; × 0.85 × 0.50 + 99 = 307.39
    expect(await Bid.findByPk(id)).toMatchObject({ status: 'open', listingRevision: 2, expectedCents: 30_739 });
  });
  it('asks for new days when those offered have passed', async () => {
    const id = await placeBid(cast.bram, listing.number, bidOf(bramsMill), MARKET_AT);
    await revise();
    await expect(confirmBid(cast.bram, id, 2, new Date('2026-08-05T15:00:00Z'))).rejects.toMatchObject({ kind: 'conflict', message: expect.stringContaining('offer new ones') as string });
  });
});

describe('a sawyer’s set-up', () => {
  const mill = { name: 'Swing', kind: 'swing-blade', kerfIn: 0.19, largestLogIn: 60, widestCutIn: 20, widestBoardIn: 16, longestFt: 20, shortestFt: 3, paceBfPerHour: 150, turnsLogsBy: 'hand' } as const;
  it('keeps a base on the coarse grid only', async () => {
    await saveSawyerProfile(cast.cleo, { businessName: 'Cleo saws', about: '', zip: '54665', travelMiles: 60, services: ['edging'], languages: ['English'], lumberCredential: '', workingDays: [1, 2, 3], noticeDays: 2 }, MARKET_AT);
    const profile = await SawyerProfile.findByPk(cast.cleo.id, { rejectOnEmpty: true });
    expect(profile).toMatchObject({ state: 'WI', timeZone: 'America/Chicago', workingDays: [1, 2, 3] });
    await expect(saveSawyerProfile(cast.cleo, { businessName: 'Cleo saws', about: '', zip: '00000', travelMiles: 60, services: [], languages: [], lumberCredential: '', workingDays: [1], noticeDays: 2 }, MARKET_AT)).rejects.toMatchObject({ kind: 'invalid', problems: [{ path: 'zip' }] });
  });
  it('adds, changes and retires mills, but never the last nor another’s', async () => {
    const first = await saveMill(cast.cleo, null, mill, MARKET_AT);
    await saveMill(cast.cleo, first, { ...mill, name: 'Swing, long track' }, MARKET_AT);
    expect((await Mill.findByPk(first))?.name).toBe('Swing, long track');
    await expect(retireMill(cast.cleo, first, MARKET_AT)).rejects.toMatchObject({ kind: 'conflict' });
    await expect(saveMill(cast.bram, first, mill, MARKET_AT)).rejects.toMatchObject({ kind: 'notFound' });
    await saveMill(cast.cleo, null, mill, MARKET_AT);
    await retireMill(cast.cleo, first, MARKET_AT);
    expect(await Mill.count({ where: { sawyerId: cast.cleo.id, retiredAt: null } })).toBe(1);
  });
  it('numbers rate cards though two are saved at once', async () => {
    await Promise.all(Array.from({ length: 4 }, () => saveRateCard(cast.cleo, OAK_CARD, MARKET_AT)));
    expect((await RateCard.findAll({ where: { sawyerId: cast.cleo.id } })).map(({ revision }) => revision).sort()).toEqual([1, 2, 3, 4]);
  });
  it('is the sawyer’s alone', async () => {
    await expect(saveRateCard(cast.ada, OAK_CARD, MARKET_AT)).rejects.toMatchObject({ kind: 'forbidden' });
  });
});
