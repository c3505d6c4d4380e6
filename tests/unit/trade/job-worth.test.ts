import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { hourWords, jobForMills, jobWorth, ROAD_MPH } from '~/domain/trade/job-worth.ts';
import type { BidMill, ListedLog } from '~/domain/trade/bid-estimate.ts';
import { OAK_CARD } from '../../support/rate-cards.ts';

const mill: BidMill = { id: 'wide', name: 'Wide band', kind: 'band', kerfIn: 3 / 32, largestLogIn: 30, widestCutIn: 26, widestBoardIn: 24, longestFt: 18, shortestFt: 4, paceBfPerHour: 200, realisedYield: 0.85 };
const log = (id: string, smallEndIn: number, lengthFt = 12): ListedLog => ({ id, species: 'white-oak', smallEndIn, lengthFt });
// 18, 16 and 14 in × 12 ft: 170 + 130 + 100 = 400 bf by International ¼.
const logs = [log('1', 18), log('2', 16), log('3', 14)];
const means = { mills: [mill], card: OAK_CARD, feeBasisPoints: 500 };

describe('what a job brings', () => {
  it('is the card’s own bill, less the fee, over the hours on the road and at work', () => {
    // 400 × 0.50 + 75 + (31 − 25) × 2 × 2.00 = 299.00; less 5 % = 284.05; 62 mi at 40 mph = 1.55 h; 0.5 + 400/200 = 2.5 h
    const worth = jobWorth(logs, mill, OAK_CARD, 31, 'landowner-provides', 500);
    expect(worth).toMatchObject({ estimateCents: 29_900, netCents: 28_405, roadMiles: 31, workHours: 2.5 });
    expect(worth.roadHours).toBeCloseTo(62 / ROAD_MPH, 10);
    expect(worth.perHourCents).toBe(Math.round(28_405 / 4.05));
  });
  it('leaves the tax out: it is not the sawyer’s', () => {
    const taxed = jobWorth(logs, mill, { ...OAK_CARD, tax: { pct: 5.5, label: 'Sales tax' } }, 31, 'landowner-provides', 500);
    expect(taxed.netCents).toBe(28_405);
  });
  it('falls with every mile and every hour, and stays between its ends', () => {
    fc.assert(
      fc.property(fc.integer({ min: 26, max: 300 }), fc.integer({ min: 50, max: 600 }), (miles, pace) => {
        const free = { ...OAK_CARD, travel: { ...OAK_CARD.travel, perMileCents: 0 } };
        const near = jobWorth(logs, { ...mill, paceBfPerHour: pace }, free, miles, 'landowner-provides', 500);
        const far = jobWorth(logs, { ...mill, paceBfPerHour: pace }, free, miles + 20, 'landowner-provides', 500);
        expect(far.perHourCents).toBeLessThan(near.perHourCents);
        expect(near.lowCents).toBeLessThanOrEqual(near.estimateCents);
        expect(near.estimateCents).toBeLessThanOrEqual(near.highCents);
      }),
    );
  });
});

describe('the mill for a job', () => {
  const narrow: BidMill = { ...mill, id: 'narrow', name: 'Narrow band', largestLogIn: 18, longestFt: 10, paceBfPerHour: 400 };
  it('is the one that takes every log, whatever a faster one would bring', () => {
    expect(jobForMills(logs, { ...means, mills: [narrow, mill] }, 31, 'landowner-provides')).toMatchObject({ mill: { id: 'wide' }, fit: { fits: true } });
  });
  it('is the faster of two that fit', () => {
    const quick = { ...mill, id: 'quick', paceBfPerHour: 300 };
    expect(jobForMills(logs, { ...means, mills: [mill, quick] }, 31, 'landowner-provides')?.mill.id).toBe('quick');
  });
  it('names what is in the way when none fits', () => {
    const job = jobForMills([log('1', 12, 8), log('2', 16, 18)], { ...means, mills: [narrow] }, 31, 'landowner-provides');
    expect(job?.fit.reasons).toEqual([expect.stringMatching(/^Log 2: the butt is 1\.7 in too wide/), 'Log 2: 18 ft is over the longest, 10 ft.']);
  });
  it('says only the fit without rates or a base, and nothing without a mill', () => {
    expect(jobForMills(logs, { ...means, card: null }, 31, 'landowner-provides')?.worth).toBeNull();
    expect(jobForMills(logs, means, null, 'landowner-provides')?.worth).toBeNull();
    expect(jobForMills(logs, { ...means, mills: [] }, 31, 'landowner-provides')).toBeNull();
  });
});

it('hours are said to the half', () => {
  expect([0.1, 0.7, 1, 2.3, 4.05].map(hourWords)).toEqual(['1/2 h', '1/2 h', '1 h', '2 1/2 h', '4 h']);
});
