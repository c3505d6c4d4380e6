import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { quote } from '~/domain/trade/quote.ts';
import { OAK_TERMS, termsWith } from '../../support/rate-cards.ts';

const range = (low: number, expected: number, high: number) => ({ low, expected, high });
const volume = (low: number, expected: number, high: number) => ({ boardFeet: range(low, expected, high), hours: range(0, 0, 0), lumberTallyBf: range(low, expected, high) });

describe('a quote', () => {
  it('has lines at both ends and a hold at the high one with the whole metal cap', () => {
    const { low, expected, high, holdCents, costPerBfCents } = quote(OAK_TERMS, volume(350, 400, 430));
    expect(low.costCents).toBe(27_400); // 175.00 + 75 + 24
    expect(expected.costCents).toBe(29_900); // 200.00 + 75 + 24
    expect(high.costCents).toBe(31_400); // 215.00 + 75 + 24
    expect(holdCents).toBe(41_900); // 314.00 + 105.00
    expect(costPerBfCents).toBe(75); // 299.00 / 400 = 0.7475
  });

  it('taxes the hold, cap included', () => {
    const terms = termsWith({ tax: { pct: 5, label: 'Tax' } });
    expect(quote(terms, volume(350, 400, 430)).holdCents).toBe(43_995); // 419.00 + 20.95
  });

  it('says no cost per bf when no lumber is expected', () => {
    expect(quote(OAK_TERMS, volume(0, 0, 0)).costPerBfCents).toBeNull();
  });

  it('never holds less than any job within the range and the cap would cost', () => {
    fc.assert(
      fc.property(fc.array(fc.integer({ min: 0, max: 3_000 }), { minLength: 3, maxLength: 3 }), fc.integer({ min: 0, max: 20_000 }), (bf, cap) => {
        const [low, expected, high] = [...bf].sort((a, b) => a - b) as [number, number, number];
        const terms = termsWith({ minimum: { cents: 20_000, covers: 'whole-job' }, tax: { pct: 8.875, label: 'Tax' } }, { metalCapCents: cap });
        const result = quote(terms, volume(low, expected, high));
        expect(result.low.costCents).toBeLessThanOrEqual(result.expected.costCents);
        expect(result.expected.costCents).toBeLessThanOrEqual(result.high.costCents);
        expect(result.high.costCents).toBeLessThanOrEqual(result.holdCents);
        expect(result.holdCents).toBeGreaterThanOrEqual(result.high.costCents + cap);
      }),
    );
  });
});
