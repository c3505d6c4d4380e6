import { afterAll, afterEach, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import { cancelBooking } from '~/server/commands/cancel-booking.ts';
import { confirmDays } from '~/server/commands/confirm-days.ts';
import { answerNoShow, decideNoShow, reportNoShow, sweepNoShows, withdrawNoShow } from '~/server/commands/no-show.ts';
import { proposeDays } from '~/server/commands/propose-days.ts';
import { reconcile } from '~/server/commands/reconcile.ts';
import { remindersDue, remindOfPayouts } from '~/server/commands/remind-of-payouts.ts';
import { startCheckout } from '~/server/commands/start-checkout.ts';
import { startSawing } from '~/server/commands/start-sawing.ts';
import { rows } from '~/server/db.ts';
import { heldFor } from '~/server/ledger.ts';
import { BookedDay, Booking, Checkout, DayProposal, HeldPayment, NoShow } from '~/server/models/index.ts';
import { dayAt, dayStart } from '~/domain/time.ts';
import { makeCast, type Cast } from '../../support/cast.ts';
import { checkBooks, makeAgreedBooking, makePayoutAccount, openMoneyHouse, sawAndSign, type MoneyHouse } from '../../support/money-market.ts';

let house: MoneyHouse;
let cast: Cast;
const HOUR = 3_600_000;
const DAY = 24 * HOUR;

beforeAll(async () => {
  house = await openMoneyHouse();
  cast = await makeCast();
  house.fake.control.topUp(10_000_000);
  await reconcile(new Date());
});
afterAll(() => house.close());
beforeEach(async () => void (await makePayoutAccount(house, cast.bram)));
afterEach(async () => {
  await house.work();
  expect(await checkBooks(house)).toEqual([]);
});

/** Held for a start four hours ago or as given. */
async function held(startsAt = new Date(Date.now() - 4 * HOUR)): Promise<Booking> {
  const booking = await makeAgreedBooking(cast.ada, cast.bram, { startsAt });
  const url = await startCheckout(cast.ada, { booking: booking.number }, new Date());
  house.fake.control.pay(new URL(url).pathname.split('/').at(-1) ?? '');
  await house.work();
  return booking;
}
const statusOf = async (booking: Booking): Promise<[string, string]> => {
  const now = await Booking.findByPk(booking.id, { rejectOnEmpty: true });
  return [now.status, (await HeldPayment.findOne({ where: { bookingId: booking.id }, rejectOnEmpty: true })).status];
};
const report = (by: Cast['ada'], booking: Booking, at = new Date()): Promise<void> => reportNoShow(by, { booking: booking.number, says: 'Nobody at the landing, no answer on the phone.' }, at);
const groupOf = (booking: Booking) => house.fake.control.books().groups[`booking-${booking.number}`];
const lettersTo = async (email: string, subject: string): Promise<number> =>
  (await rows(`SELECT 1 FROM pgboss.job WHERE name = 'send-mail' AND data->>'to' = $1 AND data->>'subject' LIKE $2`, [email, `%${subject}%`])).length;

describe('somebody who did not come', () => {
  it('cannot be reported before the day begins, nor by anyone else', async () => {
    const booking = await held(new Date(Date.now() + 20 * HOUR));
    await expect(report(cast.ada, booking)).rejects.toMatchObject({ kind: 'conflict', message: expect.stringContaining('has not begun') });
    await expect(report(cast.cleo, booking)).rejects.toMatchObject({ kind: 'forbidden' });
    await expect(report(cast.mo, booking)).rejects.toMatchObject({ kind: 'forbidden' });
  });

  it('the landowner: set-up and travel are owed, when it is agreed', async () => {
    const booking = await held();
    await report(cast.bram, booking);
    await answerNoShow(cast.ada, { booking: booking.number, agrees: true, says: '' }, new Date());
    await house.work();
    expect(await statusOf(booking)).toEqual(['cancelled', 'settled']);
    expect(groupOf(booking)).toMatchObject({ transferred: 9_405, refunded: 50_100 });
    expect(await BookedDay.count({ where: { bookingId: booking.id, active: true } })).toBe(0);
  });

  it('the sawyer: everything goes back, when the time to answer is over and not before', async () => {
    const booking = await held();
    await report(cast.ada, booking);
    expect(await lettersTo(cast.bram.email, 'says that you did not come')).toBeGreaterThan(0);
    const { answerBy } = await NoShow.findOne({ where: { bookingId: booking.id }, rejectOnEmpty: true });
    await sweepNoShows(new Date(answerBy.getTime() - 1));
    expect(await statusOf(booking)).toEqual(['held', 'held']);
    await Promise.all([sweepNoShows(answerBy), sweepNoShows(answerBy), sweepNoShows(answerBy)]);
    await house.work();
    expect(await statusOf(booking)).toEqual(['cancelled', 'refunded']);
    expect(groupOf(booking)).toMatchObject({ transferred: 0, refunded: 60_000 });
  });

  it('contests it: a moderator decides with a reason', async () => {
    const booking = await held();
    await report(cast.bram, booking);
    await expect(answerNoShow(cast.bram, { booking: booking.number, agrees: true, says: '' }, new Date())).rejects.toMatchObject({ kind: 'conflict' });
    await answerNoShow(cast.ada, { booking: booking.number, agrees: false, says: 'I stood at the gate until noon.' }, new Date());
    await sweepNoShows(new Date(Date.now() + 30 * DAY));
    expect(await statusOf(booking)).toEqual(['held', 'held']);
    await expect(decideNoShow(cast.ada, { booking: booking.number, stands: false, because: 'Me.' }, new Date())).rejects.toMatchObject({ kind: 'forbidden' });
    await decideNoShow(cast.mo, { booking: booking.number, stands: false, because: 'The photographs show the open gate.' }, new Date());
    expect(await statusOf(booking)).toEqual(['held', 'held']);
    // It is still the same day: the other side may say so too, and this time it stands.
    await report(cast.ada, booking);
    await answerNoShow(cast.bram, { booking: booking.number, agrees: false, says: 'I was there at 8:00.' }, new Date());
    await decideNoShow(cast.mo, { booking: booking.number, stands: true, because: 'The mill was elsewhere that day.' }, new Date());
    await house.work();
    expect(await statusOf(booking)).toEqual(['cancelled', 'refunded']);
  });

  it('is reported once, by one side, and not while the other has reported', async () => {
    const booking = await held();
    const tries = await Promise.allSettled(Array.from({ length: 6 }, (_, index) => report(index % 2 ? cast.ada : cast.bram, booking)));
    expect(tries.filter(({ status }) => status === 'fulfilled')).toHaveLength(1);
    expect(await NoShow.count({ where: { bookingId: booking.id } })).toBe(1);
  });

  it('came after all: the report is taken back, and cancelling waits for that', async () => {
    const booking = await held();
    await report(cast.bram, booking);
    await expect(cancelBooking(cast.bram, { booking: booking.number, reason: 'No.' }, new Date())).rejects.toMatchObject({ kind: 'conflict' });
    await withdrawNoShow(cast.bram, booking.number, new Date());
    await startSawing(cast.bram, booking.number, new Date());
    await sweepNoShows(new Date(Date.now() + 30 * DAY));
    expect(await statusOf(booking)).toEqual(['sawing', 'held']);
  });

  it('a report is over when sawing begins or the day is moved', async () => {
    const sawing = await held();
    await report(cast.ada, sawing);
    await startSawing(cast.bram, sawing.number, new Date());
    await sweepNoShows(new Date(Date.now() + 30 * DAY));
    expect((await NoShow.findOne({ where: { bookingId: sawing.id }, rejectOnEmpty: true })).status).toBe('over');
    expect(await statusOf(sawing)).toEqual(['sawing', 'held']);
  });
});

describe('rain', () => {
  it('moves a held booking by agreement, without a new payment, and counts cancelling from the new day', async () => {
    const booking = await held(new Date(Date.now() + 20 * HOUR));
    const day = dayAt(new Date(Date.now() + 12 * DAY), booking.timeZone);
    await proposeDays(cast.bram, { booking: booking.number, days: [day], startTime: '07:30', note: 'Rain all week.' }, new Date());
    const proposal = await DayProposal.findOne({ where: { bookingId: booking.id, status: 'open' }, rejectOnEmpty: true });
    await expect(confirmDays(cast.bram, { booking: booking.number, proposal: proposal.id }, new Date())).rejects.toMatchObject({ kind: 'forbidden' });
    await confirmDays(cast.ada, { booking: booking.number, proposal: proposal.id }, new Date());
    expect(await statusOf(booking)).toEqual(['held', 'held']);
    expect((await Booking.findByPk(booking.id, { rejectOnEmpty: true })).startsAt).toEqual(dayStart(day, booking.timeZone, '07:30'));
    expect(await heldFor(booking.id)).toBe(60_000);
    const payment = await HeldPayment.findOne({ where: { bookingId: booking.id }, rejectOnEmpty: true });
    expect(await Checkout.count({ where: { paymentId: payment.id } })).toBe(1);
    await expect(startCheckout(cast.ada, { booking: booking.number }, new Date())).rejects.toMatchObject({ kind: 'conflict' });
    // It was 20 hours before the old start; it is days before the new one.
    await cancelBooking(cast.ada, { booking: booking.number, reason: 'The barn went.', expects: 0 }, new Date());
    await house.work();
    expect(groupOf(booking)).toMatchObject({ refunded: 60_000, transferred: 0 });
  });

  it('also after the day has passed, whether or not somebody was reported', async () => {
    const booking = await held();
    await report(cast.ada, booking);
    const day = dayAt(new Date(Date.now() + 13 * DAY), booking.timeZone);
    await proposeDays(cast.ada, { booking: booking.number, days: [day], startTime: '08:00', note: '' }, new Date());
    const proposal = await DayProposal.findOne({ where: { bookingId: booking.id, status: 'open' }, rejectOnEmpty: true });
    await confirmDays(cast.bram, { booking: booking.number, proposal: proposal.id }, new Date());
    await sweepNoShows(new Date(Date.now() + 5 * DAY));
    expect(await statusOf(booking)).toEqual(['held', 'held']);
  });
});

describe('pay that waits for a payout account', () => {
  it('is reminded of at growing intervals', () => {
    const since = new Date('2026-08-03T15:00:00Z');
    const due = (days: number): number => remindersDue(since, new Date(since.getTime() + days * DAY));
    expect([0, 0.9, 1, 2.9, 3, 7, 13.9, 14, 28, 55, 56, 84].map(due)).toEqual([0, 0, 1, 1, 2, 3, 3, 4, 5, 5, 6, 7]);
  });

  it('in one letter for all of it, once each time, and no more when it is released', async () => {
    const account = await makePayoutAccount(house, cast.cleo, false);
    for (const cost of [50_000, 30_000]) {
      const booking = await makeAgreedBooking(cast.ada, cast.cleo);
      const url = await startCheckout(cast.ada, { booking: booking.number }, new Date());
      house.fake.control.pay(new URL(url).pathname.split('/').at(-1) ?? '');
      await house.work();
      await sawAndSign(booking, cost);
    }
    await house.work();
    const after = (days: number): Date => new Date(Date.now() + days * DAY);
    await remindOfPayouts(after(0.5));
    expect(await lettersTo(cast.cleo.email, 'waits for your payout account')).toBe(0);
    await Promise.all([remindOfPayouts(after(1.1)), remindOfPayouts(after(1.1)), remindOfPayouts(after(1.1))]);
    expect(await lettersTo(cast.cleo.email, '$760.00 waits for your payout account')).toBe(1);
    await remindOfPayouts(after(2));
    await remindOfPayouts(after(3.1));
    expect(await lettersTo(cast.cleo.email, 'waits for your payout account')).toBe(2);
    house.fake.control.onboard(account);
    await house.work();
    await remindOfPayouts(after(8));
    expect(await lettersTo(cast.cleo.email, 'waits for your payout account')).toBe(2);
  });
});
