import { beforeAll, describe, expect, it } from 'vitest';
import { changeBid } from '~/server/commands/change-bid.ts';
import { placeBid } from '~/server/commands/place-bid.ts';
import { planBidList } from '~/server/commands/plan-bid-list.ts';
import { LIST_PLAN_VERSION } from '~/domain/trade/list-cover.ts';
import { rows } from '~/server/db.ts';
import { planListsAnew } from '~/server/jobs/handlers/plan-lists-anew.ts';
import { Log, Piece } from '~/server/models/listing.ts';
import { Bid, Mill, SawyerProfile } from '~/server/models/sawyer.ts';
import { compareBids } from '~/server/queries/compare-bids.ts';
import { type Cast, makeCast } from '../support/cast.ts';
import { bidOf, makeOpenListing, MARKET_AT, setUpSawyer } from '../support/sawing-market.ts';

let cast: Cast;
let mills: Record<'bram' | 'cleo', string>;
beforeAll(async () => {
  cast = await makeCast();
  mills = { bram: await setUpSawyer(cast.bram.id), cleo: await setUpSawyer(cast.cleo.id) };
  // A chain saw's kerf and a short bar: too little for the list.
  await Mill.update({ kerfIn: 0.375, longestFt: 11 }, { where: { id: mills.cleo } });
  await SawyerProfile.update({ lumberCredential: 'State certificate' }, { where: { accountId: cast.bram.id } });
});

const jobs = (bidId: string) => rows(`SELECT 1 FROM pgboss.job WHERE name = 'plan-bid-list' AND data ->> 'bidId' = $1`, [bidId]);

describe('the cut list of each bid', () => {
  it('is planned on its mill after the bid, and stands in the comparison', async () => {
    const listing = await makeOpenListing(cast.ada.id);
    await Piece.create({ listingId: listing.id, position: 1, label: 'Joists', thicknessIn: 2, widthIn: 6, lengthFt: 10, count: 6, sizing: 'full-sawn', forDwelling: true });
    const [bram, cleo] = [await placeBid(cast.bram, listing.number, bidOf(mills.bram), MARKET_AT), await placeBid(cast.cleo, listing.number, bidOf(mills.cleo), MARKET_AT)];
    expect(await jobs(bram)).toHaveLength(1);
    const compared = async () => new Map((await compareBids(cast.ada, listing.number, 'estimate', MARKET_AT)).bids.map((bid) => [bid.id, bid]));
    expect((await compared()).get(bram)?.cover).toBeNull();
    for (const id of [bram, cleo]) await planBidList(id);
    const bids = await compared();
    expect(bids.get(bram)).toMatchObject({ lumberCredential: 'State certificate', cover: { boardFeetShort: 0, pieces: [{ label: 'Joists', count: 6, short: 0 }] } });
    expect(bids.get(cleo)).toMatchObject({ lumberCredential: '', cover: { boardFeetShort: 60, pieces: [{ short: 6 }] } });
    expect((await compareBids(cast.ada, listing.number, 'estimate', MARKET_AT)).wants).toEqual({ list: true, dwelling: true });
  });

  it('of another revision or another mill is not shown, and is planned anew', async () => {
    const listing = await makeOpenListing(cast.ada.id);
    await Piece.create({ listingId: listing.id, position: 1, label: '', thicknessIn: 1, widthIn: 6, lengthFt: 8, count: 2, sizing: 'full-sawn', forDwelling: false });
    const id = await placeBid(cast.bram, listing.number, bidOf(mills.bram), MARKET_AT);
    await planBidList(id);
    const shown = async () => (await compareBids(cast.ada, listing.number, 'estimate', MARKET_AT)).bids[0]?.cover;
    expect(await shown()).not.toBeNull();
    const other = await Mill.create({ sawyerId: cast.bram.id, name: 'Other', kind: 'band', kerfIn: 0.125, largestLogIn: 30, widestCutIn: 26, widestBoardIn: 24, longestFt: 18, shortestFt: 4, paceBfPerHour: 200, turnsLogsBy: 'hand', createdAt: MARKET_AT });
    await changeBid(cast.bram, id, bidOf(other.id), MARKET_AT);
    expect(await shown()).toBeNull();
    expect(await jobs(id)).toHaveLength(2);
    await listing.update({ revision: 2 });
    await planBidList(id);
    expect((await Bid.findByPk(id, { rejectOnEmpty: true })).cutList).toBeNull();
  });

  it('is planned anew where it is missing or of an older way of planning, each once and few at a time', async () => {
    const listing = await makeOpenListing(cast.ada.id);
    await Piece.create({ listingId: listing.id, position: 1, label: 'Shelves', thicknessIn: 1, widthIn: 6, lengthFt: 8, count: 2, sizing: 'full-sawn', forDwelling: false });
    const [bram, cleo] = [await placeBid(cast.bram, listing.number, bidOf(mills.bram), MARKET_AT), await placeBid(cast.cleo, listing.number, bidOf(mills.cleo), MARKET_AT)];
    const after = (minutes: number): Date => new Date(MARKET_AT.getTime() + minutes * 60_000);
    const waiting = async (id: string): Promise<number> => (await rows(`SELECT 1 FROM pgboss.job WHERE name = 'plan-bid-list' AND state < 'completed' AND data ->> 'bidId' = $1`, [id])).length;
    const finish = () => rows(`UPDATE pgboss.job SET state = 'completed', created_on = $1, completed_on = $1 WHERE name = 'plan-bid-list'`, [MARKET_AT]);
    const shown = async (id: string) => (await compareBids(cast.ada, listing.number, 'estimate', after(200))).bids.find((bid) => bid.id === id);
    await planListsAnew(after(90));
    // The job that came with each bid is still to be done.
    expect([await waiting(bram), await waiting(cleo)]).toEqual([1, 1]);
    await finish();
    await planBidList(bram);
    const cover = (await Bid.findByPk(bram, { rejectOnEmpty: true })).cutList;
    if (!cover) throw new Error('the bid was not planned');
    const { version: _, ...older } = cover;
    await Bid.update({ cutList: older }, { where: { id: bram } });
    // Nothing is shown as being worked out for ever; an older plan stands until the new one has come.
    expect(await shown(cleo)).toMatchObject({ cover: null, coverIsLate: true });
    expect((await shown(bram))?.cover).toMatchObject({ boardFeetShort: 0 });
    await planListsAnew(after(30));
    expect([await waiting(bram), await waiting(cleo)]).toEqual([0, 0]);
    await planListsAnew(after(90));
    await planListsAnew(after(91));
    expect([await waiting(bram), await waiting(cleo)]).toEqual([1, 1]);
    for (const id of [bram, cleo]) await planBidList(id);
    await finish();
    await planListsAnew(after(180));
    expect([await waiting(bram), await waiting(cleo)]).toEqual([0, 0]);
    expect((await shown(bram))?.cover).toEqual(cover);
    expect((await shown(cleo))?.cover).toMatchObject({ version: LIST_PLAN_VERSION });
  });

  it('says that all is short where no log has sound wood', async () => {
    const listing = await makeOpenListing(cast.ada.id);
    await Piece.create({ listingId: listing.id, position: 1, label: '', thicknessIn: 1, widthIn: 6, lengthFt: 8, count: 2, sizing: 'full-sawn', forDwelling: false });
    await Log.update({ heartDefectIn: 60 }, { where: { listingId: listing.id } });
    const id = await placeBid(cast.bram, listing.number, bidOf(mills.bram), MARKET_AT);
    await planBidList(id);
    expect((await Bid.findByPk(id, { rejectOnEmpty: true })).cutList).toMatchObject({ boardFeetShort: 8, pieces: [{ short: 2 }] });
  });

  it('is nothing where nothing is wanted', async () => {
    const listing = await makeOpenListing(cast.ada.id);
    const id = await placeBid(cast.bram, listing.number, bidOf(mills.bram), MARKET_AT);
    await planBidList(id);
    expect((await Bid.findByPk(id, { rejectOnEmpty: true })).cutList).toBeNull();
    expect((await compareBids(cast.ada, listing.number, 'estimate', MARKET_AT)).wants).toEqual({ list: false, dwelling: false });
  });
});
