import { afterAll, afterEach, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import { cancelBooking } from '~/server/commands/cancel-booking.ts';
import { finishProviderCall } from '~/server/commands/finish-provider-call.ts';
import { lapseUnpaid } from '~/server/commands/lapse-unpaid.ts';
import { makeProviderCall } from '~/server/commands/make-provider-call.ts';
import { reconcile } from '~/server/commands/reconcile.ts';
import { recordProviderEvent } from '~/server/commands/record-provider-event.ts';
import { retryProviderCall } from '~/server/commands/retry-provider-call.ts';
import { settleBooking } from '~/server/commands/settle-booking.ts';
import { startCheckout } from '~/server/commands/start-checkout.ts';
import { inTransaction, rows } from '~/server/db.ts';
import { balances, post } from '~/server/ledger.ts';
import { env } from '~/server/env.ts';
import { Bid, BookedDay, Booking, Charge, Checkout, HeldPayment, Listing, ProviderCall, ProviderEvent } from '~/server/models/index.ts';
import { system } from '~/server/viewer.ts';
import { signatureHeader } from '../../../fakes/stripe/deliveries.ts';
import { makeCast, type Cast } from '../../support/cast.ts';
import { checkBooks, makeAgreedBooking, makePayoutAccount, openMoneyHouse, type MoneyHouse } from '../../support/money-market.ts';

let house: MoneyHouse;
let cast: Cast;
const HOUR = 3_600_000;

beforeAll(async () => {
  house = await openMoneyHouse();
  cast = await makeCast();
});
afterAll(() => house.close());
beforeEach(async () => {
  house.fake.control.webhooks({ dropNext: 0, paused: false, duplicates: 0 });
  await makePayoutAccount(house, cast.bram);
});
afterEach(async () => {
  await house.work();
  expect(await checkBooks(house)).toEqual([]);
});

const sessionIn = (url: string): string => new URL(url).pathname.split('/').at(-1) ?? '';
const statusOf = async (booking: Booking): Promise<[string, string]> => {
  const now = await Booking.findByPk(booking.id, { rejectOnEmpty: true });
  return [now.status, (await HeldPayment.findOne({ where: { bookingId: booking.id }, rejectOnEmpty: true })).status];
};
const held = async (options: Parameters<typeof makeAgreedBooking>[2] = {}, card?: string): Promise<Booking> => {
  const booking = await makeAgreedBooking(cast.ada, cast.bram, options);
  house.fake.control.pay(sessionIn(await startCheckout(cast.ada, { booking: booking.number }, new Date())), card);
  await house.work();
  expect(await statusOf(booking)).toEqual(['held', 'held']);
  return booking;
};
const cancel = (by: Cast['ada'], booking: Booking, expects?: number): Promise<void> =>
  cancelBooking(by, { booking: booking.number, reason: 'The road is washed out.', ...(expects === undefined ? {} : { expects }) }, new Date());
const groupOf = (booking: Booking) => house.fake.control.books().groups[`booking-${booking.number}`];
const chargeOf = async (booking: Booking): Promise<string> => {
  const payment = await HeldPayment.findOne({ where: { bookingId: booking.id }, rejectOnEmpty: true });
  return (await Charge.findOne({ where: { paymentId: payment.id }, rejectOnEmpty: true })).providerChargeId;
};

describe('a whole refund', () => {
  it('waits at the provider while it lacks the money for it, its fee being gone, and ends when there is some', async () => {
    const booking = await held();
    await cancel(cast.ada, booking);
    await house.work();
    const call = await ProviderCall.findOne({ where: { bookingId: booking.id, kind: 'refund' }, rejectOnEmpty: true });
    expect(call).toMatchObject({ status: 'waiting', providerId: expect.stringMatching(/^re_/) });
    expect(await statusOf(booking)).toEqual(['cancelled', 'held']);
    expect(await balances(booking.id)).toMatchObject({ 'refund payable': -60_000 });
    house.fake.control.topUp(500_000);
    await house.work();
    expect(await statusOf(booking)).toEqual(['cancelled', 'refunded']);
    const run = await reconcile(new Date());
    expect(run.repaired).toEqual([expect.objectContaining({ what: 'topup', oursCents: 500_000 })]);
    expect(run.ledgerCents).toBe(run.providerCents);
  });
});

describe('cancelling', () => {
  it('more than 48 hours before gives everything back, frees the day and opens the listing', async () => {
    const booking = await held();
    await cancel(cast.ada, booking, 0);
    await house.work();
    expect(await statusOf(booking)).toEqual(['cancelled', 'refunded']);
    expect(groupOf(booking)).toMatchObject({ charged: 60_000, refunded: 60_000, transferred: 0 });
    expect(await BookedDay.count({ where: { bookingId: booking.id, active: true } })).toBe(0);
    expect((await Bid.findByPk(booking.bidId, { rejectOnEmpty: true })).status).toBe('released');
    const listing = await Listing.findByPk(booking.listingId, { rejectOnEmpty: true });
    expect(listing.status).toBe('open');
    expect(listing.closesAt?.getTime()).toBeGreaterThan(Date.now() + 6 * 24 * HOUR);
  });

  it('late by the landowner owes set-up and travel, which the fee is taken from', async () => {
    const booking = await held({ startsAt: new Date(Date.now() + 20 * HOUR) });
    // $75 set-up and 2 × 6 miles at $2: the frozen terms.
    await expect(cancel(cast.ada, booking, 0)).rejects.toMatchObject({ kind: 'conflict', message: expect.stringContaining('$99.00') });
    await cancel(cast.ada, booking, 9_900);
    await house.work();
    expect(await statusOf(booking)).toEqual(['cancelled', 'settled']);
    expect(groupOf(booking)).toMatchObject({ charged: 60_000, refunded: 50_100, transferred: 9_405 });
    expect(await balances(booking.id)).toMatchObject({ 'platform fee': -495, 'landowner held': 0 });
  });

  it('late by the sawyer gives everything back', async () => {
    const booking = await held({ startsAt: new Date(Date.now() + 20 * HOUR) });
    await cancel(cast.bram, booking);
    await house.work();
    expect(await statusOf(booking)).toEqual(['cancelled', 'refunded']);
    expect(groupOf(booking)).toMatchObject({ refunded: 60_000, transferred: 0 });
  });

  it('unpaid voids the payment and ends the open card page; money that still arrives goes back', async () => {
    const booking = await makeAgreedBooking(cast.ada, cast.bram);
    const session = sessionIn(await startCheckout(cast.ada, { booking: booking.number }, new Date()));
    house.fake.control.pay(session);
    await cancel(cast.ada, booking);
    await house.work();
    expect(await statusOf(booking)).toEqual(['cancelled', 'void']);
    expect(groupOf(booking)).toMatchObject({ charged: 60_000, refunded: 60_000 });
    const other = await makeAgreedBooking(cast.ada, cast.bram);
    const open = sessionIn(await startCheckout(cast.ada, { booking: other.number }, new Date()));
    await cancel(cast.bram, other);
    await house.work();
    expect((await house.provider.checkout.sessions.retrieve(open)).status).toBe('expired');
  });

  it('by eight clicks of both sides at once happens once', async () => {
    const booking = await held();
    const tries = await Promise.allSettled(Array.from({ length: 8 }, (_, index) => cancel(index % 2 ? cast.ada : cast.bram, booking)));
    expect(tries.filter(({ status }) => status === 'fulfilled')).toHaveLength(1);
    await house.work();
    expect(groupOf(booking)).toMatchObject({ refunded: 60_000 });
  });

  it('against the arrival of the money ends one way or the other, never in between', async () => {
    for (let round = 0; round < 3; round += 1) {
      const booking = await makeAgreedBooking(cast.ada, cast.bram);
      house.fake.control.pay(sessionIn(await startCheckout(cast.ada, { booking: booking.number }, new Date())));
      await Promise.all([house.work(), cancel(cast.bram, booking)]);
      await house.work();
      expect(['void', 'refunded']).toContain((await statusOf(booking))[1]);
      expect(groupOf(booking)).toMatchObject({ charged: 60_000, refunded: 60_000, transferred: 0 });
    }
  });
});

describe('the payment deadline', () => {
  it('lapses the booking after its instant, not before, and gives back what comes later', async () => {
    const booking = await makeAgreedBooking(cast.ada, cast.bram);
    const payBy = booking.payBy ?? new Date();
    const session = sessionIn(await startCheckout(cast.ada, { booking: booking.number }, new Date()));
    await lapseUnpaid(new Date(payBy.getTime() - 1));
    expect(await statusOf(booking)).toEqual(['agreed', 'due']);
    house.fake.control.pay(session);
    await lapseUnpaid(payBy);
    expect(await statusOf(booking)).toEqual(['lapsed', 'void']);
    expect((await Listing.findByPk(booking.listingId, { rejectOnEmpty: true })).status).toBe('open');
    await house.work();
    expect(groupOf(booking)).toMatchObject({ charged: 60_000, refunded: 60_000 });
  });

  it('marks a checkout whose time is over', async () => {
    const booking = await makeAgreedBooking(cast.ada, cast.bram);
    const session = sessionIn(await startCheckout(cast.ada, { booking: booking.number }, new Date()));
    house.fake.control.expireSession(session);
    await house.work();
    expect((await Checkout.findOne({ where: { providerSessionId: session }, rejectOnEmpty: true })).status).toBe('expired');
    expect(await statusOf(booking)).toEqual(['agreed', 'due']);
  });
});

describe('a refund that the bank sends back', () => {
  it('is owed again, stands before a moderator, and is made anew', async () => {
    const booking = await held();
    await cancel(cast.ada, booking);
    await house.work();
    const call = await ProviderCall.findOne({ where: { bookingId: booking.id, kind: 'refund' }, rejectOnEmpty: true });
    house.fake.control.failRefund(call.providerId ?? '');
    await house.work();
    expect((await ProviderCall.findByPk(call.id, { rejectOnEmpty: true })).status).toBe('stuck');
    expect(await balances(booking.id)).toMatchObject({ 'refund payable': -60_000 });
    await retryProviderCall(cast.mo, call.id, new Date());
    await house.work();
    for (const event of house.fake.control.objects('event').filter(({ type }) => type.startsWith('refund'))) house.fake.control.resend(event.id);
    await ProviderEvent.update({ handledAt: null }, { where: {} });
    await house.work();
    expect((await ProviderCall.findByPk(call.id, { rejectOnEmpty: true })).status).toBe('done');
    expect(await balances(booking.id)).toMatchObject({ 'refund payable': 0 });
  });
});

describe('what was read of a refund before it came back', () => {
  const callFor = async (booking: Booking): Promise<ProviderCall> => ProviderCall.findOne({ where: { bookingId: booking.id, kind: 'refund' }, rejectOnEmpty: true });

  it('changes nothing when it is heard after, whether the refund had been entered or not', async () => {
    for (const entered of [true, false]) {
      const booking = await held();
      await cancel(cast.ada, booking);
      // Made at the provider while the line is dead on the way back: nothing is entered yet.
      if (!entered) house.fake.control.fault({ on: 'POST /v1/refunds', times: 1, effect: 'drop' });
      const { id } = await callFor(booking);
      await makeProviderCall(id, new Date()).catch(() => undefined);
      const refund = house.fake.control.objects('refund').find(({ metadata }) => metadata?.['call'] === id);
      if (!refund) throw new Error('No refund was made.');
      house.fake.control.failRefund(refund.id);
      await finishProviderCall(id, { providerId: refund.id, status: 'came back' }, new Date());
      await finishProviderCall(id, { providerId: refund.id, status: 'moved' }, new Date());
      await finishProviderCall(id, { providerId: refund.id, status: 'waiting' }, new Date());
      expect((await callFor(booking)).status).toBe('stuck');
      expect(await balances(booking.id)).toMatchObject({ 'refund payable': -60_000 });

      await retryProviderCall(cast.mo, id, new Date());
      await finishProviderCall(id, { providerId: refund.id, status: 'moved' }, new Date());
      expect((await callFor(booking)).status).toBe('waiting');
      await house.work();
      expect((await callFor(booking)).status).toBe('done');
      expect(await balances(booking.id)).toMatchObject({ 'refund payable': 0 });
      expect(await checkBooks(house, [booking.id])).toEqual([]);
    }
  });

  it('is not taken from the answer that the provider repeats for a key', async () => {
    const booking = await held();
    await cancel(cast.ada, booking);
    const { id } = await callFor(booking);
    const refunds = (): { id: string; status: string | null }[] => house.fake.control.objects('refund').filter(({ metadata }) => metadata?.['call'] === id);
    const makeWithDeadLine = async (): Promise<string> => {
      house.fake.control.fault({ on: 'POST /v1/refunds', times: 2, effect: 'drop' });
      await makeProviderCall(id, new Date(Date.now() + 86_400_000)).catch(() => undefined);
      house.fake.control.clearFaults();
      return refunds().find(({ status }) => status !== 'failed')?.id ?? '';
    };
    // The first refund comes back and is known; the second is made while the line is dead, and comes back before anybody knows of it.
    const first = await makeWithDeadLine();
    house.fake.control.failRefund(first);
    await finishProviderCall(id, { providerId: first, status: 'came back' }, new Date());
    await retryProviderCall(cast.mo, id, new Date());
    const second = await makeWithDeadLine();
    expect(second).not.toBe(first);
    house.fake.control.failRefund(second);
    await finishProviderCall(id, { providerId: second, status: 'came back' }, new Date());
    expect(await callFor(booking)).toMatchObject({ status: 'stuck', cameBack: [first, second] });
    await retryProviderCall(cast.mo, id, new Date());
    await house.work();
    expect((await callFor(booking)).status).toBe('done');
    expect(refunds()).toHaveLength(3);
    expect(await checkBooks(house, [booking.id])).toEqual([]);
  });

  it('is read anew when the line was dead, and nobody has told yet that it came back', async () => {
    const booking = await held();
    await cancel(cast.ada, booking);
    const { id } = await callFor(booking);
    house.fake.control.webhooks({ paused: true });
    house.fake.control.fault({ on: 'POST /v1/refunds', times: 2, effect: 'drop' });
    await makeProviderCall(id, new Date()).catch(() => undefined);
    house.fake.control.clearFaults();
    house.fake.control.failRefund(house.fake.control.objects('refund').find(({ metadata }) => metadata?.['call'] === id)?.id ?? '');
    await makeProviderCall(id, new Date(Date.now() + 86_400_000));
    expect((await callFor(booking)).status).toBe('stuck');
    house.fake.control.webhooks({ paused: false });
  });
});

describe('the message door', () => {
  const event = (id: string): string => JSON.stringify({ id, object: 'event', type: 'payment_intent.created', created: Math.floor(Date.now() / 1000), data: { object: { id: 'pi_1' } } });
  const secret = env().PAYMENTS_WEBHOOK_SECRET;
  const seconds = (): number => Math.floor(Date.now() / 1000);

  it('lets in what is signed, once', async () => {
    const body = event('evt_door');
    expect(await recordProviderEvent(body, signatureHeader(body, secret), new Date())).toBe('new');
    const again = await Promise.all(Array.from({ length: 8 }, () => recordProviderEvent(body, signatureHeader(body, secret), new Date())));
    expect(new Set(again)).toEqual(new Set(['known']));
    expect(await ProviderEvent.count({ where: { id: 'evt_door' } })).toBe(1);
    expect(await rows(`SELECT 1 FROM pgboss.job WHERE name = 'handle-provider-event' AND data->>'eventId' = 'evt_door'`)).toHaveLength(1);
  });

  it.each([
    ['a wrong secret', (body: string) => signatureHeader(body, 'whsec_other')],
    ['another body', () => signatureHeader('{}', secret)],
    ['an old time', (body: string) => signatureHeader(body, secret, seconds() - 400)],
    ['a future time', (body: string) => signatureHeader(body, secret, seconds() + 120)],
    ['no signature', () => ''],
    ['nonsense', () => 't=soon,v1=zz'],
  ])('refuses %s', async (_name, sign) => {
    const body = event('evt_refused');
    await expect(recordProviderEvent(body, sign(body), new Date())).rejects.toMatchObject({ kind: 'invalid' });
    expect(await ProviderEvent.count({ where: { id: 'evt_refused' } })).toBe(0);
  });
});

describe('the ledger', () => {
  const at = new Date();
  it('writes a cause once, in whole cents, summing to zero', async () => {
    const group = { at, cause: 'test', causeId: 'one', bookingId: null };
    const write = (...cents: number[]) => inTransaction(() => post({ ...group, sides: cents.map((amountCents, index) => ({ account: index ? 'platform fee' : 'dispute loss', amountCents })) }));
    await expect(write(100, -99)).rejects.toThrow(/sum to zero/);
    await expect(write(0.5, -0.5)).rejects.toThrow(/whole cents/);
    await expect(write(0, 0)).rejects.toThrow(/two sides/);
    expect((await Promise.all([write(100, -100), write(100, -100), write(100, -100)])).filter(Boolean)).toHaveLength(1);
  });
});

describe('reconciliation', () => {
  it('takes in everything whose messages were lost, and finds nothing left', async () => {
    const booking = await makeAgreedBooking(cast.ada, cast.bram);
    house.fake.control.webhooks({ dropNext: 100 });
    house.fake.control.pay(sessionIn(await startCheckout(cast.ada, { booking: booking.number }, new Date())));
    // The session's id was lost too: only the charge tells of it.
    await Checkout.update({ status: 'expired', providerSessionId: null }, { where: { status: 'open' } });
    const run = await reconcile(new Date());
    expect(await statusOf(booking)).toEqual(['held', 'held']);
    expect(run.repaired).toEqual([expect.objectContaining({ what: 'charge', booking: booking.number, oursCents: 58_230, theirsCents: 58_230 })]);
    expect(run.differences).toEqual([]);
    expect(run.ledgerCents).toBe(run.providerCents);
    const dispute = house.fake.control.openDispute(await chargeOf(booking));
    const second = await reconcile(new Date());
    expect(second.repaired).toEqual([expect.objectContaining({ object: dispute.id })]);
    house.fake.control.closeDispute(dispute.id, 'won');
    await reconcile(new Date());
    expect(await settleBooking(system('test'), booking.id, new Date())).toBe('not signed');
    expect((await HeldPayment.findOne({ where: { bookingId: booking.id }, rejectOnEmpty: true })).disputedAt).toBeNull();
  });

  it('reports what nobody of ours did', async () => {
    await held();
    const intent = await house.provider.paymentIntents.create({ amount: 5_000, currency: 'usd', payment_method: 'pm_card_bypassPending', confirm: true });
    const run = await reconcile(new Date());
    expect(run.differences).toEqual([expect.objectContaining({ what: 'charge', object: intent.latest_charge, oursCents: 0, theirsCents: 4_825 })]);
    // Set right by hand, so that the books agree again for the checks that follow.
    await house.provider.refunds.create({ payment_intent: intent.id });
    await inTransaction(() => post({ at: new Date(), cause: 'stray fee', causeId: 'stray', bookingId: null, sides: [{ account: 'provider fee', amountCents: 175 }, { account: 'provider balance', amountCents: -175 }] }));
  });
});
