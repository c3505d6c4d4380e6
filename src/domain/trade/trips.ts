import { type Cents, times } from '~/domain/money.ts';
import type { RateCard } from './rate-card.ts';

/** Miles from place to place; index 0 is the sawyer's base, the stops follow. Need not be symmetric. */
export type MileTable = readonly (readonly number[])[];

export interface StopOrder {
  /** Stop indexes into the table (never 0), in the order they are visited. */
  readonly order: readonly number[];
  /** Base to the stops in order and back to base. */
  readonly miles: number;
  /** Whether no other order is shorter (proven up to ten stops). */
  readonly provenBest: boolean;
}

/** Up to this many stops the order is proven best by dynamic programming over sets of stops (Held and Karp, 1962). */
export const EXACT_STOPS = 10;

/** The shortest round from base through every stop and back: exact up to ten stops, a good one beyond. */
export function bestStopOrder(miles: MileTable): StopOrder {
  const stops = miles.length - 1;
  if (stops <= 0) return { order: [], miles: 0, provenBest: true };
  const order = stops <= EXACT_STOPS ? heldKarp(miles) : improve(nearestNext(miles), miles);
  return { order, miles: roundMiles(order, miles), provenBest: stops <= EXACT_STOPS };
}

/** Miles of one round in this order, base at both ends. */
export function roundMiles(order: readonly number[], miles: MileTable): number {
  return [...order, 0].reduce(({ sum, from }, to) => ({ sum: sum + between(miles, from, to), from: to }), { sum: 0, from: 0 }).sum;
}

const between = (miles: MileTable, from: number, to: number): number => miles[from]?.[to] ?? Number.POSITIVE_INFINITY;

function heldKarp(miles: MileTable): number[] {
  const n = miles.length - 1;
  const full = 1 << n;
  // best[set * n + last]: fewest miles from base through every stop of `set`, ending at `last`.
  const best = new Float64Array(full * n).fill(Number.POSITIVE_INFINITY);
  const previous = new Int8Array(full * n).fill(-1);
  for (let last = 0; last < n; last++) best[(1 << last) * n + last] = between(miles, 0, last + 1);
  for (let set = 1; set < full; set++) {
    for (let last = 0; last < n; last++) {
      const here = best[set * n + last] ?? Number.POSITIVE_INFINITY;
      if (here === Number.POSITIVE_INFINITY) continue;
      for (let next = 0; next < n; next++) {
        if (set & (1 << next)) continue;
        const at = (set | (1 << next)) * n + next;
        const there = here + between(miles, last + 1, next + 1);
        if (there < (best[at] ?? 0)) {
          best[at] = there;
          previous[at] = last;
        }
      }
    }
  }
  const ends = Array.from({ length: n }, (_, last) => (best[(full - 1) * n + last] ?? 0) + between(miles, last + 1, 0));
  const order: number[] = [];
  for (let last = ends.indexOf(Math.min(...ends)), set = full - 1; last >= 0; ) {
    order.unshift(last + 1);
    const before = previous[set * n + last] ?? -1;
    set ^= 1 << last;
    last = before;
  }
  return order;
}

function nearestNext(miles: MileTable): number[] {
  const left = new Set(Array.from({ length: miles.length - 1 }, (_, i) => i + 1));
  const order: number[] = [];
  for (let at = 0; left.size > 0; ) {
    at = [...left].reduce((near, stop) => (between(miles, at, stop) < between(miles, at, near) ? stop : near));
    left.delete(at);
    order.push(at);
  }
  return order;
}

/** Reverses stretches and moves single stops while that shortens the round (2-opt and or-opt). */
function improve(start: readonly number[], miles: MileTable): number[] {
  let order = [...start];
  for (let better = true; better; ) {
    better = false;
    const shortest = roundMiles(order, miles);
    for (const other of neighbours(order)) {
      if (roundMiles(other, miles) < shortest - 1e-9) {
        order = other;
        better = true;
        break;
      }
    }
  }
  return order;
}

function* neighbours(order: readonly number[]): Generator<number[]> {
  for (let i = 0; i < order.length; i++) {
    for (let j = i + 1; j < order.length; j++) yield [...order.slice(0, i), ...order.slice(i, j + 1).reverse(), ...order.slice(j + 1)];
    for (let j = 0; j < order.length; j++) {
      if (i === j) continue;
      const rest = order.filter((_, at) => at !== i);
      yield [...rest.slice(0, j), ...order.slice(i, i + 1), ...rest.slice(j)];
    }
  }
}

/**
 * Splits whole cents in proportion to weights so that the parts sum exactly to the whole: each gets its share rounded down, the cents
 * left over go to the largest remainders, the first of equals first. With no weight at all the parts are as equal as cents allow.
 */
export function splitInProportion(wholeCents: Cents, weights: readonly number[]): Cents[] {
  if (weights.length === 0) return [];
  const total = weights.reduce((sum, weight) => sum + weight, 0);
  const fair = total > 0 ? weights : weights.map(() => 1);
  const divisor = BigInt(total > 0 ? total : weights.length);
  const exact = fair.map((weight) => BigInt(wholeCents) * BigInt(weight));
  const parts = exact.map((product) => Number(product / divisor));
  const left = wholeCents - parts.reduce((sum, part) => sum + part, 0);
  const byRemainder = exact.map((product, i) => ({ i, remainder: product % divisor })).sort((a, b) => (a.remainder === b.remainder ? a.i - b.i : a.remainder > b.remainder ? -1 : 1));
  for (const { i } of byRemainder.slice(0, left)) parts[i] = (parts[i] ?? 0) + 1;
  return parts;
}

export interface SharedTravel {
  /** What the trip's travel comes to: its miles beyond the free ones both ways, never more than all would have paid alone. */
  readonly wholeCents: Cents;
  /** Each landowner's part, in the order given; sums to the whole; nobody pays more than alone. */
  readonly partsCents: readonly Cents[];
  readonly savedCents: Cents;
}

/** Shares one trip's travel in proportion to what each would have paid alone (whole cents). */
export function shareTravel(card: RateCard, tripMiles: number, aloneCents: readonly Cents[]): SharedTravel {
  const alone = aloneCents.reduce((sum, cents) => sum + cents, 0);
  const trip = times(Math.max(0, tripMiles - 2 * card.travel.freeMiles), card.travel.perMileCents);
  const wholeCents = Math.min(trip, alone);
  return { wholeCents, partsCents: splitInProportion(wholeCents, aloneCents), savedCents: alone - wholeCents };
}

/** Set-up of logs decked together is shared by their board feet (any one rule, whole); at landings of their own each pays a whole one. */
export function shareSetUp(card: RateCard, deckedTogether: boolean, boardFeet: readonly number[]): readonly Cents[] {
  return deckedTogether ? splitInProportion(card.setUpPerLanding, boardFeet.map(Math.round)) : boardFeet.map(() => card.setUpPerLanding);
}
