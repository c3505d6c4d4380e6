import type { Point } from '~/domain/geo.ts';
import type { Cents } from '~/domain/money.ts';
import { PREPARING_HOURS } from './bid-estimate.ts';
import { ROAD_MPH } from './job-worth.ts';
import type { RateCard } from './rate-card.ts';
import { roadMiles } from './road-miles.ts';
import { bestStopOrder, shareSetUp, shareTravel } from './trips.ts';

/** A day on the road and at the saw is at most this long, hours: common practice, no source. */
export const LONGEST_DAY_HOURS = 10;
/** As many stops as one outing may have. */
export const MOST_STOPS = 10;

/** A stop as it would stand alone. */
export interface TripStop {
  readonly id: string;
  /** On the coarse grid. */
  readonly point: Point;
  /** One way from the base, as the sawyer confirmed them. */
  readonly roadMiles: number;
  /** Sawing only. */
  readonly sawingHours: number;
  /** The tally or scale expected; shares a set-up. */
  readonly boardFeet: number;
  /** What this landowner would pay for travel alone. */
  readonly aloneTravelCents: Cents;
  /** Stops with the same landing are decked together: the mill is set up once. */
  readonly landing: string;
}

export interface PlannedStop {
  readonly id: string;
  /** From the stop before, or from the base. */
  readonly legMiles: number;
  /** Minutes after the first arrival. */
  readonly arrivesMin: number;
  readonly leavesMin: number;
  readonly travelCents: Cents;
  readonly setUpCents: Cents;
}

export interface TripPlan {
  /** In the order they are visited. */
  readonly stops: readonly PlannedStop[];
  /** Base to base. */
  readonly miles: number;
  /** What the same stops come to one by one, there and back each. */
  readonly aloneMiles: number;
  readonly provenBest: boolean;
  readonly roadHours: number;
  readonly workHours: number;
  /** Travel of the whole trip; the parts sum to it. */
  readonly wholeCents: Cents;
  readonly aloneCents: Cents;
}

/** Road miles between base (index 0) and the stops: the sawyer's own figure from the base, estimated between stops. */
export const milesTable = (stops: readonly TripStop[]): readonly (readonly number[])[] => [
  [0, ...stops.map((stop) => stop.roadMiles)],
  ...stops.map((from) => [from.roadMiles, ...stops.map((to) => (to === from || to.landing === from.landing ? 0 : roadMiles(from.point, to.point)))]),
];

/**
 * Plans one outing: the order of stops with fewest miles, the times of each, and what each landowner pays. Travel is shared in
 * proportion to what each would have paid alone; a set-up is shared, by board feet, only where logs are decked together.
 */
export function planTrip(card: RateCard, stops: readonly TripStop[]): TripPlan {
  const miles = milesTable(stops);
  const round = bestStopOrder(miles);
  const travel = shareTravel(card, round.miles, stops.map(({ aloneTravelCents }) => aloneTravelCents));
  const setUps = setUpParts(card, stops);
  let at = 0;
  let clockMin = 0;
  const planned = round.order.map((index, turn): PlannedStop => {
    const stop = stops[index - 1];
    if (!stop) throw new RangeError(`There is no stop ${index}.`);
    const legMiles = miles[at]?.[index] ?? 0;
    if (turn > 0) clockMin += (legMiles / ROAD_MPH) * 60;
    const before = stops[at - 1];
    const preparing = before && before.landing === stop.landing ? 0 : PREPARING_HOURS;
    const arrivesMin = Math.round(clockMin);
    clockMin += (preparing + stop.sawingHours) * 60;
    at = index;
    return { id: stop.id, legMiles, arrivesMin, leavesMin: Math.round(clockMin), travelCents: travel.partsCents[index - 1] ?? 0, setUpCents: setUps[index - 1] ?? 0 };
  });
  const landings = new Set(stops.map(({ landing }) => landing)).size;
  return {
    stops: planned,
    miles: round.miles,
    aloneMiles: stops.reduce((sum, stop) => sum + 2 * stop.roadMiles, 0),
    provenBest: round.provenBest,
    roadHours: round.miles / ROAD_MPH,
    workHours: landings * PREPARING_HOURS + stops.reduce((sum, { sawingHours }) => sum + sawingHours, 0),
    wholeCents: travel.wholeCents,
    aloneCents: travel.wholeCents + travel.savedCents,
  };
}

function setUpParts(card: RateCard, stops: readonly TripStop[]): readonly Cents[] {
  const parts = stops.map(() => 0);
  for (const landing of new Set(stops.map((stop) => stop.landing))) {
    const here = stops.flatMap((stop, index) => (stop.landing === landing ? [index] : []));
    shareSetUp(card, here.length > 1, here.map((index) => stops[index]?.boardFeet ?? 0)).forEach((cents, turn) => {
      parts[here[turn] ?? 0] = cents;
    });
  }
  return parts;
}
