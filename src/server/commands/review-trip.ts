import { paths } from '~/domain/paths.ts';
import { tripStates, tripStopStates } from '~/domain/states/trip.ts';
import { addHours, dayStart, formatDayWithYear } from '~/domain/time.ts';
import type { RateCard } from '~/domain/trade/rate-card.ts';
import { tripChanged, tripEnded, tripSmaller } from '~/emails/trip-letters.ts';
import { readerOf } from '../bidders.ts';
import { inTransaction, rows } from '../db.ts';
import { enqueue } from '../jobs/queue.ts';
import { Booking } from '../models/booking.ts';
import { Listing } from '../models/listing.ts';
import { Bid } from '../models/sawyer.ts';
import { SharedTrip, TripStop } from '../models/trip.ts';
import { linkTo } from '../parties.ts';
import { bookedOn } from '../queries/plan-trip.ts';
import { transition } from '../transition.ts';
import { type StopBasis, tripColumns, tripFigures } from '../trip-work.ts';
import { system, type Actor } from '../viewer.ts';

const clock = system('trip check');

/** The stops that still count, in the order they are visited, locked. */
export const liveStops = (trip: SharedTrip): Promise<TripStop[]> => TripStop.findAll({ where: { tripId: trip.id, status: ['asked', 'agreed'] }, order: [['position', 'ASC']], lock: true });

const clockTime = (trip: SharedTrip): string => trip.startTime.slice(0, 5);
/** When the first stop is reached. */
export const tripStart = (trip: SharedTrip): Date => dayStart(trip.day, trip.timeZone, clockTime(trip));

/** The rows a stop stands on. */
export async function basisOfStop(stop: TripStop): Promise<StopBasis> {
  const bid = await Bid.findByPk(stop.bidId, { rejectOnEmpty: true });
  const listing = await Listing.findByPk(stop.listingId, { rejectOnEmpty: true });
  return { bid, listing, booking: stop.bookingId === null ? null : await Booking.findByPk(stop.bookingId, { rejectOnEmpty: true }), landing: stop.landing };
}

/** Why a stop can no longer be part of the trip; null while it can. */
async function goneBecause(trip: SharedTrip, stop: TripStop, at: Date): Promise<string | null> {
  const { bid, listing, booking } = await basisOfStop(stop);
  if (booking) return (await bookedOn(trip.sawyerId, trip.day)).some(({ id }) => id === booking.id) ? null : 'the booking is no longer on that day';
  if (listing.status !== 'open' || listing.hiddenAt !== null) return 'the listing is no longer open';
  if (bid.status !== 'open' || bid.listingRevision !== listing.revision || bid.updatedAt > stop.bidSeenAt) return 'the bid or the listing has changed';
  return stop.status === 'asked' && trip.answerBy <= at ? 'no answer came in time' : null;
}

/** Ends the trip: every stop that is left goes back to standing alone, and all are told. */
export async function endTrip(by: Actor, trip: SharedTrip, why: string, at: Date): Promise<void> {
  await transition(tripStates, 'end', trip, by, at, { endedBecause: why, updatedAt: at });
  const link = linkTo(paths.trip(trip.number));
  for (const stop of await liveStops(trip)) {
    await transition(tripStopStates, 'leave', stop, by, at, { outBecause: 'the trip ended' });
    await enqueue('send-mail', tripEnded(await readerOf(stop.landownerId), why, link));
  }
  if (by.id !== trip.sawyerId) await enqueue('send-mail', tripEnded(await readerOf(trip.sawyerId), why, link));
}

/**
 * Works the trip out anew for the stops that are left. Whose figure has changed is asked again and told the new one; with fewer than
 * two there is nothing to share and the trip ends. Call it inside the transaction that holds the trip's lock.
 */
export async function workOutAgain(by: Actor, trip: SharedTrip, at: Date): Promise<void> {
  const stops = await liveStops(trip);
  const start = tripStart(trip);
  if (stops.length < 2) return endTrip(by, trip, 'Too few are left to share the travel.', at);
  if (start <= addHours(at, 12)) return endTrip(by, trip, 'The day has come before everybody agreed.', at);
  const bases: StopBasis[] = [];
  for (const stop of stops) bases.push(await basisOfStop(stop));
  const { plan, stops: figures } = await tripFigures(trip.card as RateCard, bases, trip.number);
  // At least two days to look at new figures, but an answer half a day before the start at the latest.
  const answerBy = new Date(Math.min(Math.max(trip.answerBy.getTime(), addHours(at, 48).getTime()), addHours(start, -12).getTime()));
  await trip.update({ ...tripColumns(plan), version: trip.version + 1, answerBy, updatedAt: at });
  await enqueue('send-mail', tripSmaller(await readerOf(trip.sawyerId), { places: stops.length, miles: trip.miles, wholeCents: trip.wholeCents, aloneCents: trip.aloneCents }, formatDayWithYear(trip.day), linkTo(paths.trip(trip.number))));
  for (const stop of stops) {
    const now = figures.find(({ listingId }) => listingId === stop.listingId);
    if (!now) continue;
    const changed = now.travelCents !== stop.travelCents || now.setUpCents !== stop.setUpCents || now.costCents !== stop.costCents;
    if (changed && stop.status === 'agreed') await transition(tripStopStates, 'askAgain', stop, by, at, { ...now, agreedVersion: null, answeredAt: null });
    else await stop.update({ ...now });
    if (changed) await enqueue('send-mail', tripChanged(await readerOf(stop.landownerId), bases.find(({ listing }) => listing.id === stop.listingId)?.listing.title ?? '', now, formatDayWithYear(trip.day), linkTo(paths.trip(trip.number))));
  }
}

/**
 * Looks at an offered trip: who can no longer come leaves it, and the others get new figures.
 * @returns whether anything changed. Call it inside the transaction that holds the trip's lock.
 */
export async function reviewTrip(trip: SharedTrip, at: Date): Promise<boolean> {
  let gone = false;
  for (const stop of await liveStops(trip)) {
    const because = await goneBecause(trip, stop, at);
    if (because === null) continue;
    await transition(tripStopStates, 'leave', stop, clock, at, { outBecause: because });
    gone = true;
  }
  if (gone) await workOutAgain(clock, trip, at);
  return gone;
}

/** Sweeps the trips that are being asked about: choices, changes and silence elsewhere reach their trips within a minute. */
export async function reviewTrips(at: Date): Promise<void> {
  for (const { id } of await rows<{ id: string }>(`SELECT id FROM shared_trip WHERE status = 'offered' ORDER BY answer_by LIMIT 500`)) {
    await inTransaction(async () => {
      const trip = await SharedTrip.findByPk(id, { lock: true, rejectOnEmpty: true });
      if (trip.status === 'offered') await reviewTrip(trip, at);
    });
  }
}
