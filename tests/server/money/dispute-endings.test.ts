import { afterAll, afterEach, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import { acceptHeld } from '~/server/commands/accept-held.ts';
import { cancelBooking } from '~/server/commands/cancel-booking.ts';
import { noteDispute } from '~/server/commands/note-dispute.ts';
import { reconcile } from '~/server/commands/reconcile.ts';
import { startCheckout } from '~/server/commands/start-checkout.ts';
import { balances, heldFor } from '~/server/ledger.ts';
import { BookedDay, Booking, Charge, HeldPayment, Listing, ProviderCall } from '~/server/models/index.ts';
import { readDispute } from '~/server/services/card-payments.ts';
import { makeCast, type Cast } from '../../support/cast.ts';
import { checkBooks, makeAgreedBooking, makePayoutAccount, openMoneyHouse, sawAndSign, type MoneyHouse } from '../../support/money-market.ts';

let house: MoneyHouse;
let cast: Cast;
const HOUR = 3_600_000;

beforeAll(async () => {
  house = await openMoneyHouse();
  cast = await makeCast();
  house.fake.control.topUp(10_000_000);
  await reconcile(new Date());
});
afterAll(() => house.close());
beforeEach(async () => void (await makePayoutAccount(house, cast.bram)));
afterEach(async () => {
  house.fake.control.clearFaults();
  await house.work();
  expect(await checkBooks(house)).toEqual([]);
});

const pay = async (booking: Booking, purpose: 'hold' | 'top-up' | 'increase' = 'hold', amountCents?: number): Promise<void> => {
  const url = await startCheckout(cast.ada, { booking: booking.number, purpose, ...(amountCents === undefined ? {} : { amountCents }) }, new Date());
  house.fake.control.pay(new URL(url).pathname.split('/').at(-1) ?? '');
  await house.work();
};
const held = async (options: Parameters<typeof makeAgreedBooking>[2] = {}): Promise<Booking> => {
  const booking = await makeAgreedBooking(cast.ada, cast.bram, options);
  await pay(booking);
  return booking;
};
/** Everything that the provider would tell, told of this kind alone. */
const readAgain = async (disputeId: string): Promise<string> => noteDispute(await readDispute(disputeId), new Date());
const statusOf = async (booking: Booking): Promise<[string, string]> => {
  const now = await Booking.findByPk(booking.id, { rejectOnEmpty: true });
  return [now.status, (await HeldPayment.findOne({ where: { bookingId: booking.id }, rejectOnEmpty: true })).status];
};
const chargesOf = async (booking: Booking): Promise<string[]> => {
  const payment = await HeldPayment.findOne({ where: { bookingId: booking.id }, rejectOnEmpty: true });
  return (await Charge.findAll({ where: { paymentId: payment.id }, order: [['receivedAt', 'ASC']] })).map(({ providerChargeId }) => providerChargeId);
};
const openDispute = async (booking: Booking, which = 0): Promise<string> => {
  const { id } = house.fake.control.openDispute((await chargesOf(booking))[which] ?? '');
  await house.work();
  return id;
};
const close = async (dispute: string, outcome: 'won' | 'lost'): Promise<void> => {
  house.fake.control.closeDispute(dispute, outcome);
  await house.work();
};
const groupOf = (booking: Booking) => house.fake.control.books().groups[`booking-${booking.number}`];
const callsOf = async (booking: Booking): Promise<string[]> => (await ProviderCall.findAll({ where: { bookingId: booking.id }, order: [['createdAt', 'ASC']] })).map(({ kind, status }) => `${kind} ${status}`);

describe('a dispute whose payment nobody has told of yet', () => {
  it('takes the payment in first, and then the dispute', async () => {
    const booking = await makeAgreedBooking(cast.ada, cast.bram);
    house.fake.control.webhooks({ dropNext: 50 });
    const url = await startCheckout(cast.ada, { booking: booking.number }, new Date());
    house.fake.control.pay(new URL(url).pathname.split('/').at(-1) ?? '');
    const charge = house.fake.control.objects('charge').find(({ transfer_group }) => transfer_group === `booking-${booking.number}`);
    if (!charge) throw new Error('Nothing was charged.');
    const { id } = house.fake.control.openDispute(charge.id);
    expect(await readAgain(id)).toBe('noted');
    expect(await statusOf(booking)).toEqual(['held', 'held']);
    house.fake.control.closeDispute(id, 'won');
    expect(await readAgain(id)).toBe('noted');
    house.fake.control.webhooks({ dropNext: 0 });
    expect(await heldFor(booking.id)).toBe(60_000);
    expect(await checkBooks(house)).toEqual([]);
  });
});

describe('won', () => {
  it('goes on to pay the tally that was signed in the meantime', async () => {
    const booking = await held();
    const dispute = await openDispute(booking);
    expect(await sawAndSign(booking, 50_000)).toBe('disputed');
    await close(dispute, 'won');
    expect(await statusOf(booking)).toEqual(['settled', 'settled']);
    expect(await balances(booking.id)).toMatchObject({ 'dispute loss': 0, 'sawyer receivable': 0, 'provider fee': 1_770 + 1_500 });
  });

  it('makes what was promised before and waited', async () => {
    const booking = await held();
    await sawAndSign(booking, 50_000);
    const dispute = house.fake.control.openDispute((await chargesOf(booking))[0] ?? '').id;
    // The message comes before the worker gets to the calls.
    await reconcile(new Date());
    await house.work();
    expect(await callsOf(booking)).toEqual(expect.arrayContaining(['refund waiting', 'transfer waiting']));
    expect(groupOf(booking)).toMatchObject({ transferred: 0, refunded: 0 });
    await close(dispute, 'won');
    expect(await statusOf(booking)).toEqual(['settled', 'settled']);
    expect(groupOf(booking)).toMatchObject({ transferred: 47_500, refunded: 10_000 });
  });

  it('settles a cancellation as of the instant it was made', async () => {
    const booking = await held({ startsAt: new Date(Date.now() + 20 * HOUR) });
    const dispute = await openDispute(booking);
    await cancelBooking(cast.ada, { booking: booking.number, reason: 'Not today.' }, new Date());
    expect(await statusOf(booking)).toEqual(['cancelled', 'held']);
    expect(await BookedDay.count({ where: { bookingId: booking.id, active: true } })).toBe(0);
    await house.work();
    expect(groupOf(booking)).toMatchObject({ transferred: 0, refunded: 0 });
    await close(dispute, 'won');
    expect(await statusOf(booking)).toEqual(['cancelled', 'settled']);
    expect(groupOf(booking)).toMatchObject({ transferred: 9_405, refunded: 50_100 });
  });
});

describe('lost before sawing', () => {
  it('ends the booking: the day is free, the listing open, nothing is held', async () => {
    const booking = await held();
    await close(await openDispute(booking), 'lost');
    expect(await statusOf(booking)).toEqual(['cancelled', 'refunded']);
    expect(await heldFor(booking.id)).toBe(0);
    expect(await balances(booking.id)).toMatchObject({ 'dispute loss': 0, 'provider fee': 1_770 + 1_500 });
    expect(await BookedDay.count({ where: { bookingId: booking.id, active: true } })).toBe(0);
    expect((await Listing.findByPk(booking.listingId, { rejectOnEmpty: true })).status).toBe('open');
  });

  it('ends a booking that was cancelled in the meantime without sending anything back', async () => {
    const booking = await held();
    const dispute = await openDispute(booking);
    await cancelBooking(cast.bram, { booking: booking.number, reason: 'The mill broke.' }, new Date());
    await close(dispute, 'lost');
    expect(await statusOf(booking)).toEqual(['cancelled', 'refunded']);
    expect(groupOf(booking)).toMatchObject({ refunded: 0, disputedAway: 60_000 });
  });
});

describe('lost after sawing, before paying out', () => {
  it('waits for the landowner to pay again, and settles then', async () => {
    const booking = await held();
    const dispute = await openDispute(booking);
    await sawAndSign(booking, 50_000);
    await close(dispute, 'lost');
    expect(await statusOf(booking)).toEqual(['signed', 'held']);
    await pay(booking, 'top-up');
    expect(await statusOf(booking)).toEqual(['settled', 'settled']);
    expect(groupOf(booking)).toMatchObject({ charged: 110_000, transferred: 47_500, refunded: 0, disputedAway: 60_000 });
  });

  it('ends without pay when the sawyer closes it', async () => {
    const booking = await held();
    const dispute = await openDispute(booking);
    await sawAndSign(booking, 50_000);
    await close(dispute, 'lost');
    await acceptHeld(cast.bram, booking.number, new Date());
    expect(await statusOf(booking)).toEqual(['settled', 'refunded']);
  });

  it('ends by itself when the deadline signed: up to the hold, which is nothing', async () => {
    const booking = await held();
    const dispute = await openDispute(booking);
    await sawAndSign(booking, 50_000, 'deadline');
    await close(dispute, 'lost');
    expect(await statusOf(booking)).toEqual(['settled', 'refunded']);
  });

  it('drops what was promised and not made, with the fee', async () => {
    const booking = await held();
    await sawAndSign(booking, 50_000);
    const dispute = house.fake.control.openDispute((await chargesOf(booking))[0] ?? '').id;
    await reconcile(new Date());
    await close(dispute, 'lost');
    expect(await callsOf(booking)).toEqual(expect.arrayContaining(['refund dropped', 'transfer dropped']));
    expect(await statusOf(booking)).toEqual(['settled', 'settled']);
    expect(await balances(booking.id)).toMatchObject({ 'sawyer payable': 0, 'refund payable': 0, 'platform fee': 0, 'dispute loss': 0, 'sawyer receivable': 0 });
  });

  it('of an added charge leaves the first one to pay from, each refund and transfer out of its own charge', async () => {
    const booking = await held();
    await sawAndSign(booking, 90_000);
    await pay(booking, 'top-up');
    expect(await statusOf(booking)).toEqual(['settled', 'settled']);
    await close(await openDispute(booking, 1), 'lost');
    // Of $855 the hold gave $600 and the top-up $255; only the latter is owed back.
    expect(groupOf(booking)).toMatchObject({ transferred: 85_500, reversed: 25_500, disputedAway: 30_000 });
    expect(await balances(booking.id)).toMatchObject({ 'sawyer receivable': 0, 'dispute loss': 4_500, 'platform fee': -4_500 });
  });
});

describe('lost after paying out', () => {
  it('takes the transfer back from the sawyer; the fee stays our loss', async () => {
    const booking = await held();
    await sawAndSign(booking, 60_000);
    await house.work();
    await close(await openDispute(booking), 'lost');
    expect(await callsOf(booking)).toEqual(['transfer done', 'reversal done']);
    expect(await balances(booking.id)).toMatchObject({ 'sawyer receivable': 0, 'dispute loss': 3_000, 'platform fee': -3_000 });
    expect(await statusOf(booking)).toEqual(['settled', 'settled']);
  });

  it('is owed by the sawyer when their balance has not got it, and stands before a moderator', async () => {
    const { retryProviderCall } = await import('~/server/commands/retry-provider-call.ts');
    const booking = await held();
    await sawAndSign(booking, 60_000);
    await house.work();
    house.fake.control.fault({ on: 'POST /v1/transfers/*/reversals', times: 40, effect: 'refuse', status: 400, code: 'balance_insufficient' });
    const dispute = await openDispute(booking);
    house.fake.control.closeDispute(dispute, 'lost');
    await house.work(40);
    expect(await callsOf(booking)).toEqual(['transfer done', 'reversal stuck']);
    expect(await balances(booking.id)).toMatchObject({ 'sawyer receivable': 57_000, 'dispute loss': 3_000 });
    house.fake.control.clearFaults();
    const [call] = await ProviderCall.findAll({ where: { bookingId: booking.id, kind: 'reversal' } });
    await retryProviderCall(cast.mo, call?.id ?? '', new Date());
    await house.work();
    expect(await balances(booking.id)).toMatchObject({ 'sawyer receivable': 0 });
    expect(groupOf(booking)).toMatchObject({ reversed: 57_000 });
  });

  it.each(['drop', 'fail after'] as const)('takes it back once when the answer is lost (%s)', async (effect) => {
    const booking = await held();
    await sawAndSign(booking, 60_000);
    await house.work();
    house.fake.control.fault({ on: 'POST /v1/transfers/*/reversals', times: 4, effect, status: 500 });
    await close(await openDispute(booking), 'lost');
    expect(groupOf(booking)).toMatchObject({ reversed: 57_000 });
    expect(await balances(booking.id)).toMatchObject({ 'sawyer receivable': 0 });
  });
});
