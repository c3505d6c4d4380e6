import { beforeAll, describe, expect, it } from 'vitest';
import { readBidsDesk } from '~/schemas/bids-desk.ts';
import { chooseBid } from '~/server/commands/choose-bid.ts';
import { placeBid } from '~/server/commands/place-bid.ts';
import { withdrawBids } from '~/server/commands/withdraw-bids.ts';
import { Bid } from '~/server/models/sawyer.ts';
import { bidsDesk } from '~/server/queries/bids-desk.ts';
import { sawyerHome } from '~/server/queries/sawyer-home.ts';
import { type Cast, makeCast } from '../support/cast.ts';
import { bidOf, makeOpenListing, MARKET_AT, setUpSawyer } from '../support/sawing-market.ts';

let cast: Cast;
let mills: Record<'bram' | 'cleo', string>;
const asked = (query: string) => readBidsDesk(new URLSearchParams(query));

beforeAll(async () => {
  cast = await makeCast();
  mills = { bram: await setUpSawyer(cast.bram.id), cleo: await setUpSawyer(cast.cleo.id) };
});

/** A listing with Bram's bid and Cleo's cheaper and sooner one. */
async function contested(): Promise<{ bram: string; cleo: string; number: number }> {
  const listing = await makeOpenListing(cast.ada.id);
  const bram = await placeBid(cast.bram, listing.number, bidOf(mills.bram), MARKET_AT);
  const cleo = await placeBid(cast.cleo, listing.number, bidOf(mills.cleo, { roadMiles: 5, days: ['2026-08-01'] }), MARKET_AT);
  return { bram, cleo, number: listing.number };
}

describe('a sawyer’s desk', () => {
  it('groups, searches and says why a bid was lost without telling what won', async () => {
    const { cleo, number } = await contested();
    await contested();
    await chooseBid(cast.ada, cleo, 1, MARKET_AT);
    const lost = await bidsDesk(cast.bram, asked('show=lost'));
    expect(lost.counts).toMatchObject({ live: 1, lost: 1, chosen: 0, all: 2 });
    expect(lost.bids).toEqual([expect.objectContaining({ listing: number, status: 'declined', why: 'The chosen bid was lower and could come sooner.', can: { withdraw: false } })]);
    expect(JSON.stringify(lost.bids)).not.toMatch(/27[45]00|chosenCents/);
    expect((await bidsDesk(cast.bram, asked(`show=all&words=${number}`))).bids).toHaveLength(1);
    expect((await bidsDesk(cast.bram, asked('show=all&words=50%25_off'))).bids).toEqual([]);
    expect((await bidsDesk(cast.cleo, asked('show=chosen'))).bids).toHaveLength(1);
    await expect(bidsDesk(cast.ada, asked(''))).rejects.toMatchObject({ kind: 'forbidden' });
    await expect(bidsDesk(null, asked(''))).rejects.toMatchObject({ kind: 'signedOut' });
  });

  it('withdraws several at once; one that was decided meanwhile does not keep the others', async () => {
    const [first, second, third] = [await contested(), await contested(), await contested()];
    await chooseBid(cast.ada, second.bram, 1, MARKET_AT);
    expect(await withdrawBids(cast.bram, [first.bram, second.bram, third.bram], MARKET_AT)).toEqual({ withdrawn: 2, tooLate: 1 });
    expect((await Bid.findByPk(second.bram, { rejectOnEmpty: true })).status).toBe('chosen');
    await expect(withdrawBids(cast.bram, [first.cleo], MARKET_AT)).rejects.toMatchObject({ kind: 'forbidden' });
  });

  it('understands a strange address as the usual one', () => {
    expect(asked('show=bogus&sort=%00&words=')).toEqual({ show: 'live', sort: 'updated', words: '' });
  });
});

describe('a sawyer’s home', () => {
  it('tells what waits', async () => {
    const { bram } = await contested();
    await Bid.update({ status: 'toConfirm' }, { where: { id: bram } });
    const home = await sawyerHome(cast.bram, MARKET_AT);
    expect(home.setUp.missing).toEqual([]);
    expect(home.toConfirm).toHaveLength(1);
    expect(home.bookings).toEqual([expect.objectContaining({ status: 'proposed', proposal: null, otherName: 'Ada', days: [] })]);
    expect(home.money).toEqual({ account: 'none', heldCents: 0, waitingCents: 0, owedBackCents: 0 });
    await expect(sawyerHome(cast.ada, MARKET_AT)).rejects.toMatchObject({ kind: 'forbidden' });
  });
});
