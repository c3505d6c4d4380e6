import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { bestStopOrder, roundMiles, shareSetUp, shareTravel, splitInProportion } from '~/domain/trade/trips.ts';
import { OAK_CARD } from '../../support/rate-cards.ts';

const table = (stops: number) => fc.array(fc.array(fc.integer({ min: 1, max: 200 }), { minLength: stops + 1, maxLength: stops + 1 }), { minLength: stops + 1, maxLength: stops + 1 });

function* permutations(items: readonly number[]): Generator<number[]> {
  if (items.length === 0) yield [];
  for (const item of items) for (const rest of permutations(items.filter((other) => other !== item))) yield [item, ...rest];
}

describe('the order of stops', () => {
  it('is as short as the best of all orders tried one by one', () => {
    fc.assert(
      fc.property(fc.integer({ min: 1, max: 6 }).chain(table), (miles) => {
        const best = Math.min(...[...permutations(miles.slice(1).map((_, i) => i + 1))].map((order) => roundMiles(order, miles)));
        const found = bestStopOrder(miles);
        expect(found).toMatchObject({ miles: best, provenBest: true });
        expect(roundMiles(found.order, miles)).toBe(best);
      }),
    );
  });
  it('visits each of ten and of fourteen stops once', () => {
    for (const [stops, provenBest] of [[10, true], [14, false]] as const) {
      fc.assert(
        fc.property(table(stops), (miles) => {
          const found = bestStopOrder(miles);
          expect([...found.order].sort((a, b) => a - b)).toEqual(Array.from({ length: stops }, (_, i) => i + 1));
          expect(found.provenBest).toBe(provenBest);
        }),
        { numRuns: 5 },
      );
    }
  });
  it('of a trip to nobody is empty', () => {
    expect(bestStopOrder([[0]])).toEqual({ order: [], miles: 0, provenBest: true });
  });
});

describe('sharing', () => {
  it('sums to the whole to the cent, and nobody pays more than alone', () => {
    fc.assert(
      fc.property(fc.array(fc.integer({ min: 0, max: 60_000 }), { minLength: 1, maxLength: 10 }), fc.integer({ min: 0, max: 600 }), (alone, miles) => {
        const { wholeCents, partsCents, savedCents } = shareTravel(OAK_CARD, miles, alone);
        expect(partsCents.reduce((sum, part) => sum + part, 0)).toBe(wholeCents);
        partsCents.forEach((part, i) => expect(part).toBeLessThanOrEqual(alone[i] ?? 0));
        expect(savedCents).toBeGreaterThanOrEqual(0);
      }),
    );
  });
  it('is in proportion to what each would have paid alone', () => {
    // 80 miles round less 2 × 25 free = 30 × 2.00 = 60.00, split 24 : 48 : 8 = 18.00, 36.00, 6.00; alone 80.00
    expect(shareTravel(OAK_CARD, 80, [2_400, 4_800, 800])).toEqual({ wholeCents: 6_000, partsCents: [1_800, 3_600, 600], savedCents: 2_000 });
    expect(splitInProportion(100, [1, 1, 1])).toEqual([34, 33, 33]);
  });
  it('a set-up is shared only when the logs are decked together', () => {
    expect(shareSetUp(OAK_CARD, true, [400, 200])).toEqual([5_000, 2_500]);
    expect(shareSetUp(OAK_CARD, false, [400, 200])).toEqual([7_500, 7_500]);
  });
});
