import { times } from '~/domain/money.ts';
import { type BidMill, estimateBid } from '~/domain/trade/bid-estimate.ts';
import { chargedMiles } from '~/domain/trade/price.ts';
import type { RateCard, SharedTerms } from '~/domain/trade/rate-card.ts';
import { planTrip, type PlannedStop, type TripPlan, type TripStop as StopToPlan } from '~/domain/trade/trip-plan.ts';
import { type FrozenEstimate, listedLogs } from './bid-work.ts';
import type { Booking } from './models/booking.ts';
import type { Listing } from './models/listing.ts';
import type { Bid } from './models/sawyer.ts';
import { pointOf } from './queries/listing-page.ts';

/** A stop with the rows it stands on. */
export interface StopBasis {
  readonly bid: Bid;
  readonly listing: Listing;
  /** Booked before the trip was thought of. */
  readonly booking: Booking | null;
  readonly landing: string;
}

/** Stops on one cell of the grid may be decked together; the cell's name, for a form. */
export const cellOf = (listing: Listing): string => (listing.coarse ? listing.coarse.coordinates.map((degrees) => degrees.toFixed(5)).join('_') : listing.id);

/** A stop as it is planned: from what its bid froze. */
export function stopToPlan({ bid, listing, landing }: StopBasis): StopToPlan {
  const { terms, estimate } = bid.estimate as FrozenEstimate;
  const mill = bid.mill as BidMill;
  if (!listing.coarse) throw new Error(`listing ${listing.number} has no place`);
  return {
    id: listing.id, point: pointOf(listing.coarse), roadMiles: Math.round(terms.roadMiles), sawingHours: estimate.lumber.bf.expected / mill.paceBfPerHour, boardFeet: Math.round(estimate.lumber.bf.expected),
    aloneTravelCents: times(chargedMiles(terms.card, terms.roadMiles), terms.card.travel.perMileCents), landing,
  };
}

/** A bid as it would be on the trip: the same logs, mill, card and lumber, with the landowner's part of set-up and travel. */
export async function estimateOnTrip(bid: Bid, shared: SharedTerms): Promise<FrozenEstimate> {
  const { terms, options, estimate } = bid.estimate as FrozenEstimate;
  const onTrip = { ...terms, shared };
  return { terms: onTrip, options, estimate: estimateBid({ logs: await listedLogs(bid.listingId), mill: bid.mill as BidMill, terms: onTrip, options, lumber: estimate.lumber }) };
}

/** The set-up of a stop: its own card's, or its part where logs are decked together, never more than its own. */
function setUpOf(basis: StopBasis, planned: PlannedStop, bases: readonly StopBasis[]): number {
  const own = (basis.bid.estimate as FrozenEstimate).terms.card.setUpPerLanding;
  return bases.some((other) => other !== basis && other.landing === basis.landing) ? Math.min(own, planned.setUpCents) : own;
}

/** The columns of a stop that follow from the plan. */
export interface StopFigures {
  readonly listingId: string;
  readonly position: number;
  readonly landing: string;
  readonly legMiles: number;
  readonly arrivesMin: number;
  readonly leavesMin: number;
  readonly aloneTravelCents: number;
  readonly travelCents: number;
  readonly setUpCents: number;
  readonly aloneCostCents: number;
  readonly costCents: number;
  readonly holdCents: number;
}

/** Plans the trip and works out every stop's figures, in the order they are visited. */
export async function tripFigures(card: RateCard, bases: readonly StopBasis[], tripNumber: number): Promise<{ readonly plan: TripPlan; readonly stops: readonly StopFigures[] }> {
  const toPlan = bases.map(stopToPlan);
  const plan = planTrip(card, toPlan);
  const stops: StopFigures[] = [];
  for (const [index, planned] of plan.stops.entries()) {
    const basis = bases.find(({ listing }) => listing.id === planned.id);
    const alone = toPlan.find(({ id }) => id === planned.id);
    if (!basis || !alone) throw new Error(`stop ${planned.id} is not one of the trip's`);
    const setUpCents = setUpOf(basis, planned, bases);
    const { estimate } = await estimateOnTrip(basis.bid, { trip: tripNumber, travelCents: planned.travelCents, setUpCents });
    stops.push({
      listingId: planned.id, position: index + 1, landing: basis.landing, legMiles: Math.round(planned.legMiles), arrivesMin: planned.arrivesMin, leavesMin: planned.leavesMin,
      aloneTravelCents: alone.aloneTravelCents, travelCents: planned.travelCents, setUpCents, aloneCostCents: basis.bid.expectedCents, costCents: estimate.quote.expected.costCents,
      // A booking that is paid, or soon will be, keeps its hold: what is not used goes back after the tally.
      holdCents: basis.booking ? basis.bid.holdCents : estimate.quote.holdCents,
    });
  }
  return { plan, stops };
}

/** The columns of a trip that follow from the plan. */
export const tripColumns = (plan: TripPlan) => ({ miles: Math.round(plan.miles), aloneMiles: Math.round(plan.aloneMiles), provenBest: plan.provenBest, wholeCents: plan.wholeCents, aloneCents: plan.aloneCents });
