import pg from 'pg';
import { beforeAll, beforeEach, describe, expect, it, vi } from 'vitest';
import { agreeToTrip, leaveTrip, withdrawTrip } from '~/server/commands/answer-trip.ts';
import { cancelBooking } from '~/server/commands/cancel-booking.ts';
import { chooseBid } from '~/server/commands/choose-bid.ts';
import { confirmDays } from '~/server/commands/confirm-days.ts';
import { offerTrip, type TripOffer } from '~/server/commands/offer-trip.ts';
import { placeBid } from '~/server/commands/place-bid.ts';
import { proposeDays } from '~/server/commands/propose-days.ts';
import { reviewTrips } from '~/server/commands/review-trip.ts';
import { withdrawListing } from '~/server/commands/withdraw-listing.ts';
import { moneyTermsOf } from '~/server/booking-money.ts';
import { execute, rows } from '~/server/db.ts';
import { BookedDay, Booking, DayProposal, Outing } from '~/server/models/booking.ts';
import type { Listing } from '~/server/models/listing.ts';
import { Bid, DayOff } from '~/server/models/sawyer.ts';
import { accountExport } from '~/server/queries/account-export.ts';
import { tripPage, tripsAskedOf } from '~/server/queries/trip-page.ts';
import { SharedTrip, TripStop } from '~/server/models/trip.ts';
import { agreementOf } from '~/server/queries/agreement.ts';
import { coarsePoint } from '~/domain/geo.ts';
import { agreementClauses } from '~/domain/trade/agreement.ts';
import type { Viewer } from '~/server/viewer.ts';
import { type Cast, makeAccount, makeCast, viewerFor } from '../support/cast.ts';
import { bidOf, makeOpenListing, MARKET_AT, setUpSawyer } from '../support/sawing-market.ts';

let cast: Cast;
let sawyer: Viewer;
let mill: string;
const owners: Viewer[] = [];
let listings: Listing[];
const day = '2026-08-04';
let turn = 0;

/** Three listings some 30 road miles off, a few miles from each other, each with an owner of its own. */
beforeAll(async () => {
  cast = await makeCast();
  for (const name of ['Ola', 'Pia', 'Quin']) owners.push(await viewerFor((await makeAccount({ name, landowner: true })).id));
});
beforeEach(async () => {
  turn += 1;
  sawyer = await viewerFor((await makeAccount({ name: `Sawyer ${turn}`, sawyer: true })).id);
  mill = await setUpSawyer(sawyer.id);
  listings = [];
  for (const [index, owner] of owners.entries()) {
    const listing = await makeOpenListing(owner.id);
    const coarse = coarsePoint({ lat: 43.5 - index * 0.04, lng: -90.75 + index * 0.03 });
    listings.push(await listing.update({ coarse: { type: 'Point', coordinates: [coarse.lng, coarse.lat] }, access: { helpers: 1 } }));
  }
});

const offer = (count: number, change: Partial<TripOffer> = {}): TripOffer => ({ day, startTime: '08:00', listings: listings.slice(0, count).map(({ number }) => number), together: [], message: '', ...change });
const who = (index: number): Viewer => owners[index] ?? cast.ada;
const numberOf = (index: number): number => listings[index]?.number ?? 0;
const stopsOf = async (trip: number): Promise<TripStop[]> => {
  const { id } = await SharedTrip.findOne({ where: { number: trip }, rejectOnEmpty: true });
  const stops = await TripStop.findAll({ where: { tripId: id } });
  return listings.flatMap((listing) => stops.filter(({ listingId }) => listingId === listing.id));
};
const agree = (index: number, trip: number, version = 1) => agreeToTrip(who(index), { trip, listing: numberOf(index), version }, MARKET_AT);
const letters = async (subject: string): Promise<string[]> => (await rows<{ to: string }>(`SELECT data->>'to' AS to FROM pgboss.job WHERE name = 'send-mail' AND data->>'subject' LIKE $1 ORDER BY created_on, id`, [`${subject}%`])).map(({ to }) => to);

describe('a shared trip', () => {
  it('is not offered for a day that the sawyer has taken off, and is taken along by both sides', async () => {
    await DayOff.create({ sawyerId: sawyer.id, day });
    await expect(offerTrip(sawyer, offer(2), MARKET_AT)).rejects.toMatchObject({ kind: 'invalid', problems: [{ path: 'day' }] });
    await DayOff.destroy({ where: { sawyerId: sawyer.id } });
    const number = await offerTrip(sawyer, offer(2), MARKET_AT);
    expect(await accountExport(sawyer, MARKET_AT)).toMatchObject({ sharedTrips: [{ number, day, status: 'offered' }], sharedTripStops: [{ trip: number, as: 'sawyer' }, { trip: number, as: 'sawyer' }] });
    const theirs = (await accountExport(who(0), MARKET_AT)) as { sharedTrips: unknown[]; sharedTripStops: { trip: number; as: string; listing: number }[] };
    expect(theirs.sharedTrips).toEqual([]);
    expect(theirs.sharedTripStops.filter(({ trip }) => trip === number)).toMatchObject([{ as: 'landowner', listing: listings[0]?.number }]);
    expect(await tripsAskedOf(who(0))).toMatchObject([{ number, day, answered: false }]);
  });

  it('is offered with a bid where there is none, the travel shared to the cent', async () => {
    await placeBid(sawyer, numberOf(0), bidOf(mill, { roadMiles: 40 }), MARKET_AT);
    const trip = await offerTrip(sawyer, offer(3), MARKET_AT);
    const stops = await stopsOf(trip);
    const row = await SharedTrip.findOne({ where: { number: trip }, rejectOnEmpty: true });
    expect(stops.map(({ status }) => status)).toEqual(['asked', 'asked', 'asked']);
    expect(stops.reduce((sum, { travelCents }) => sum + travelCents, 0)).toBe(row.wholeCents);
    expect(stops.reduce((sum, { aloneTravelCents }) => sum + aloneTravelCents, 0)).toBe(row.aloneCents);
    // 40 miles, 25 free, both ways at 2.00.
    expect(stops[0]?.aloneTravelCents).toBe(6_000);
    for (const stop of stops) {
      expect(Math.abs(stop.travelCents - (row.wholeCents * stop.aloneTravelCents) / row.aloneCents)).toBeLessThan(1);
      expect(stop.aloneCostCents - stop.costCents).toBe(stop.aloneTravelCents - stop.travelCents);
      expect(stop.setUpCents).toBe(7_500);
    }
    expect(row).toMatchObject({ provenBest: true, status: 'offered' });
    expect(row.miles).toBeLessThan(row.aloneMiles);
    expect(await Bid.count({ where: { sawyerId: sawyer.id, status: 'open' } })).toBe(3);
  });

  it('binds all at once when the last has agreed: bids chosen, one outing, the day booked, holds due', async () => {
    const trip = await offerTrip(sawyer, offer(2), MARKET_AT);
    expect(await agree(0, trip)).toBe('waiting');
    expect(await Booking.count({ where: { sawyerId: sawyer.id } })).toBe(0);
    expect(await agree(1, trip)).toBe('bound');
    const bookings = await Booking.findAll({ where: { sawyerId: sawyer.id }, order: [['startsAt', 'ASC']] });
    expect(bookings.map(({ status }) => status)).toEqual(['agreed', 'agreed']);
    expect(new Set(bookings.map(({ outingId }) => outingId)).size).toBe(1);
    expect(await Outing.findByPk(bookings[0]?.outingId)).toMatchObject({ kind: 'shared-trip' });
    expect(await BookedDay.count({ where: { sawyerId: sawyer.id, day, active: true } })).toBe(2);
    expect(bookings[0]?.startsAt?.toISOString()).toBe('2026-08-04T13:00:00.000Z');
    expect(bookings[1]?.startsAt?.getTime()).toBeGreaterThan(bookings[0]?.startsAt?.getTime() ?? 0);

    for (const stop of await stopsOf(trip)) {
      const bid = await Bid.findByPk(stop.bidId, { rejectOnEmpty: true });
      expect([stop.status, bid.status, bid.expectedCents, bid.holdCents]).toEqual(['bound', 'chosen', stop.costCents, stop.holdCents]);
      const { terms } = await moneyTermsOf(stop.bookingId ?? '');
      expect(terms.shared).toEqual({ trip, travelCents: stop.travelCents, setUpCents: stop.setUpCents });
    }
    const agreement = await agreementOf(who(0), bookings.find(({ landownerId }) => landownerId === who(0).id)?.number ?? 0);
    expect(agreementClauses(agreement.terms).map(({ title }) => title)).toContain('A shared trip');
  });

  it('never binds a bid that is changed while the last one agrees', async () => {
    const trip = await offerTrip(sawyer, offer(2), MARKET_AT);
    await agree(0, trip);
    const bid = await Bid.findOne({ where: { listingId: listings[0]?.id ?? '', sawyerId: sawyer.id }, rejectOnEmpty: true });
    // The sawyer's change holds the listing first; the answer has looked at the bid already and waits for it.
    const change = new pg.Client({ connectionString: process.env['DATABASE_URL'] });
    await change.connect();
    await change.query('BEGIN');
    await change.query('SELECT 1 FROM listing WHERE id = $1 FOR UPDATE', [bid.listingId]);
    const answer = agree(1, trip).catch((error: unknown) => error);
    await vi.waitFor(async () => expect((await rows(`SELECT 1 FROM pg_stat_activity WHERE datname = current_database() AND wait_event_type = 'Lock'`)).length).toBeGreaterThan(0), { timeout: 20_000 });
    await change.query('UPDATE bid SET expected_cents = expected_cents + 50000, updated_at = $2 WHERE id = $1', [bid.id, new Date(MARKET_AT.getTime() + 60_000)]);
    await change.query('COMMIT');
    await change.end();
    expect(await answer).toMatchObject({ kind: 'conflict' });
    expect(await Booking.count({ where: { sawyerId: sawyer.id } })).toBe(0);
  });

  it('asks again with the new figure when one drops out, before anybody is bound', async () => {
    const trip = await offerTrip(sawyer, offer(3), MARKET_AT);
    const before = await stopsOf(trip);
    await agree(0, trip);
    await agree(1, trip);
    await leaveTrip(who(2), { trip, listing: numberOf(2) }, MARKET_AT);
    const after = await stopsOf(trip);
    expect(after.map(({ status }) => status)).toEqual(['asked', 'asked', 'out']);
    expect(after[0]?.travelCents).toBeGreaterThan(before[0]?.travelCents ?? 0);
    expect((await letters('New figures for the shared trip')).sort()).toEqual([who(0).email, who(1).email].sort());
    expect(await letters('One place fewer on your trip')).toEqual([sawyer.email]);
    expect((await tripsAskedOf(who(0))).find(({ number }) => number === trip)).toMatchObject({ answered: false, changed: true });
    expect((await tripsAskedOf(who(2))).some(({ number }) => number === trip)).toBe(false);
    expect(await tripPage(who(2), trip)).toMatchObject({ places: 2, stops: [{ status: 'out', can: { agree: false, leave: false } }] });
    await expect(agree(0, trip, 1)).rejects.toMatchObject({ kind: 'conflict' });
    expect(await agree(0, trip, 2)).toBe('waiting');
    expect(await agree(1, trip, 2)).toBe('bound');
    expect((await Bid.findOne({ where: { listingId: listings[2]?.id ?? '', sawyerId: sawyer.id } }))?.status).toBe('open');
  });

  it('ends when fewer than two are left, and the bids stand by themselves', async () => {
    const trip = await offerTrip(sawyer, offer(2), MARKET_AT);
    await agree(0, trip);
    await leaveTrip(who(1), { trip, listing: numberOf(1) }, MARKET_AT);
    expect(await SharedTrip.findOne({ where: { number: trip } })).toMatchObject({ status: 'ended' });
    expect((await stopsOf(trip)).map(({ status }) => status)).toEqual(['out', 'out']);
    expect(await Bid.count({ where: { sawyerId: sawyer.id, status: 'open' } })).toBe(2);
    await expect(agree(0, trip)).rejects.toMatchObject({ kind: 'conflict' });
  });

  it('binds once when all answer at the same instant', async () => {
    const trip = await offerTrip(sawyer, offer(3), MARKET_AT);
    const answers = await Promise.allSettled([0, 1, 2, 0, 1, 2].map((index) => agree(index, trip)));
    expect(answers.flatMap((one) => (one.status === 'fulfilled' ? [one.value] : [])).sort()).toEqual(['bound', 'waiting', 'waiting']);
    expect(await Booking.count({ where: { sawyerId: sawyer.id } })).toBe(3);
  });

  it('notices what happens elsewhere: a listing withdrawn, a bid changed, no answer in time', async () => {
    const trip = await offerTrip(sawyer, offer(3), MARKET_AT);
    await agree(0, trip);
    await withdrawListing(who(2), { number: numberOf(2), reason: '' }, MARKET_AT);
    // The last answer looks before it binds.
    expect(await agree(1, trip)).toBe('changed');
    expect((await stopsOf(trip)).map(({ status, outBecause }) => [status, outBecause])).toEqual([['asked', null], ['asked', null], ['out', 'the listing is no longer open']]);
    await agree(0, trip, 2);
    await reviewTrips(new Date('2026-07-28T15:00:00Z'));
    expect((await stopsOf(trip)).map(({ status }) => status)).toEqual(['out', 'out', 'out']);
    expect((await SharedTrip.findOne({ where: { number: trip }, rejectOnEmpty: true })).endedBecause).toMatch(/Too few/);
  });

  it('joins a booked day: the booking’s own agreement stands, its part goes before it', async () => {
    const number = await chooseBid(who(0), await placeBid(sawyer, numberOf(0), bidOf(mill), MARKET_AT), 1, MARKET_AT);
    await proposeDays(sawyer, { booking: number, days: [day], startTime: '08:00', note: '' }, MARKET_AT);
    const booking = await Booking.findOne({ where: { number }, rejectOnEmpty: true });
    const proposal = await DayProposal.findOne({ where: { bookingId: booking.id, status: 'open' }, rejectOnEmpty: true });
    await confirmDays(who(0), { booking: number, proposal: proposal.id }, MARKET_AT);
    await expect(offerTrip(sawyer, offer(3, { listings: [numberOf(1), numberOf(2)] }), MARKET_AT)).rejects.toMatchObject({ kind: 'conflict' });
    const trip = await offerTrip(sawyer, offer(2), MARKET_AT);
    await agree(1, trip);
    expect(await agree(0, trip)).toBe('bound');
    const joined = await Booking.findOne({ where: { listingId: listings[1]?.id ?? '' }, rejectOnEmpty: true });
    expect(joined.outingId).toBe(booking.outingId);
    const [first] = await stopsOf(trip);
    expect((await moneyTermsOf(booking.id)).terms.shared).toEqual({ trip, travelCents: first?.travelCents, setUpCents: 7_500 });
    // Once bound, the part stands whatever the other does.
    await cancelBooking(who(1), { booking: joined.number, reason: 'No need any more' }, MARKET_AT);
    expect((await moneyTermsOf(booking.id)).terms.shared?.travelCents).toBe(first?.travelCents);
    expect(await BookedDay.count({ where: { sawyerId: sawyer.id, day, active: true } })).toBe(1);
  });

  it('is refused on a day taken meanwhile, and nothing of it is done', async () => {
    const trip = await offerTrip(sawyer, offer(2), MARKET_AT);
    await agree(0, trip);
    const other = await Outing.create({ sawyerId: sawyer.id, kind: 'booking', createdAt: MARKET_AT });
    const [lone] = await Booking.findAll({ limit: 1 });
    await BookedDay.update({ active: false }, { where: { bookingId: lone?.id ?? '' } });
    await BookedDay.create({ sawyerId: sawyer.id, day, outingId: other.id, bookingId: lone?.id ?? '' });
    await expect(agree(1, trip)).rejects.toMatchObject({ kind: 'conflict' });
    expect((await stopsOf(trip)).map(({ status }) => status)).toEqual(['agreed', 'asked']);
    expect(await Booking.count({ where: { sawyerId: sawyer.id } })).toBe(0);
  });

  it('shares the set-up only of logs decked together on one cell', async () => {
    const coarse = listings[0]?.coarse;
    if (coarse) await listings[1]?.update({ coarse });
    const cell = coarse?.coordinates.map((degrees) => degrees.toFixed(5)).join('_') ?? '';
    const apart = await stopsOf(await offerTrip(sawyer, offer(2), MARKET_AT));
    expect(apart.map(({ setUpCents }) => setUpCents)).toEqual([7_500, 7_500]);
    await execute(`UPDATE trip_stop SET status = 'out'`);
    await execute(`UPDATE shared_trip SET status = 'ended'`);
    const together = await stopsOf(await offerTrip(sawyer, offer(2, { together: [cell] }), MARKET_AT));
    expect(together.map(({ setUpCents }) => setUpCents)).toEqual([3_750, 3_750]);
  });

  it('is each one’s own to answer, the sawyer’s to take back, and one at a time for a bid', async () => {
    const trip = await offerTrip(sawyer, offer(2), MARKET_AT);
    await expect(offerTrip(sawyer, offer(2, { day: '2026-08-05' }), MARKET_AT)).rejects.toMatchObject({ kind: 'conflict' });
    await expect(agreeToTrip(who(0), { trip, listing: numberOf(1), version: 1 }, MARKET_AT)).rejects.toMatchObject({ kind: 'notFound' });
    await expect(leaveTrip(cast.ada, { trip, listing: numberOf(0) }, MARKET_AT)).rejects.toMatchObject({ kind: 'notFound' });
    await expect(withdrawTrip(cast.bram, trip, MARKET_AT)).rejects.toMatchObject({ kind: 'notFound' });
    await expect(offerTrip(cast.ada, offer(2), MARKET_AT)).rejects.toMatchObject({ kind: 'forbidden' });
    await withdrawTrip(sawyer, trip, MARKET_AT);
    await expect(agree(0, trip)).rejects.toMatchObject({ kind: 'conflict' });
    for (const [change, path] of [[{ day: '2026-07-21' }, 'day'], [{ day: 'soon' }, 'day'], [{ listings: [numberOf(0)] }, 'listings']] as const) {
      await expect(offerTrip(sawyer, offer(2, change), MARKET_AT)).rejects.toMatchObject({ kind: 'invalid', problems: [{ path }] });
    }
  });
});
