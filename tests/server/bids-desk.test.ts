import { beforeAll, describe, expect, it } from 'vitest';
import { dayAt } from '~/domain/time.ts';
import { readBidsDesk } from '~/schemas/bids-desk.ts';
import { chooseBid } from '~/server/commands/choose-bid.ts';
import { placeBid } from '~/server/commands/place-bid.ts';
import { deleteReadyMessage, saveReadyMessage } from '~/server/commands/ready-messages.ts';
import { withdrawBids } from '~/server/commands/withdraw-bids.ts';
import { withReadyMessage } from '~/server/http/bid-form.ts';
import { Bid, SawyerProfile } from '~/server/models/sawyer.ts';
import { bidStanding } from '~/server/queries/bid-standing.ts';
import { bidsDesk } from '~/server/queries/bids-desk.ts';
import { readyMessages } from '~/server/queries/ready-messages.ts';
import { changeDaysOff } from '~/server/commands/days-off.ts';
import { earliestOpenDayOf } from '~/server/queries/open-days.ts';
import { Certificate } from '~/server/models/sawyer.ts';
import { sawyerHome } from '~/server/queries/sawyer-home.ts';
import { type Cast, makeAccount, makeCast, viewerFor } from '../support/cast.ts';
import { termsWith } from '../support/rate-cards.ts';
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

describe('the next seven days', () => {
  it('say of each what stands on it, and which may still be filled', async () => {
    // A Monday, with two days' notice and Sundays not worked.
    await changeDaysOff(cast.cleo, { add: ['2026-07-24'], remove: [] }, MARKET_AT);
    const listing = await makeOpenListing(cast.ada.id);
    await placeBid(cast.cleo, listing.number, bidOf(mills.cleo, { days: ['2026-07-23'] }), MARKET_AT);
    const { week, certificates } = await sawyerHome(cast.cleo, MARKET_AT);
    expect(week.map(({ day, standing }) => `${day.slice(8)} ${standing}`)).toEqual(['20 too soon', '21 too soon', '22 open', '23 offered', '24 off', '25 open', '26 not worked']);
    expect(week[3]?.offered).toEqual([expect.objectContaining({ listing: listing.number })]);
    expect(await earliestOpenDayOf(cast.cleo.id, 'America/Chicago', MARKET_AT)).toBe('2026-07-22');
    expect(certificates).toEqual([]);
    await Certificate.create({ sawyerId: cast.cleo.id, kind: 'insurance', seenAt: MARKET_AT, expiresOn: '2026-08-01' });
    expect((await sawyerHome(cast.cleo, MARKET_AT)).certificates).toEqual([expect.objectContaining({ kind: 'insurance', standing: 'soon' })]);
  });
});

describe('messages kept ready', () => {
  it('are kept, changed and deleted by their sawyer alone', async () => {
    await saveReadyMessage(cast.bram, { id: '', name: 'Usual', body: 'I bring the loader.' }, MARKET_AT);
    const [kept] = await readyMessages(cast.bram);
    await saveReadyMessage(cast.bram, { id: kept?.id ?? '', name: 'Usual', body: 'I bring a loader.' }, MARKET_AT);
    expect(await readyMessages(cast.bram)).toEqual([{ id: kept?.id, name: 'Usual', body: 'I bring a loader.' }]);
    expect(await readyMessages(cast.cleo)).toEqual([]);
    for (const id of [kept?.id ?? '', 'nonsense']) {
      await expect(saveReadyMessage(cast.cleo, { id, name: 'Mine', body: 'Mine' }, MARKET_AT)).rejects.toMatchObject({ kind: 'notFound' });
      await expect(deleteReadyMessage(cast.cleo, id)).rejects.toMatchObject({ kind: 'notFound' });
    }
    await expect(saveReadyMessage(cast.ada, { id: '', name: 'Mine', body: 'Mine' }, MARKET_AT)).rejects.toMatchObject({ kind: 'forbidden' });
    await deleteReadyMessage(cast.bram, kept?.id ?? '');
    expect(await readyMessages(cast.bram)).toEqual([]);
  });

  it('are added after what was typed, and never in its place', () => {
    const ready = [{ id: 'a', name: 'Usual', body: 'I bring a loader.' }];
    expect(withReadyMessage({ message: ' Good morning. ', readyMessage: 'a' }, ready)['message']).toBe('Good morning.\n\nI bring a loader.');
    expect(withReadyMessage({ message: '', readyMessage: 'a' }, ready)['message']).toBe('I bring a loader.');
    expect(withReadyMessage({ message: 'As typed', readyMessage: 'b' }, ready)['message']).toBe('As typed');
  });
});

describe('a sawyer’s standing', () => {
  // Long after the other checks, so that their bids are too old to count.
  const later = new Date(MARKET_AT.getTime() + 500 * 86_400_000);
  const own = (mill: string) => bidOf(mill, { ownBf: 400, ownReason: 'As scaled.', days: [dayAt(new Date(later.getTime() + 10 * 86_400_000), 'America/Chicago')] });
  const openListing = () => makeOpenListing(cast.ada.id, { closesAt: new Date(later.getTime() + 20 * 86_400_000) });
  const newSawyer = async (name: string, setUpPerLanding: number) => {
    const { id } = await makeAccount({ name, sawyer: true });
    return { viewer: await viewerFor(id), mill: await setUpSawyer(id, termsWith({ setUpPerLanding }).card) };
  };

  it('counts what was decided, and tells of others only when there are five', async () => {
    const me = await newSawyer('Sue', 7_500);
    const [won, lost] = [await openListing(), await openListing()];
    const chosen = await placeBid(me.viewer, won.number, own(me.mill), later);
    await placeBid(me.viewer, lost.number, own(me.mill), later);
    expect(await bidStanding(me.viewer, later)).toEqual({ chosen: 0, decided: 0, ownPerBf: 75, miles: 50, leastOthers: 5, others: null });
    let last = '';
    for (const [index, setUp] of [7_500, 17_500, 27_500, 37_500, 47_500].entries()) {
      expect((await bidStanding(me.viewer, later)).others).toBeNull();
      const other = await newSawyer(`Other ${index}`, setUp);
      last = await placeBid(other.viewer, lost.number, own(other.mill), later);
    }
    await chooseBid(cast.ada, chosen, 1, later);
    await chooseBid(cast.ada, last, 1, later);
    // 224 of sawing and travel and set-up of 75, 175 … 475 on 400 bf: 74.75, 99.75, 124.75, 149.75 and 174.75 cents, to the nearest five.
    expect(await bidStanding(me.viewer, later)).toEqual({ chosen: 1, decided: 2, ownPerBf: 75, miles: 50, leastOthers: 5, others: { sawyers: 5, lower: 100, middle: 125, upper: 150 } });
    await SawyerProfile.update({ base: { type: 'Point', coordinates: [-120, 45] } }, { where: { accountId: me.viewer.id } });
    expect((await bidStanding(me.viewer, later)).others).toBeNull();
  });
});
