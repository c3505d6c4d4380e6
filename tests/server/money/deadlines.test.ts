import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { cancellationOf } from '~/server/booking-money.ts';
import { confirmDays } from '~/server/commands/confirm-days.ts';
import { lapseUnpaid } from '~/server/commands/lapse-unpaid.ts';
import { offerTally } from '~/server/commands/offer-tally.ts';
import { proposeDays } from '~/server/commands/propose-days.ts';
import { startCheckout } from '~/server/commands/start-checkout.ts';
import { startSawing } from '~/server/commands/start-sawing.ts';
import { Bid, Booking, DayProposal, HeldPayment } from '~/server/models/index.ts';
import { cancelCutOff, dayStart, formatInstant } from '~/domain/time.ts';
import { makeCast, type Cast } from '../../support/cast.ts';
import { OAK_TERMS } from '../../support/rate-cards.ts';
import { makeAgreedBooking, openMoneyHouse, type MoneyHouse } from '../../support/money-market.ts';

// United States: clocks go forward on Sunday 14 Mar 2027 and back on Sunday 7 Nov 2027 (Energy Policy Act of 2005).
const CHICAGO = 'America/Chicago';
let house: MoneyHouse;
let cast: Cast;
beforeAll(async () => {
  house = await openMoneyHouse();
  cast = await makeCast();
});
afterAll(() => house.close());

/** A booking of two who have not agreed on a day yet. */
async function proposed(): Promise<Booking> {
  const booking = await makeAgreedBooking(cast.ada, cast.bram);
  await HeldPayment.destroy({ where: { bookingId: booking.id } });
  await booking.update({ status: 'proposed', startsAt: null, payBy: null });
  return booking;
}
async function agree(booking: Booking, days: string[], at: Date): Promise<Booking> {
  await proposeDays(cast.bram, { booking: booking.number, days, startTime: '08:00', note: '' }, at);
  const { id } = await DayProposal.findOne({ where: { bookingId: booking.id, status: 'open' }, rejectOnEmpty: true });
  await confirmDays(cast.ada, { booking: booking.number, proposal: id }, at);
  return booking.reload();
}
const shown = (instant: Date | null): string => (instant ? formatInstant(instant, CHICAGO) : 'none');

describe('five days to pay', () => {
  it.each([
    // Agreed in winter time, due at the same hour of the clock in summer time; and the reverse.
    ['spring', '2027-03-11T21:00:00Z', '2027-04-01', 'Tue 16 Mar, 3:00 pm CDT', '2027-03-16T20:00:00.000Z'],
    ['autumn', '2027-11-04T20:00:00Z', '2027-11-22', 'Tue 9 Nov, 3:00 pm CST', '2027-11-09T21:00:00.000Z'],
  ])('end at the same hour of the site’s clock over the %s change', async (_season, agreed, day, words, instant) => {
    const booking = await agree(await proposed(), [day], new Date(agreed));
    expect(booking.payBy?.toISOString()).toBe(instant);
    expect(shown(booking.payBy)).toBe(words);
    await lapseUnpaid(new Date(Date.parse(instant) - 1));
    expect((await booking.reload()).status).toBe('agreed');
    await lapseUnpaid(new Date(instant));
    expect((await booking.reload()).status).toBe('lapsed');
  });

  it('end no later than the day’s start', async () => {
    const booking = await agree(await proposed(), ['2027-03-15'], new Date('2027-03-13T21:00:00Z'));
    expect(shown(booking.payBy)).toBe('Mon 15 Mar, 8:00 am CDT');
  });
});

describe('48 hours before the start', () => {
  it.each([
    // Sunday lost an hour: two days before by the clock would be only 47 hours.
    ['spring', '2027-03-15', 'Sat 13 Mar, 7:00 am CST'],
    ['autumn', '2027-11-08', 'Sat 6 Nov, 9:00 am CDT'],
  ])('are elapsed hours over the %s change, the instant itself still free', async (_season, day, words) => {
    const startsAt = dayStart(day, CHICAGO);
    const cutOff = cancelCutOff(startsAt);
    expect(shown(cutOff)).toBe(words);
    const booking = await makeAgreedBooking(cast.ada, cast.bram, { startsAt });
    house.fake.control.pay(new URL(await startCheckout(cast.ada, { booking: booking.number }, new Date())).pathname.split('/').at(-1) ?? '');
    await house.work();
    const owed = async (at: Date): Promise<number> => (await cancellationOf(await booking.reload(), 'landowner', at)).payableCents;
    expect([await owed(cutOff), await owed(new Date(cutOff.getTime() + 1)), (await cancellationOf(booking, 'sawyer', startsAt)).payableCents]).toEqual([0, 9_900, 0]);
  });
});

describe('72 hours to sign', () => {
  it('are elapsed hours from the offer, shown by the site’s clock', async () => {
    const booking = await makeAgreedBooking(cast.ada, cast.bram);
    house.fake.control.pay(new URL(await startCheckout(cast.ada, { booking: booking.number }, new Date())).pathname.split('/').at(-1) ?? '');
    await house.work();
    await Bid.update({ estimate: { terms: OAK_TERMS } }, { where: { id: booking.bidId } });
    const offered = new Date('2027-03-12T22:30:00Z'); // Fri 4:30 pm CST
    await startSawing(cast.bram, booking.number, offered);
    await offerTally(cast.mo, { booking: booking.number, endedBySawyer: true, note: '' }, offered);
    expect(shown((await booking.reload()).signBy)).toBe('Mon 15 Mar, 5:30 pm CDT');
  });
});
