import { paths } from '~/domain/paths.ts';
import { bidStates } from '~/domain/states/bid.ts';
import { tripStates, tripStopStates } from '~/domain/states/trip.ts';
import { formatDayWithYear } from '~/domain/time.ts';
import { tripAgreed } from '~/emails/trip-letters.ts';
import { authorize, rolesOnTrip, rolesOnTripStop } from '../authorize.ts';
import { readerOf } from '../bidders.ts';
import { bidFigures } from '../bid-work.ts';
import { inTransaction, lockFor, refusedBy } from '../db.ts';
import { conflict, notFound } from '../errors.ts';
import { sendInvitations } from '../invitations.ts';
import { enqueue } from '../jobs/queue.ts';
import { Account } from '../models/account.ts';
import { BookedDay, Booking, DayProposal, Outing } from '../models/booking.ts';
import { Listing } from '../models/listing.ts';
import { Bid } from '../models/sawyer.ts';
import { SharedTrip, TripStop } from '../models/trip.ts';
import { linkTo } from '../parties.ts';
import { record, transition } from '../transition.ts';
import { estimateOnTrip } from '../trip-work.ts';
import type { Viewer } from '../viewer.ts';
import { settleChoice } from './choose-bid.ts';
import { agreeDays } from './confirm-days.ts';
import { endTrip, liveStops, reviewTrip, tripStart, workOutAgain } from './review-trip.ts';

/** What came of agreeing: others have still to answer, all have and it binds, or somebody had left and the figures are new. */
export type TripAnswer = 'waiting' | 'bound' | 'changed';

async function lockTrip(number: number): Promise<SharedTrip> {
  const trip = Number.isSafeInteger(number) ? await SharedTrip.findOne({ where: { number }, lock: true }) : null;
  if (!trip) throw notFound('trip');
  return trip;
}

async function ownStop(by: Viewer, trip: SharedTrip, listing: number): Promise<TripStop> {
  const of = await Listing.findOne({ where: { number: listing }, attributes: ['id'] });
  const stop = of && (await TripStop.findOne({ where: { tripId: trip.id, listingId: of.id, landownerId: by.id }, lock: true }));
  if (!stop) throw notFound('trip');
  return stop;
}

/** The booking of a stop, chosen here on the trip's terms unless it was booked before. */
async function bookStop(by: Viewer, trip: SharedTrip, stop: TripStop, outing: Outing, at: Date): Promise<string> {
  if (stop.bookingId !== null) return stop.bookingId;
  const listing = await Listing.findByPk(stop.listingId, { lock: true, rejectOnEmpty: true });
  const bid = await Bid.findByPk(stop.bidId, { lock: true, rejectOnEmpty: true });
  // Looked at again under their locks: what was agreed to is the bid that was seen.
  if (listing.status !== 'open' || bid.status !== 'open' || bid.listingRevision !== listing.revision || bid.updatedAt > stop.bidSeenAt) throw conflict('A bid of this trip or its listing has just changed. Load the page again.');
  const owner = await Account.findByPk(stop.landownerId, { rejectOnEmpty: true });
  const worked = await estimateOnTrip(bid, { trip: trip.number ?? 0, travelCents: stop.travelCents, setUpCents: stop.setUpCents });
  await transition(bidStates, 'change', bid, by, at, { ...bidFigures(worked), estimate: worked, updatedAt: at }, { data: { trip: trip.number } });
  const booking = await settleChoice(by, owner, bid, listing, at, outing.id);
  const startsAt = new Date(tripStart(trip).getTime() + stop.arrivesMin * 60_000);
  const clock = new Intl.DateTimeFormat('en-GB', { timeZone: booking.timeZone, hour: '2-digit', minute: '2-digit' }).format(startsAt);
  await DayProposal.create({ bookingId: booking.id, proposedBy: trip.sawyerId, days: [trip.day], startTime: clock, note: `Shared trip ${trip.number}`, status: 'confirmed', createdAt: at, decidedAt: at });
  await BookedDay.create({ sawyerId: trip.sawyerId, day: trip.day, outingId: outing.id, bookingId: booking.id });
  await agreeDays(by, booking, startsAt, at);
  await sendInvitations(booking, []);
  return booking.id;
}

/** All have agreed: one outing, every bid chosen on the trip's terms, every booking on the day, in one step. */
async function bind(by: Viewer, trip: SharedTrip, stops: readonly TripStop[], at: Date): Promise<void> {
  const bookedBefore = stops.find(({ bookingId }) => bookingId !== null)?.bookingId;
  const outingId = bookedBefore ? (await Booking.findByPk(bookedBefore, { lock: true, rejectOnEmpty: true })).outingId : null;
  const outing = outingId ? await Outing.findByPk(outingId, { rejectOnEmpty: true }) : await Outing.create({ sawyerId: trip.sawyerId, kind: 'shared-trip', createdAt: at });
  await outing.update({ kind: 'shared-trip' });
  // Listings are locked in the order of their ids, as wherever several are.
  for (const stop of [...stops].sort((a, b) => (a.listingId < b.listingId ? -1 : 1))) {
    await transition(tripStopStates, 'bind', stop, by, at, { bookingId: await bookStop(by, trip, stop, outing, at) });
  }
  await transition(tripStates, 'agree', trip, by, at, { outingId: outing.id, updatedAt: at });
  await enqueue('send-mail', tripAgreed(await readerOf(trip.sawyerId), stops.length, formatDayWithYear(trip.day), linkTo(paths.sawyerDay(trip.day))));
}

/**
 * A landowner agrees to the figures they saw. The last one's answer binds all at once: bids are chosen, the day is booked, holds fall due.
 * @param version of the figures the landowner saw; others are refused
 * @throws Refusal `conflict` when the figures are newer, or the sawyer has been booked on the day meanwhile
 */
export async function agreeToTrip(by: Viewer, input: { readonly trip: number; readonly listing: number; readonly version: number }, at: Date): Promise<TripAnswer> {
  try {
    return await inTransaction(async () => {
      const trip = await lockTrip(input.trip);
      await lockFor('calendar', trip.sawyerId);
      const stop = await ownStop(by, trip, input.listing);
      authorize(by, 'tripStop', 'agree', rolesOnTripStop(by, stop), stop.status);
      if (trip.status === 'offered' && (await reviewTrip(trip, at))) return 'changed';
      if (trip.status !== 'offered') throw conflict('The trip is no longer being asked about.');
      if (trip.version !== input.version) throw conflict('Somebody has left the trip since this page was shown, so the figures are new. Look at them before you agree.');
      await transition(tripStopStates, 'agree', stop, by, at, { agreedVersion: trip.version, answeredAt: at });
      const stops = await liveStops(trip);
      if (stops.some(({ status }) => status !== 'agreed')) return 'waiting';
      await bind(by, trip, stops, at);
      return 'bound';
    });
  } catch (error) {
    if (refusedBy(error, 'one_outing_a_day')) throw conflict('The sawyer has been booked on that day meanwhile. The trip cannot be made.');
    throw error;
  }
}

/** A landowner leaves the trip, before it binds. The bid or booking stands by itself; the others get new figures. */
export async function leaveTrip(by: Viewer, input: { readonly trip: number; readonly listing: number }, at: Date): Promise<void> {
  await inTransaction(async () => {
    const trip = await lockTrip(input.trip);
    const stop = await ownStop(by, trip, input.listing);
    authorize(by, 'tripStop', 'leave', rolesOnTripStop(by, stop), stop.status);
    await transition(tripStopStates, 'leave', stop, by, at, { answeredAt: at, outBecause: 'the landowner does not want to share' });
    await workOutAgain(by, trip, at);
  });
}

/** The sawyer takes an offered trip back. */
export async function withdrawTrip(by: Viewer, number: number, at: Date): Promise<void> {
  await inTransaction(async () => {
    const trip = await lockTrip(number);
    if (trip.sawyerId !== by.id) throw notFound('trip');
    authorize(by, 'trip', 'withdraw', rolesOnTrip(by, { sawyerId: trip.sawyerId, landownerIds: [] }), trip.status);
    await endTrip(by, trip, `${by.name} has taken the trip back.`, at);
    await record(by, 'withdrawTrip', 'shared_trip', trip.id, at);
  });
}
