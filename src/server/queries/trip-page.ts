import { may } from '~/domain/permissions.ts';
import { dayAt, type Day } from '~/domain/time.ts';
import { authorize, rolesOnTrip, rolesOnTripStop } from '../authorize.ts';
import { oneRow, rows } from '../db.ts';
import { notFound } from '../errors.ts';
import { Listing } from '../models/listing.ts';
import { Booking } from '../models/booking.ts';
import { SharedTrip, TripStop } from '../models/trip.ts';
import { partyOf } from '../parties.ts';
import { baseRoles, type Viewer } from '../viewer.ts';

/** A stop as its landowner or the sawyer may see it. */
export interface TripStopView {
  readonly listing: number;
  readonly title: string;
  readonly town: string;
  readonly booking: number | null;
  /** Booked before the trip. */
  readonly bookedBefore: boolean;
  readonly status: TripStop['status'];
  readonly outBecause: string | null;
  readonly position: number;
  readonly legMiles: number;
  readonly arrivesAt: string;
  readonly leavesAt: string;
  readonly aloneTravelCents: number;
  readonly travelCents: number;
  readonly setUpCents: number;
  readonly decked: boolean;
  readonly aloneCostCents: number;
  readonly costCents: number;
  readonly holdCents: number;
  readonly can: { readonly agree: boolean; readonly leave: boolean };
}

export interface TripPage {
  readonly number: number;
  readonly status: SharedTrip['status'];
  readonly version: number;
  readonly day: string;
  readonly timeZone: string;
  readonly sawyer: string;
  readonly side: 'sawyer' | 'landowner' | 'moderator';
  readonly answerBy: Date;
  readonly endedBecause: string | null;
  readonly miles: number;
  readonly aloneMiles: number;
  readonly provenBest: boolean;
  readonly wholeCents: number;
  readonly aloneCents: number;
  /** All for the sawyer and moderators; a landowner sees only their own. */
  readonly stops: readonly TripStopView[];
  /** Places on the trip, and how many have agreed: all that a landowner learns of the others. */
  readonly places: number;
  readonly agreed: number;
  readonly can: { readonly withdraw: boolean };
}

/** Wall-clock time so many minutes after a start such as `08:00`. */
const clockAfter = (start: string, minutes: number): string => {
  const [hours = 0, mins = 0] = start.split(':').map(Number);
  const total = hours * 60 + mins + minutes;
  return `${((Math.floor(total / 60) + 11) % 12) + 1}:${String(total % 60).padStart(2, '0')} ${Math.floor(total / 60) % 24 < 12 ? 'am' : 'pm'}`;
};

async function stopView(viewer: Viewer, trip: SharedTrip, stop: TripStop, all: readonly TripStop[]): Promise<TripStopView> {
  const listing = await Listing.findByPk(stop.listingId, { rejectOnEmpty: true });
  const booking = stop.bookingId === null ? null : await Booking.findByPk(stop.bookingId, { rejectOnEmpty: true });
  const roles = rolesOnTripStop(viewer, stop);
  const open = trip.status === 'offered';
  const { position, legMiles, aloneTravelCents, travelCents, setUpCents, aloneCostCents, costCents, holdCents, status, outBecause } = stop;
  return {
    listing: listing.number, title: listing.title ?? '', town: listing.town ?? '', booking: booking?.number ?? null, bookedBefore: booking !== null && booking.createdAt <= trip.createdAt,
    status, outBecause, position, legMiles, aloneTravelCents, travelCents, setUpCents, aloneCostCents, costCents, holdCents,
    arrivesAt: clockAfter(trip.startTime, stop.arrivesMin), leavesAt: clockAfter(trip.startTime, stop.leavesMin),
    decked: all.some((other) => other.id !== stop.id && other.status !== 'out' && other.landing === stop.landing),
    can: { agree: open && may('tripStop', 'agree', roles, status), leave: open && may('tripStop', 'leave', roles, status) },
  };
}

/** A shared trip: for the sawyer with every stop, for a landowner with their own alone. @throws Refusal `notFound` for others */
export async function tripPage(viewer: Viewer, number: number): Promise<TripPage> {
  const trip = Number.isSafeInteger(number) ? await SharedTrip.findOne({ where: { number } }) : null;
  if (!trip) throw notFound('trip');
  const all = await TripStop.findAll({ where: { tripId: trip.id }, order: [['position', 'ASC'], ['id', 'ASC']] });
  const roles = rolesOnTrip(viewer, { sawyerId: trip.sawyerId, landownerIds: all.map(({ landownerId }) => landownerId) });
  if (!may('trip', 'see', roles, trip.status)) throw notFound('trip');
  const side = viewer.id === trip.sawyerId ? 'sawyer' : roles.has('landowner') ? 'landowner' : 'moderator';
  const stops: TripStopView[] = [];
  for (const stop of all) if (side !== 'landowner' || stop.landownerId === viewer.id) stops.push(await stopView(viewer, trip, stop, all));
  const { status, version, day, timeZone, answerBy, endedBecause, miles, aloneMiles, provenBest, wholeCents, aloneCents } = trip;
  const staying = all.filter((stop) => stop.status !== 'out');
  return {
    number, status, version, day, timeZone, answerBy, endedBecause, miles, aloneMiles, provenBest, wholeCents, aloneCents, side, stops,
    sawyer: (await partyOf(trip.sawyerId)).name, places: staying.length, agreed: staying.filter((stop) => stop.status !== 'asked').length,
    can: { withdraw: may('trip', 'withdraw', roles, trip.status) },
  };
}

/** Today on the sawyer's own clock. */
export async function dayOfSawyer(viewer: Viewer, at: Date): Promise<Day> {
  const profile = await oneRow<{ zone: string }>('SELECT time_zone AS zone FROM sawyer_profile WHERE account_id = $1', [viewer.id]);
  return dayAt(at, profile?.zone ?? 'UTC');
}

export interface TripRow {
  readonly number: number;
  readonly day: string;
  readonly status: SharedTrip['status'];
  readonly places: number;
  readonly agreed: number;
  readonly savedMiles: number;
  readonly savedCents: number;
}

/** The sawyer's trips, newest first. Leans on `shared_trip_of_sawyer`. @throws Refusal when the viewer does not saw */
export async function tripsOf(viewer: Viewer | null): Promise<readonly TripRow[]> {
  authorize(viewer, 'sawyer', 'planTrips', baseRoles(viewer));
  return rows<TripRow>(
    `SELECT t.number, t.day::text AS day, t.status, t.alone_miles - t.miles AS "savedMiles", t.alone_cents - t.whole_cents AS "savedCents",
       (SELECT count(*)::int FROM trip_stop s WHERE s.trip_id = t.id AND s.status <> 'out') AS places,
       (SELECT count(*)::int FROM trip_stop s WHERE s.trip_id = t.id AND s.status IN ('agreed', 'bound')) AS agreed
     FROM shared_trip t WHERE t.sawyer_id = $1 ORDER BY t.created_at DESC LIMIT 100`,
    [viewer.id],
  );
}

export interface TripAsked {
  readonly number: number;
  readonly title: string;
  readonly day: string;
  readonly answered: boolean;
  /** Somebody has left since it was offered. */
  readonly changed: boolean;
}

/** Offered trips that this landowner is asked about. */
export const tripsAskedOf = (viewer: Viewer): Promise<TripAsked[]> =>
  rows<TripAsked>(
    `SELECT t.number, l.title, t.day::text AS day, s.status = 'agreed' AS answered, t.version > 1 AS changed FROM trip_stop s JOIN shared_trip t ON t.id = s.trip_id JOIN listing l ON l.id = s.listing_id
     WHERE s.landowner_id = $1 AND s.status IN ('asked', 'agreed') AND t.status = 'offered' ORDER BY t.day, t.number`,
    [viewer.id],
  );
