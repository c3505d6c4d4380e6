import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import { chooseBid } from '~/server/commands/choose-bid.ts';
import { enterTally } from '~/server/commands/enter-tally.ts';
import { offerTally } from '~/server/commands/offer-tally.ts';
import { placeBid } from '~/server/commands/place-bid.ts';
import { startCheckout } from '~/server/commands/start-checkout.ts';
import { startSawing } from '~/server/commands/start-sawing.ts';
import { reconcile } from '~/server/commands/reconcile.ts';
import { restoreAccount, suspendAccount } from '~/server/commands/suspend-account.ts';
import { windUpAccount } from '~/server/commands/wind-up-account.ts';
import { rows } from '~/server/db.ts';
import { Account, Bid, BookedDay, Booking, Event, HeldPayment, Listing } from '~/server/models/index.ts';
import { bookingPage } from '~/server/queries/booking-page.ts';
import type { Viewer } from '~/server/viewer.ts';
import { makeAccount, viewerFor } from '../../support/cast.ts';
import { checkBooks, makeAgreedBooking, makePayoutAccount, openMoneyHouse, type MoneyHouse } from '../../support/money-market.ts';
import { OAK_TERMS } from '../../support/rate-cards.ts';
import { bidOf, makeOpenListing, MARKET_AT, setUpSawyer } from '../../support/sawing-market.ts';

let house: MoneyHouse;
let mo: Viewer;
let landowner: Viewer;
let sawyer: Viewer;
let count = 0;

const person = async (part: { landowner?: boolean; sawyer?: boolean; moderator?: boolean }): Promise<Viewer> => viewerFor((await makeAccount({ name: `Person ${(count += 1)}`, ...part })).id);
const subjects = async (to: Viewer): Promise<string[]> => (await rows<{ subject: string }>(`SELECT data->>'subject' AS subject FROM pgboss.job WHERE name = 'send-mail' AND data->>'to' = $1 ORDER BY created_on, id`, [to.email])).map(({ subject }) => subject);
const stateOf = async (booking: Booking): Promise<string> => (await Booking.findByPk(booking.id, { rejectOnEmpty: true })).status;
const suspend = async (who: Viewer): Promise<Viewer> => {
  await suspendAccount(mo, { account: who.id, reason: 'Asked for cash.' }, new Date());
  return viewerFor(who.id);
};

beforeAll(async () => {
  house = await openMoneyHouse();
  house.fake.control.topUp(500_000);
  await reconcile(new Date());
  mo = await person({ moderator: true });
});
afterAll(() => house.close());
beforeEach(async () => {
  landowner = await person({ landowner: true });
  sawyer = await person({ sawyer: true });
});

async function heldBooking(): Promise<Booking> {
  await makePayoutAccount(house, sawyer);
  const booking = await makeAgreedBooking(landowner, sawyer);
  await Bid.update({ estimate: { terms: OAK_TERMS } }, { where: { id: booking.bidId } });
  house.fake.control.pay(new URL(await startCheckout(landowner, { booking: booking.number }, new Date())).pathname.split('/').at(-1) ?? '');
  await house.work();
  expect(await stateOf(booking)).toBe('held');
  return booking;
}

describe('suspending', () => {
  it('cancels a held booking for both: the whole hold goes back, the day is free, the listing takes bids again', async () => {
    const booking = await heldBooking();
    await suspend(sawyer);
    const [job] = await rows<{ accountId: string }>(`SELECT data->>'accountId' AS "accountId" FROM pgboss.job WHERE name = 'wind-up-account' ORDER BY created_on DESC LIMIT 1`);
    expect(job?.accountId).toBe(sawyer.id);
    expect(await windUpAccount(sawyer.id, new Date())).toMatchObject({ cancelled: 1, left: 0 });
    await house.work();
    expect(await stateOf(booking)).toBe('cancelled');
    expect((await HeldPayment.findOne({ where: { bookingId: booking.id } }))?.status).toBe('refunded');
    expect(house.fake.control.books().groups[`booking-${booking.number}`]).toMatchObject({ charged: 60_000, refunded: 60_000, transferred: 0 });
    expect(await BookedDay.count({ where: { bookingId: booking.id, active: true } })).toBe(0);
    expect((await Listing.findByPk(booking.listingId))?.status).toBe('open');
    expect(await subjects(landowner)).toContain('The booking is cancelled');
    expect(await subjects(sawyer)).toEqual(expect.arrayContaining(['Your account is suspended', 'The booking is cancelled']));
    expect(await checkBooks(house)).toEqual([]);
    // Again, as a job that ran twice: nothing more.
    expect(await windUpAccount(sawyer.id, new Date())).toEqual({ cancelled: 0, left: 0, listings: 0, bids: 0 });
  });

  it('of a landowner also returns everything, even within 48 hours of the start, and takes the listing back', async () => {
    const booking = await heldBooking();
    await booking.update({ startsAt: new Date(Date.now() + 3_600_000) });
    await suspend(landowner);
    expect(await windUpAccount(landowner.id, new Date())).toMatchObject({ cancelled: 1, listings: 1 });
    await house.work();
    expect(house.fake.control.books().groups[`booking-${booking.number}`]).toMatchObject({ refunded: 60_000, transferred: 0 });
    expect((await Listing.findByPk(booking.listingId))?.status).toBe('withdrawn');
  });

  it('voids what is due of an agreed booking, and takes open bids and listings back', async () => {
    const booking = await makeAgreedBooking(landowner, sawyer);
    const other = await makeOpenListing((await person({ landowner: true })).id);
    const bid = await placeBid(sawyer, other.number, bidOf(await setUpSawyer(sawyer.id)), MARKET_AT);
    await suspend(sawyer);
    expect(await windUpAccount(sawyer.id, new Date())).toEqual({ cancelled: 1, left: 0, listings: 0, bids: 1 });
    expect(await stateOf(booking)).toBe('cancelled');
    expect((await HeldPayment.findOne({ where: { bookingId: booking.id } }))?.status).toBe('void');
    expect((await Bid.findByPk(bid))?.status).toBe('withdrawn');
  });

  it('leaves a job that has begun to go on: both can still finish it, and nothing else', async () => {
    const booking = await heldBooking();
    await startSawing(sawyer, booking.number, new Date());
    sawyer = await suspend(sawyer);
    expect(await windUpAccount(sawyer.id, new Date())).toMatchObject({ cancelled: 0 });
    expect(await stateOf(booking)).toBe('sawing');
    expect((await bookingPage(sawyer, booking.number, new Date())).can).toMatchObject({ see: true, enterTally: true, offerTally: true, cancel: false, seePlace: false, message: false, review: false });
    await enterTally(sawyer, { booking: booking.number, entries: [{ kind: 'board', id: crypto.randomUUID(), logId: null, boardKind: 'board', thicknessIn: 1, widthIn: 8, secondWidthIn: null, lengthFt: 12, count: 20 }] }, new Date());
    await offerTally(sawyer, { booking: booking.number, endedBySawyer: false, note: '' }, new Date());
    expect(await stateOf(booking)).toBe('tallied');
  });

  it('lets a moderator offer the tally of a sawyer who is gone, empty if need be', async () => {
    const booking = await heldBooking();
    await startSawing(sawyer, booking.number, new Date());
    await expect(offerTally(sawyer, { booking: booking.number, endedBySawyer: true, note: '' }, new Date())).rejects.toMatchObject({ kind: 'conflict' });
    await suspend(sawyer);
    await expect(offerTally(landowner, { booking: booking.number, endedBySawyer: true, note: '' }, new Date())).rejects.toMatchObject({ kind: 'forbidden' });
    await offerTally(mo, { booking: booking.number, endedBySawyer: true, note: 'The sawyer left.' }, new Date());
    expect(await stateOf(booking)).toBe('tallied');
  });

  it('leaves a disputed payment to the bank and says so', async () => {
    const booking = await heldBooking();
    await HeldPayment.update({ disputedAt: new Date() }, { where: { bookingId: booking.id } });
    await suspend(sawyer);
    expect(await windUpAccount(sawyer.id, new Date())).toMatchObject({ cancelled: 0, left: 1 });
    expect(await stateOf(booking)).toBe('held');
    expect(await Event.count({ where: { action: 'leaveToModerator', thingId: booking.id } })).toBe(1);
    await HeldPayment.update({ disputedAt: null }, { where: { bookingId: booking.id } });
  });

  it('is done once of eight at once, by moderators only, and never to oneself', async () => {
    const tries = await Promise.allSettled(Array.from({ length: 8 }, () => suspendAccount(mo, { account: sawyer.id, reason: 'x' }, new Date())));
    expect(tries.filter(({ status }) => status === 'fulfilled')).toHaveLength(1);
    for (const one of tries) if (one.status === 'rejected') expect(one.reason).toMatchObject({ kind: 'conflict' });
    expect(await Event.count({ where: { thing: 'account', thingId: sawyer.id, action: 'suspend', actorId: mo.id } })).toBe(1);
    await expect(suspendAccount(landowner, { account: sawyer.id, reason: 'x' }, new Date())).rejects.toMatchObject({ kind: 'forbidden' });
    await expect(suspendAccount({ ...mo, isModerator: false, secondFactorDue: true }, { account: landowner.id, reason: 'x' }, new Date())).rejects.toMatchObject({ kind: 'forbidden' });
    await expect(suspendAccount(mo, { account: mo.id, reason: 'x' }, new Date())).rejects.toMatchObject({ kind: 'conflict' });
  });

  it('and choosing at the same instant leave nothing stranded, whoever is first', async () => {
    for (let round = 0; round < 8; round += 1) {
      const owner = await person({ landowner: true });
      const bidder = await person({ sawyer: true });
      const listing = await makeOpenListing(owner.id);
      const bid = await placeBid(bidder, listing.number, bidOf(await setUpSawyer(bidder.id)), MARKET_AT);
      const [choice, suspension] = await Promise.allSettled([chooseBid(owner, bid, 1, MARKET_AT), suspendAccount(mo, { account: bidder.id, reason: 'x' }, new Date())]);
      expect(suspension.status).toBe('fulfilled');
      if (choice.status === 'rejected') expect(choice.reason).toMatchObject({ kind: 'conflict' });
      await windUpAccount(bidder.id, new Date());
      expect((await Bid.findByPk(bid))?.status).toBe(choice.status === 'fulfilled' ? 'released' : 'withdrawn');
      expect(await Booking.count({ where: { sawyerId: bidder.id, status: ['proposed', 'agreed', 'held'] } })).toBe(0);
    }
  });
});

describe('restoring', () => {
  it('lets the account work again; what waits of the winding up is dropped', async () => {
    const listing = await makeOpenListing(landowner.id);
    await suspend(landowner);
    await restoreAccount(mo, { account: landowner.id, reason: 'A mistake.' }, new Date());
    expect(await windUpAccount(landowner.id, new Date())).toEqual({ cancelled: 0, left: 0, listings: 0, bids: 0 });
    expect((await Listing.findByPk(listing.id))?.status).toBe('open');
    expect(await Account.findByPk(landowner.id)).toMatchObject({ status: 'active', suspendedReason: null });
    expect(await subjects(landowner)).toContain('Your account works again');
    await expect(restoreAccount(mo, { account: landowner.id, reason: 'x' }, new Date())).rejects.toMatchObject({ kind: 'conflict' });
  });
});
