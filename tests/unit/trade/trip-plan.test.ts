import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { coarsePoint } from '~/domain/geo.ts';
import { findGroups, weighGroup, type TripCandidate } from '~/domain/trade/trip-groups.ts';
import { LONGEST_DAY_HOURS, milesTable, planTrip, type TripStop } from '~/domain/trade/trip-plan.ts';
import { chargedMiles } from '~/domain/trade/price.ts';
import { roadMiles } from '~/domain/trade/road-miles.ts';
import { roundMiles } from '~/domain/trade/trips.ts';
import { OAK_CARD } from '../../support/rate-cards.ts';

const base = { lat: 43.94, lng: -90.81 };
const stopAt = (id: string, lat: number, lng: number, changes: Partial<TripStop> = {}): TripStop => {
  const point = coarsePoint({ lat, lng });
  const miles = roadMiles(base, point);
  return { id, point, roadMiles: miles, sawingHours: 2, boardFeet: 400, aloneTravelCents: chargedMiles(OAK_CARD, miles) * OAK_CARD.travel.perMileCents, landing: id, ...changes };
};
const anyStop = (id: string) => fc.record({ lat: fc.double({ min: 43.2, max: 44.4, noNaN: true }), lng: fc.double({ min: -91.4, max: -90, noNaN: true }), hours: fc.double({ min: 0.5, max: 3, noNaN: true }) }).map(({ lat, lng, hours }) => stopAt(id, lat, lng, { sawingHours: hours }));
const anyStops = (least: number, most: number) => fc.integer({ min: least, max: most }).chain((count) => fc.tuple(...Array.from({ length: count }, (_, i) => anyStop(String(i + 1)))));
const candidate = (stop: TripStop): TripCandidate => ({ ...stop, aloneCents: 20_000 + OAK_CARD.setUpPerLanding + stop.aloneTravelCents });

function* orders<T>(items: readonly T[]): Generator<T[]> {
  if (items.length === 0) yield [];
  for (const item of items) for (const rest of orders(items.filter((other) => other !== item))) yield [item, ...rest];
}

describe('a planned trip', () => {
  it('drives the fewest miles of all orders, and its travel is the sum of its parts', () => {
    fc.assert(
      fc.property(anyStops(1, 6), (stops) => {
        const plan = planTrip(OAK_CARD, stops);
        const table = milesTable(stops);
        expect(plan.miles).toBe(Math.min(...[...orders(stops.map((_, i) => i + 1))].map((order) => roundMiles(order, table))));
        expect(plan.provenBest).toBe(true);
        expect(plan.stops.reduce((sum, { travelCents }) => sum + travelCents, 0)).toBe(plan.wholeCents);
        for (const { id, travelCents } of plan.stops) expect(travelCents).toBeLessThanOrEqual(stops.find((stop) => stop.id === id)?.aloneTravelCents ?? 0);
        expect(plan.stops.map(({ id }) => id).sort()).toEqual(stops.map(({ id }) => id).sort());
      }),
      { numRuns: 40 },
    );
  });

  it('says when each stop is reached and left, with the road between', () => {
    const plan = planTrip(OAK_CARD, [stopAt('a', 43.6, -90.8), stopAt('b', 43.6, -90.6)]);
    const [first, second] = plan.stops;
    // 0.5 h to get ready and 2 h to saw, then the road at 40 miles an hour.
    expect([first?.arrivesMin, first?.leavesMin]).toEqual([0, 150]);
    expect(second?.arrivesMin).toBe(Math.round(150 + ((second?.legMiles ?? 0) / 40) * 60));
    expect(plan.workHours).toBe(5);
  });

  it('shares a set-up, and gets ready once, only where the logs are decked together', () => {
    const apart = planTrip(OAK_CARD, [stopAt('a', 43.6, -90.8), stopAt('b', 43.6, -90.8)]);
    expect(apart.stops.map(({ setUpCents }) => setUpCents)).toEqual([7_500, 7_500]);
    const together = planTrip(OAK_CARD, [stopAt('a', 43.6, -90.8, { landing: 'one', boardFeet: 400 }), stopAt('b', 43.6, -90.8, { landing: 'one', boardFeet: 200 })]);
    expect([...together.stops].sort((x, y) => (x.id < y.id ? -1 : 1)).map(({ setUpCents }) => setUpCents)).toEqual([5_000, 2_500]);
    expect(together.workHours).toBe(apart.workHours - 0.5);
  });
});

describe('suggested groups', () => {
  it('hold in a day, and the first is at least as good as the best pair of all', () => {
    fc.assert(
      fc.property(anyStops(2, 7), (stops) => {
        const all = stops.map(candidate);
        const groups = findGroups(OAK_CARD, all, [], 500);
        const pairs = all.flatMap((one, i) => all.slice(i + 1).map((other) => weighGroup(OAK_CARD, [one, other], 500))).filter(({ plan }) => plan.roadHours + plan.workHours <= LONGEST_DAY_HOURS);
        for (const { plan, ids } of groups) {
          expect(plan.roadHours + plan.workHours).toBeLessThanOrEqual(LONGEST_DAY_HOURS);
          expect(new Set(ids).size).toBe(ids.length);
        }
        if (pairs.length > 0) expect(groups[0]?.perHourCents).toBeGreaterThanOrEqual(Math.max(...pairs.map(({ perHourCents }) => perHourCents)));
        else expect(groups).toEqual([]);
      }),
      { numRuns: 60 },
    );
  });

  it('round a booked day all have its booking', () => {
    const booked = candidate(stopAt('booked', 43.6, -90.8));
    const groups = findGroups(OAK_CARD, [candidate(stopAt('a', 43.62, -90.78)), candidate(stopAt('far', 41, -86)), candidate(stopAt('b', 43.55, -90.85, { sawingHours: 3 }))], [booked], 500);
    expect(groups.length).toBeGreaterThan(0);
    for (const { ids } of groups) expect(ids).toContain('booked');
    expect(groups.some(({ ids }) => ids.includes('far'))).toBe(false);
  });

  it('weigh what the sawyer receives: the bills with one travel, less the fee', () => {
    const [a, b] = [candidate(stopAt('a', 43.6, -90.8)), candidate(stopAt('b', 43.6, -90.6))];
    const { netCents, plan } = weighGroup(OAK_CARD, [a, b], 500);
    const bills = 2 * (20_000 + 7_500) + plan.wholeCents;
    expect(netCents).toBe(bills - Math.round(bills * 0.05));
  });
});
