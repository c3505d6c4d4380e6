import { type Cents, roundCents, share } from '~/domain/money.ts';
import type { RateCard } from './rate-card.ts';
import { LONGEST_DAY_HOURS, planTrip, type TripPlan, type TripStop } from './trip-plan.ts';

/** A stop that may join a trip, with what its landowner would pay alone, tax left out. */
export interface TripCandidate extends TripStop {
  readonly aloneCents: Cents;
}

export interface TripGroup {
  readonly ids: readonly string[];
  readonly plan: TripPlan;
  /** What the sawyer receives for the whole outing, after the fee. */
  readonly netCents: Cents;
  /** For each hour on the road and at work. */
  readonly perHourCents: Cents;
}

/** How many stops a suggested group has at most; more may be joined by hand. */
export const MOST_SUGGESTED = 5;

/** Weighs one group as an outing: the bills with travel shared, less the fee, over the hours on the road and at work. */
export function weighGroup(card: RateCard, stops: readonly TripCandidate[], feeBasisPoints: number): TripGroup {
  const plan = planTrip(card, stops);
  const setUpSaved = stops.length * card.setUpPerLanding - plan.stops.reduce((sum, { setUpCents }) => sum + setUpCents, 0);
  const bills = stops.reduce((sum, { aloneCents }) => sum + aloneCents, 0) - (plan.aloneCents - plan.wholeCents) - setUpSaved;
  const netCents = bills - share(bills, feeBasisPoints);
  return { ids: stops.map(({ id }) => id), plan, netCents, perHourCents: roundCents(netCents / (plan.roadHours + plan.workHours)) };
}

const fitsDay = ({ plan }: TripGroup): boolean => plan.roadHours + plan.workHours <= LONGEST_DAY_HOURS;

/**
 * Finds good groups for one day: from every candidate (or from what is booked that day) the best next stop is added as long as the
 * money an hour rises and the day holds it. Good, not proven best; never worse than the best pair. Best first, each set once.
 * @param booked stops already booked on the day: every group has them
 */
export function findGroups(card: RateCard, candidates: readonly TripCandidate[], booked: readonly TripCandidate[], feeBasisPoints: number, most = 5): readonly TripGroup[] {
  const weigh = (stops: readonly TripCandidate[]): TripGroup => weighGroup(card, stops, feeBasisPoints);
  const seeds = booked.length > 0 ? [booked] : candidates.map((candidate) => [candidate]);
  const groups = new Map<string, TripGroup>();
  for (const seed of seeds) {
    // From a booking the second stop may be any that fits, so that each neighbour of the day is suggested once.
    const starts = booked.length > 0 ? candidates.map((candidate) => [...seed, candidate]) : [bestNext(seed, candidates, weigh)?.stops ?? seed];
    for (const start of starts) {
      let stops: readonly TripCandidate[] = start;
      let group = weigh(stops);
      if (stops.length < 2 || !fitsDay(group)) continue;
      while (stops.length < Math.max(MOST_SUGGESTED, booked.length + 1)) {
        const next = bestNext(stops, candidates, weigh);
        if (!next || next.group.perHourCents <= group.perHourCents) break;
        ({ stops, group } = next);
      }
      groups.set([...group.ids].sort().join(' '), group);
    }
  }
  return [...groups.values()].sort((a, b) => b.perHourCents - a.perHourCents).slice(0, most);
}

function bestNext(stops: readonly TripCandidate[], candidates: readonly TripCandidate[], weigh: (stops: readonly TripCandidate[]) => TripGroup): { readonly stops: readonly TripCandidate[]; readonly group: TripGroup } | null {
  let best: { stops: readonly TripCandidate[]; group: TripGroup } | null = null;
  for (const candidate of candidates) {
    if (stops.some(({ id }) => id === candidate.id)) continue;
    const longer = [...stops, candidate];
    const group = weigh(longer);
    if (fitsDay(group) && (best === null || group.perHourCents > best.group.perHourCents)) best = { stops: longer, group };
  }
  return best;
}
