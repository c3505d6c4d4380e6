import { paths } from '~/domain/paths.ts';
import { checkMillingDay, dayStart, addHours, formatDayWithYear, type Day } from '~/domain/time.ts';
import type { RateCard } from '~/domain/trade/rate-card.ts';
import { LONGEST_DAY_HOURS, MOST_STOPS } from '~/domain/trade/trip-plan.ts';
import { hourWords } from '~/domain/trade/job-worth.ts';
import { tripOffered } from '~/emails/trip-letters.ts';
import { authorize } from '../authorize.ts';
import { readerOf } from '../bidders.ts';
import { currentCard, refuseDaysOff } from '../bid-work.ts';
import { inTransaction, lockFor, refusedBy } from '../db.ts';
import { conflict, invalid, notFound } from '../errors.ts';
import { countTry } from '../http/limits.ts';
import { enqueue } from '../jobs/queue.ts';
import { Booking } from '../models/booking.ts';
import { Listing } from '../models/listing.ts';
import { Bid, SawyerProfile } from '../models/sawyer.ts';
import { SharedTrip, TripStop } from '../models/trip.ts';
import { linkTo } from '../parties.ts';
import { jobsForSawyer, sawyerAtWork } from '../queries/jobs-for-sawyer.ts';
import { pointOf } from '../queries/listing-page.ts';
import { bookedOn } from '../queries/plan-trip.ts';
import { record } from '../transition.ts';
import { cellOf, type StopBasis, tripColumns, tripFigures } from '../trip-work.ts';
import { baseRoles, type Viewer } from '../viewer.ts';
import { placeBid } from './place-bid.ts';

export interface TripOffer {
  readonly day: Day;
  /** `HH:MM`, arrival at the first stop. */
  readonly startTime: string;
  /** Public numbers of listings. */
  readonly listings: readonly number[];
  /** Cells whose logs are decked together at one landing. */
  readonly together: readonly string[];
  readonly message: string;
}

/** Landowners have this long to answer, hours, but never past a day before the start. */
const ANSWER_HOURS = 72;
const LEAST_AHEAD_HOURS = 36;

/** The sawyer's live bid on a listing; where there is none, one by the rate card as it stands. */
async function liveBid(by: Viewer, listing: Listing, offer: TripOffer, at: Date): Promise<Bid> {
  const live = await Bid.findOne({ where: { listingId: listing.id, sawyerId: by.id, status: ['open', 'toConfirm'] } });
  if (live?.status === 'toConfirm') throw conflict(`${listing.title ?? 'A listing'} was changed since you bid. Confirm that bid first.`);
  if (live) return live;
  const sawyer = await sawyerAtWork(by.id);
  if (!sawyer || !listing.coarse) throw invalid([{ path: '', message: 'Fill in your mill first.' }]);
  const helpers = (listing.access as { helpers?: number } | null)?.helpers ?? 0;
  const job = (await jobsForSawyer(sawyer, [{ id: listing.id, coarse: pointOf(listing.coarse), helpers }])).get(listing.id);
  if (!job?.fit.fits || !job.worth || !sawyer.card) throw conflict(`${listing.title ?? 'A listing'} does not fit your mill, or your base or rates are missing. Bid on it by itself first.`);
  const form = {
    millId: job.mill.id, listingRevision: listing.revision, offBearer: helpers > 0 ? ('landowner-provides' as const) : ('sawyer-brings' as const), waste: 'left' as const, roadMiles: job.worth.roadMiles,
    metalCap: sawyer.card.metal.capCents, stickers: null, deliveryLoads: null, ownBf: null, ownReason: '', days: [offer.day], message: offer.message,
  };
  return Bid.findByPk(await placeBid(by, listing.number, form, at), { rejectOnEmpty: true });
}

async function basisOf(by: Viewer, number: number, offer: TripOffer, booked: readonly Booking[], at: Date): Promise<StopBasis> {
  const listing = await Listing.findOne({ where: { number } });
  if (!listing) throw notFound('listing');
  const booking = booked.find(({ listingId }) => listingId === listing.id) ?? null;
  const bid = booking ? await Bid.findByPk(booking.bidId, { rejectOnEmpty: true }) : await liveBid(by, listing, offer, at);
  const cell = cellOf(listing);
  return { bid, listing, booking, landing: offer.together.includes(cell) ? cell : listing.id };
}

function checkOffer(offer: TripOffer, zone: string, at: Date): void {
  const day = checkMillingDay(offer.day, zone, at, offer.startTime);
  if (!day.ok) throw invalid(day.problems);
  if (dayStart(offer.day, zone, offer.startTime) < addHours(at, LEAST_AHEAD_HOURS)) throw invalid([{ path: 'day', message: `Everybody has to answer first: choose a day at least ${LEAST_AHEAD_HOURS} hours ahead.` }]);
  if (offer.listings.length < 2) throw invalid([{ path: 'listings', message: 'Choose at least two places.' }]);
  if (offer.listings.length > MOST_STOPS) throw invalid([{ path: 'listings', message: `At most ${MOST_STOPS} places in a day.` }]);
}

/**
 * Offers one outing to the landowners of several listings: each is asked by letter, with their own figures alone. Where the sawyer
 * has no bid yet, one is placed by the rate card. What is booked on the day is part of the trip.
 * @returns the trip's number
 * @throws Refusal `invalid` for a day that cannot be or does not hold the work, `conflict` when a bid is on another trip being asked about
 */
export async function offerTrip(by: Viewer, asked: TripOffer, at: Date): Promise<number> {
  authorize(by, 'sawyer', 'planTrips', baseRoles(by));
  const zone = (await SawyerProfile.findByPk(by.id))?.timeZone ?? 'America/Chicago';
  const offer = { ...asked, listings: [...new Set(asked.listings)].sort((a, b) => a - b) };
  checkOffer(offer, zone, at);
  await countTry('trip offered', by.id);
  try {
    return await inTransaction(async () => {
      await lockFor('calendar', by.id);
      await refuseDaysOff(by.id, [offer.day], 'day');
      const card: RateCard | null = await currentCard(by.id);
      if (!card) throw invalid([{ path: '', message: 'Fill in your rate card first.' }]);
      const booked = await bookedOn(by.id, offer.day);
      const bases: StopBasis[] = [];
      for (const number of offer.listings) bases.push(await basisOf(by, number, offer, booked, at));
      const left = booked.find(({ listingId }) => !bases.some(({ listing }) => listing.id === listingId));
      if (left) throw conflict(`Booking ${left.number} is on that day already: it has to be one of the places.`);
      return await writeTrip(by, offer, zone, card, bases, at);
    });
  } catch (error) {
    if (refusedBy(error, 'one_live_trip_per_bid')) throw conflict('One of these bids is on another trip that is being asked about. Take that one back first.');
    throw error;
  }
}

async function writeTrip(by: Viewer, offer: TripOffer, zone: string, card: RateCard, bases: readonly StopBasis[], at: Date): Promise<number> {
  const start = dayStart(offer.day, zone, offer.startTime);
  const answerBy = new Date(Math.min(addHours(at, ANSWER_HOURS).getTime(), addHours(start, -24).getTime()));
  const before = await tripFigures(card, bases, 0);
  const hours = before.plan.roadHours + before.plan.workHours;
  if (hours > LONGEST_DAY_HOURS) throw invalid([{ path: 'listings', message: `This comes to about ${hourWords(hours)} with the road, and a day holds ${LONGEST_DAY_HOURS}. Leave one out.` }]);
  if (before.stops.every((stop) => stop.costCents >= stop.aloneCostCents)) throw invalid([{ path: 'listings', message: 'Nothing would be saved for anybody: bid on each by itself.' }]);
  const trip = await SharedTrip.create({ sawyerId: by.id, day: offer.day, startTime: offer.startTime, timeZone: zone, card, ...tripColumns(before.plan), answerBy, createdAt: at, updatedAt: at });
  await trip.reload();
  for (const figures of before.stops) {
    const basis = bases.find(({ listing }) => listing.id === figures.listingId);
    if (!basis) continue;
    await TripStop.create({ ...figures, tripId: trip.id, bidId: basis.bid.id, bookingId: basis.booking?.id ?? null, landownerId: basis.listing.ownerId, bidSeenAt: basis.bid.updatedAt });
    await enqueue('send-mail', tripOffered(await readerOf(basis.listing.ownerId), by.name, basis.listing.title ?? '', figures, bases.length - 1, formatDayWithYear(offer.day), linkTo(paths.trip(trip.number))));
  }
  await record(by, 'offerTrip', 'shared_trip', trip.id, at, { data: { number: trip.number, listings: offer.listings } });
  return trip.number;
}
