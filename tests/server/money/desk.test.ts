import { afterAll, afterEach, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import { askAdjustment, approveAdjustment, refuseAdjustment, type AdjustmentWanted } from '~/server/commands/adjust-money.ts';
import { settleAsHeld } from '~/server/commands/accept-held.ts';
import { reconcileByHand } from '~/server/commands/reconcile-by-hand.ts';
import { reconcile } from '~/server/commands/reconcile.ts';
import { startCheckout } from '~/server/commands/start-checkout.ts';
import { execute, inTransaction } from '~/server/db.ts';
import { balances, heldFor, post } from '~/server/ledger.ts';
import { Adjustment, Booking, Charge, HeldPayment, ProviderCall } from '~/server/models/index.ts';
import { deskMoney } from '~/server/queries/desk/money.ts';
import type { Viewer } from '~/server/viewer.ts';
import { makeAccount, makeCast, viewerFor, type Cast } from '../../support/cast.ts';
import { checkBooks, makeAgreedBooking, makePayoutAccount, openMoneyHouse, sawAndSign, type MoneyHouse } from '../../support/money-market.ts';

let house: MoneyHouse;
let cast: Cast;
let mia: Viewer;

beforeAll(async () => {
  house = await openMoneyHouse();
  cast = await makeCast();
  mia = await viewerFor((await makeAccount({ name: 'Mia', moderator: true })).id);
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

const pay = async (holdCents = 60_000): Promise<Booking> => {
  const booking = await makeAgreedBooking(cast.ada, cast.bram, { holdCents });
  const url = await startCheckout(cast.ada, { booking: booking.number }, new Date());
  house.fake.control.pay(new URL(url).pathname.split('/').at(-1) ?? '');
  await house.work();
  return booking;
};
const settled = async (cents: number): Promise<Booking> => {
  const booking = await pay(cents);
  await sawAndSign(booking, cents);
  await house.work();
  return booking;
};
const ask = (by: Viewer, booking: Booking | null, kind: AdjustmentWanted['kind'], amountCents: number | null, more: Partial<AdjustmentWanted> = {}): Promise<'done' | 'asked'> =>
  askAdjustment(by, { kind, booking: booking?.number ?? null, amountCents, reason: 'Agreed by telephone.', ...more }, new Date());
const groupOf = (booking: Booking) => house.fake.control.books().groups[`booking-${booking.number}`];
const chargeOf = async (booking: Booking): Promise<string> => {
  const payment = await HeldPayment.findOne({ where: { bookingId: booking.id }, rejectOnEmpty: true });
  return (await Charge.findOne({ where: { paymentId: payment.id }, rejectOnEmpty: true })).providerChargeId;
};

describe('the desk', () => {
  it('opens for moderators only, and only after the second factor', async () => {
    await expect(deskMoney(null, new Date())).rejects.toMatchObject({ kind: 'signedOut' });
    await expect(deskMoney(cast.bram, new Date())).rejects.toMatchObject({ kind: 'forbidden' });
    await expect(deskMoney({ ...cast.mo, isModerator: false, secondFactorDue: true }, new Date())).rejects.toMatchObject({ kind: 'forbidden' });
    await expect(ask(cast.ada, null, 'forgive', null)).rejects.toMatchObject({ kind: 'forbidden' });
    await expect(reconcileByHand(cast.bram, new Date())).rejects.toMatchObject({ kind: 'forbidden' });
  });

  it('shows what is held and how long, and what needs a look', async () => {
    const booking = await pay();
    const quiet = (await deskMoney(cast.mo, new Date())).holds.find((hold) => hold.booking === booking.number);
    expect(quiet).toMatchObject({ heldCents: 60_000, status: 'held', look: null });
    const later = (await deskMoney(cast.mo, new Date(Date.now() + 13 * 86_400_000))).holds.find((hold) => hold.booking === booking.number);
    expect(later?.look).toBe('not begun');
    await sawAndSign(booking, 90_000);
    expect((await deskMoney(cast.mo, new Date())).holds.find((hold) => hold.booking === booking.number)?.look).toBe('over the hold');
    await settleAsHeld(cast.mo, { booking: booking.number, reason: 'Three weeks without an answer.' }, new Date());
    await house.work();
    expect(groupOf(booking)).toMatchObject({ transferred: 57_000, refunded: 0 });
    expect((await deskMoney(cast.mo, new Date())).holds.some((hold) => hold.booking === booking.number)).toBe(false);
  });

  it('shows a call that is stuck and one that waits for a payout account', async () => {
    const booking = await pay();
    house.fake.control.fault({ on: 'POST /v1/refunds', times: 1, effect: 'refuse', status: 400, code: 'resource_missing' });
    await sawAndSign(booking, 50_000);
    await house.work();
    const page = await deskMoney(cast.mo, new Date());
    expect(page.stuck.filter((call) => call.booking === booking.number)).toMatchObject([{ kind: 'refund', waitsFor: 'moderator', cents: 10_000 }]);
    await ProviderCall.update({ status: 'waiting' }, { where: { bookingId: booking.id, status: 'stuck' } });
  });
});

describe('setting right by hand', () => {
  it('gives the fee back to the landowner or to the sawyer, as far as there is one', async () => {
    const booking = await settled(60_000);
    await expect(ask(cast.mo, booking, 'fee-to-landowner', 3_001)).rejects.toMatchObject({ kind: 'invalid', problems: [{ path: 'amount', message: 'At most $30.00.' }] });
    expect(await ask(cast.mo, booking, 'fee-to-landowner', 1_000)).toBe('done');
    expect(await ask(cast.mo, booking, 'fee-to-sawyer', 2_000)).toBe('done');
    await expect(ask(cast.mo, booking, 'fee-to-sawyer', 1)).rejects.toMatchObject({ kind: 'conflict' });
    await house.work();
    expect(groupOf(booking)).toMatchObject({ refunded: 1_000, transferred: 59_000 });
    expect(await balances(booking.id)).toMatchObject({ 'platform fee': 0, 'refund payable': 0, 'sawyer payable': 0 });
  });

  it('sends part of a hold back, never the whole, and settles the rest as usual', async () => {
    const booking = await pay();
    await expect(ask(cast.mo, booking, 'hold-to-landowner', 60_000)).rejects.toMatchObject({ kind: 'invalid' });
    await ask(cast.mo, booking, 'hold-to-landowner', 20_000);
    await house.work();
    expect(await heldFor(booking.id)).toBe(40_000);
    await sawAndSign(booking, 30_000);
    await house.work();
    expect(groupOf(booking)).toMatchObject({ refunded: 30_000, transferred: 28_500 });
  });

  it('above $500 needs a second moderator, whom the database asks for too', async () => {
    const booking = await pay(200_000);
    expect(await ask(cast.mo, booking, 'hold-to-landowner', 50_000)).toBe('done');
    expect(await ask(cast.mo, booking, 'hold-to-landowner', 50_001)).toBe('asked');
    const asked = await Adjustment.findOne({ where: { bookingId: booking.id, status: 'asked' }, rejectOnEmpty: true });
    await house.work();
    expect(await heldFor(booking.id)).toBe(150_000);
    await expect(approveAdjustment(cast.mo, asked.id, new Date())).rejects.toMatchObject({ kind: 'forbidden' });
    await expect(execute(`UPDATE adjustment SET status = 'done', decided_by = asked_by, decided_at = now() WHERE id = $1`, [asked.id])).rejects.toThrow(/four_eyes/);
    const tries = await Promise.allSettled(Array.from({ length: 5 }, () => approveAdjustment(mia, asked.id, new Date())));
    expect(tries.filter(({ status }) => status === 'fulfilled')).toHaveLength(1);
    await house.work();
    expect(await heldFor(booking.id)).toBe(99_999);
    expect(groupOf(booking)).toMatchObject({ refunded: 100_001 });
  });

  it('moves nothing when it is refused', async () => {
    const booking = await pay(200_000);
    await ask(cast.mo, booking, 'hold-to-landowner', 70_000);
    const asked = await Adjustment.findOne({ where: { bookingId: booking.id }, rejectOnEmpty: true });
    await refuseAdjustment(mia, asked.id, new Date());
    await expect(approveAdjustment(mia, asked.id, new Date())).rejects.toMatchObject({ kind: 'conflict' });
    expect(await heldFor(booking.id)).toBe(200_000);
  });

  it('is refused when things have moved on before the approval', async () => {
    const booking = await pay(200_000);
    await ask(cast.mo, booking, 'hold-to-landowner', 150_000);
    await ask(cast.mo, booking, 'hold-to-landowner', 50_000);
    await ask(cast.mo, booking, 'hold-to-landowner', 50_000);
    const asked = await Adjustment.findOne({ where: { bookingId: booking.id, status: 'asked' }, rejectOnEmpty: true });
    await expect(approveAdjustment(mia, asked.id, new Date())).rejects.toMatchObject({ kind: 'conflict', message: expect.stringContaining('$999.99') });
  });

  it('forgives what a sawyer owes after a lost dispute, and does not take it back any more', async () => {
    const booking = await settled(40_000);
    house.fake.control.fault({ on: 'POST /v1/transfers/*/reversals', times: 60, effect: 'refuse', status: 400, code: 'balance_insufficient' });
    house.fake.control.closeDispute(house.fake.control.openDispute(await chargeOf(booking)).id, 'lost');
    await house.work(40);
    expect((await deskMoney(cast.mo, new Date())).disputes.find((one) => one.booking === booking.number)?.owedBySawyerCents).toBe(38_000);
    expect(await ask(cast.mo, booking, 'forgive', null)).toBe('done');
    expect(await balances(booking.id)).toMatchObject({ 'sawyer receivable': 0, 'dispute loss': 40_000 });
    expect((await ProviderCall.findOne({ where: { bookingId: booking.id, kind: 'reversal' }, rejectOnEmpty: true })).status).toBe('dropped');
    await expect(ask(cast.mo, booking, 'forgive', null)).rejects.toMatchObject({ kind: 'conflict' });
  });

  it('enters a difference that the comparison found, once', async () => {
    const intent = await house.provider.paymentIntents.create({ amount: 5_000, currency: 'usd', payment_method: 'pm_card_bypassPending', confirm: true });
    await reconcileByHand(cast.mo, new Date());
    const object = String(intent.latest_charge);
    expect((await deskMoney(cast.mo, new Date())).reconciliations[0]?.differences).toEqual([expect.objectContaining({ object, theirsCents: 4_825 })]);
    await ask(cast.mo, null, 'enter-difference', null, { object, against: 'platform fee' });
    await expect(ask(cast.mo, null, 'enter-difference', null, { object, against: 'platform fee' })).rejects.toMatchObject({ kind: 'conflict' });
    await reconcileByHand(cast.mo, new Date());
    expect((await deskMoney(cast.mo, new Date())).reconciliations[0]?.differences).toEqual([]);
    await expect(ask(cast.mo, null, 'enter-difference', null, { object: 'ch_none' })).rejects.toMatchObject({ kind: 'conflict' });
  });

  it('the ledger takes a cause once however it is written', async () => {
    const side = { at: new Date(), cause: 'adjustment', causeId: 'same', bookingId: null, sides: [{ account: 'provider fee', amountCents: 5 }, { account: 'platform fee', amountCents: -5 }] } as const;
    expect((await Promise.all([inTransaction(() => post(side)), inTransaction(() => post(side))])).filter(Boolean)).toHaveLength(1);
  });
});
