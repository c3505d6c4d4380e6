import { describe, expect, it } from 'vitest';
import { type BidMill, estimateBid, lumberByLogScale, withOwnFigure } from '~/domain/trade/bid-estimate.ts';
import { OAK_TERMS, termsWith } from '../../support/rate-cards.ts';

const MILL: BidMill = { id: 'mill-1', name: 'Band', kind: 'band', kerfIn: 3 / 32, largestLogIn: 30, widestCutIn: 26, widestBoardIn: 24, longestFt: 18, shortestFt: 4, paceBfPerHour: 200, realisedYield: 0.85 };
const LOGS = [
  { id: 'log-1', species: 'white-oak', smallEndIn: 18, lengthFt: 12 },
  { id: 'log-2', species: 'white-oak', smallEndIn: 16, lengthFt: 12 },
  { id: 'log-3', species: 'white-oak', smallEndIn: 14, lengthFt: 12 },
];

describe('the estimate of a bid', () => {
  it('without a sawing plan rests on the log scale, and says so', () => {
    const lumber = lumberByLogScale(LOGS);
    // International ¼ at 17, 15, 13 in (1 in less), as measured 170 + 130 + 100, and at 18½ → 19, 16½ → 17, 14½ → 15 in
    expect(lumber.bf.expected).toBe(400);
    expect(lumber.bf.low).toBeLessThan(400);
    expect(lumber.bf.high).toBeGreaterThan(400);
    expect(lumber.by).toBe('log scale, International ¼');
  });

  it('prices the expected lumber: 400 × 0.50 + 75 + 24 = 299.00', () => {
    const bid = estimateBid({ logs: LOGS, mill: MILL, terms: OAK_TERMS, lumber: lumberByLogScale(LOGS) });
    expect(bid.quote.expected.costCents).toBe(29_900);
    expect(bid.scaleBf).toEqual({ internationalQuarter: 400, scribnerDecimalC: 370, doyle: 330 });
    expect(bid.hours.expected).toBe(2); // 400 bf at 200 an hour
    expect(bid.fit.fits).toBe(true);
  });

  it('by the hour counts the time before the first cut only when the clock runs from arrival', () => {
    const from = (clock: 'first-cut' | 'arrival') => estimateBid({ logs: LOGS, mill: MILL, lumber: lumberByLogScale(LOGS), terms: termsWith({ basis: { kind: 'hourly', from: clock, perHour: { withCents: 10_000, withoutCents: 10_000 } } }) });
    expect(from('first-cut').quote.expected.sawingCents).toBe(20_000); // 2 h
    expect(from('arrival').quote.expected.sawingCents).toBe(25_000); // 2½ h
  });

  it('by log scale charges the scale of the named rule whatever lumber is expected', () => {
    const terms = termsWith({ basis: { kind: 'log-scale', rule: 'doyle', smallestLog: null, perBf: { withCents: 50, withoutCents: 50 } } });
    expect(estimateBid({ logs: LOGS, mill: MILL, lumber: withOwnFigure(lumberByLogScale(LOGS), 500), terms }).quote.expected.sawingCents).toBe(16_500); // 330 × 0.50
  });

  it('keeps the range in proportion to the sawyer’s own figure', () => {
    const lumber = lumberByLogScale(LOGS);
    const own = withOwnFigure(lumber, 500);
    expect(own.bf.high / own.bf.expected).toBeCloseTo(lumber.bf.high / lumber.bf.expected, 10);
  });

  it('says which log does not fit', () => {
    const bid = estimateBid({ logs: LOGS, mill: { ...MILL, longestFt: 10 }, terms: OAK_TERMS, lumber: lumberByLogScale(LOGS) });
    expect(bid.fit.reasons).toHaveLength(3);
  });
});
