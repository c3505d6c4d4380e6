import { describe, expect, it } from 'vitest';
import { type Comparable, costParts, lowestInWords } from '~/domain/trade/comparison.ts';
import { quote } from '~/domain/trade/quote.ts';
import type { BidTerms, RateCard } from '~/domain/trade/rate-card.ts';
import { termsWith } from '../../support/rate-cards.ts';

/** A bid for 400 bf (350 to 435), as the domain works it out. */
function bidOf(sawyer: string, card: Partial<RateCard>, terms: Partial<BidTerms> = {}, expectedBf = 400): Comparable {
  const bf = { low: expectedBf * 0.875, expected: expectedBf, high: expectedBf * 1.0875 };
  const all = termsWith(card, { roadMiles: 10, ...terms });
  return { sawyer, basis: all.card.basis, expectedBf, quote: quote(all, { boardFeet: bf, lumberTallyBf: bf, hours: { low: 2, expected: 2, high: 2 } }) };
}
const perBf = (cents: number): Pick<RateCard, 'basis'> => ({ basis: { kind: 'lumber-tally', rule: 'hardwood', perBf: { withCents: cents, withoutCents: cents } } });

describe('the parts of an estimate', () => {
  it('sum to its cost', () => {
    const { quote: worked } = bidOf('A', { ...perBf(50), minimum: { cents: 50_000, covers: 'whole-job' }, tax: { pct: 5, label: 'Tax' } }, { roadMiles: 40 });
    const parts = costParts(worked.expected);
    // 400 × 0.50, set-up 75 + 30 miles at 2.00, filled up to 500, 5 % of it
    expect(parts).toEqual({ sawing: 20_000, surchargesAndExtras: 0, setUpAndTravel: 13_500, minimum: 16_500, tax: 2_500 });
    expect(Object.values(parts).reduce((sum, cents) => sum + cents, 0)).toBe(worked.expected.costCents);
  });
});

describe('which is lowest, in words', () => {
  it('says nothing of one bid', () => {
    expect(lowestInWords([])).toEqual([]);
    expect(lowestInWords([bidOf('Ash', perBf(50))])).toEqual([]);
  });

  it('gives the difference by its parts, the larger first', () => {
    // Ash 200 + 40, Birch 160 + 140: Ash is 60 lower, 100 less to come and 40 more to saw.
    const words = lowestInWords([bidOf('Birch', { ...perBf(40), setUpPerLanding: 14_000 }), bidOf('Ash', { ...perBf(50), setUpPerLanding: 4_000 })]);
    expect(words[0]).toBe('Ash has the lowest estimate, $240: $60 less than the next, Birch.');
    expect(words[1]).toBe('Less for set-up and travel ($100), though more for sawing ($40).');
    expect(words).toContain('It is also the lowest per bf sawn, $0.60.');
    expect(words.join(' ')).not.toContain('overlap');
  });

  it('says when the ranges overlap, and when two are level', () => {
    const words = lowestInWords([bidOf('Ash', { ...perBf(50), setUpPerLanding: 5_000 }), bidOf('Birch', { ...perBf(51), setUpPerLanding: 5_000 })]);
    expect(words).toContain('Their ranges overlap: the logs may measure so that the order turns round.');
    expect(lowestInWords([bidOf('Ash', perBf(50)), bidOf('Birch', perBf(50))])[0]).toBe('Ash and Birch have the same estimate, $275.');
  });

  it('names the clock when only one charges by it, and the lowest per bf when it is another', () => {
    const hourly = bidOf('Cedar', { basis: { kind: 'hourly', from: 'first-cut', perHour: { withCents: 9_000, withoutCents: 9_000 } } }, {}, 300);
    const words = lowestInWords([hourly, bidOf('Ash', perBf(50))]);
    expect(words[0]).toBe('Cedar has the lowest estimate, $255: $20 less than the next, Ash.');
    expect(words).toContain('Cedar charges by the hour, the other by what is sawn: slow logs cost you more with Cedar, quick ones less.');
    expect(words).toContain('Per bf sawn Ash is lowest, $0.69, with 400 bf expected against 300 bf.');
  });
});
