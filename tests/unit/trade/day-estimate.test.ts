import { describe, expect, it } from 'vitest';
import { dayEstimate, estimateFacts } from '~/domain/trade/day-estimate.ts';
import type { DayLog } from '~/domain/trade/day-logs.ts';
import { OAK_TERMS } from '../../support/rate-cards.ts';

const log = (id: string, smallEndIn: number, change: Partial<DayLog> = {}): DayLog => ({ id, species: 'white-oak', defects: [], listed: { smallEndIn, largeEndIn: null, lengthFt: 12 }, measured: null, added: false, agreed: false, ...change });
const mill = { largestLogIn: 40, widestCutIn: 36, widestBoardIn: 30, longestFt: 20, shortestFt: 4 };
const bid = { lumberBf: { low: 270, expected: 300, high: 330 }, options: {}, paceBfPerHour: 200 };

describe('the estimate on the day', () => {
  it('is nothing to say while every log lies as listed', () => expect(dayEstimate([log('a', 18), log('b', 16)], mill, bid, OAK_TERMS)).toBeNull());

  it('follows the scale of the logs as measured, agreed or not', () => {
    // International ¼: 18 in × 12 ft is 170, 16 in is 130: 300 bf. 16 in is really 18 in: 340, 13.3 % more, and so is the lumber: 300 × 340 / 300.
    const estimate = dayEstimate([log('a', 18), log('b', 16, { measured: { smallEndIn: 18, largeEndIn: null, lengthFt: 12 } })], mill, bid, OAK_TERMS);
    expect(estimate).toMatchObject({ listedScaleBf: 300, scaleBf: 340 });
    expect(estimate?.changePct).toBeCloseTo(40 / 3, 9);
    expect(estimate?.lumberBf.expected).toBeCloseTo(340, 9);
    const asListed = dayEstimate([log('a', 18, { measured: { smallEndIn: 18, largeEndIn: null, lengthFt: 12 } }), log('b', 16)], mill, bid, OAK_TERMS);
    // 40 bf more at $0.50, and nothing else of the bid changes.
    expect((estimate?.costCents.expected ?? 0) - (asListed?.costCents.expected ?? 0)).toBe(2_000);
  });

  it('takes an added log in, and says the change in figures', () => {
    // 12 in × 12 ft scales 70: 300 + 70 = 370, 23.3 % more.
    const estimate = dayEstimate([log('a', 18), log('b', 16), log('c', 12, { added: true })], mill, bid, OAK_TERMS);
    if (!estimate) throw new Error('nothing has changed');
    expect(estimateFacts(estimate, 50_000).map(([, figure]) => figure)).toEqual(['370 bf; listed 300 bf, +23.3 %', expect.stringMatching(/^370 bf \(333 bf to 407 bf\)$/), expect.stringMatching(/^\$[\d,.]+ \(/), '$500.00']);
  });
});
