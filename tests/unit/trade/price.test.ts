import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { NO_WORK, priceWork, withUnit } from '~/domain/trade/price.ts';
import { describeBasis, describeMinimum, describeRate } from '~/domain/trade/rate-card.ts';
import { OAK_CARD, OAK_TERMS, termsWith } from '../../support/rate-cards.ts';

describe('a quantity with its unit', () => {
  it('is one of it or many', () => {
    expect([withUnit('1', 1, 'landing'), withUnit('12', 12, 'mile'), withUnit('2', 2, 'pass'), withUnit('1', 1, 'pass'), withUnit('632.83', 632.83, 'bf'), withUnit('0.5', 0.5, 'hour')])
      .toEqual(['1 landing', '12 miles', '2 passes', '1 pass', '632.83 bf', '0.5 hours']);
  });
});

const amounts = (terms = OAK_TERMS, work = NO_WORK) => priceWork(terms, work).lines.map(({ label, amountCents }) => [label, amountCents]);

describe('what a rate counts', () => {
  it('is said in the words of the trade', () => {
    expect(describeBasis(OAK_CARD)).toBe('lumber tally, hardwood rule (surface measure)');
    expect(describeBasis({ ...OAK_CARD, basis: { kind: 'log-scale', rule: 'doyle', smallestLog: { diameterIn: 12, lengthFt: 8 }, perBf: { withCents: 45, withoutCents: 40 } } }))
      .toBe('log scale, Doyle, no log counted for less than 12 in × 8 ft');
    expect(describeBasis({ ...OAK_CARD, basis: { kind: 'hourly', from: 'arrival', perHour: { withCents: 11_000, withoutCents: 9_500 } }, slabs: { kind: 'square-foot', cents: 300 } }))
      .toBe('by the hour from arrival, to a quarter hour; slabs by the square foot of mean face');
    expect(describeRate(OAK_CARD, 'landowner-provides')).toBe('$0.50 / bf');
    expect(describeRate(OAK_CARD, 'sawyer-brings')).toBe('$0.60 / bf');
    expect(describeMinimum({ ...OAK_CARD, minimum: { cents: 25_000, covers: 'sawing-only' } })).toBe('$250.00 minimum for the sawing only');
  });
});

describe('every basis', () => {
  it('log scale charges the scale, not the tally', () => {
    const terms = termsWith({ basis: { kind: 'log-scale', rule: 'doyle', smallestLog: null, perBf: { withCents: 50, withoutCents: 45 } }, setUpPerLanding: 0 }, { roadMiles: 0 });
    // Doyle 330 × 0.45 = 148.50
    expect(amounts(terms, { ...NO_WORK, boardFeet: 330 })).toEqual([['Sawing, Doyle', 14_850]]);
  });

  it('the hour is charged to the nearest quarter, once for the job', () => {
    const terms = termsWith({ basis: { kind: 'hourly', from: 'first-cut', perHour: { withCents: 11_000, withoutCents: 9_500 } } }, { roadMiles: 0, offBearer: 'sawyer-brings' });
    // 6 h 8 min = 8 min is past half a quarter (7½ min): 6.25 × 110.00 = 687.50
    expect(amounts(terms, { ...NO_WORK, clockMinutes: 368 })).toEqual([['Sawing, by the hour', 68_750]]);
    // 6 h 7 min → 6.00 × 110.00
    expect(amounts(terms, { ...NO_WORK, clockMinutes: 367 })).toEqual([['Sawing, by the hour', 66_000]]);
  });

  it('slabs by the square foot of mean face beside boards by the board foot', () => {
    const terms = termsWith({ slabs: { kind: 'square-foot', cents: 325 } }, { roadMiles: 0 });
    // 100 × 0.50 = 50.00; 17.5 sq ft × 3.25 = 56.875 → 56.88
    expect(amounts(terms, { ...NO_WORK, boardFeet: 100, slabSquareFeet: 17.5 })).toEqual([['Sawing, lumber tally', 5_000], ['Slabs, mean face', 5_688]]);
  });
});

describe('surcharges, extras and the minimum', () => {
  it('charges each by its own unit', () => {
    const terms = termsWith({
      surcharges: { quartersawnPerBf: 15, underFourQuarterPerBf: 10, overWide: { aboveIn: 30, perLogCents: 2_500 }, overLong: { aboveFt: 16, perLogCents: 2_000 }, dirtyPerLog: 1_000 },
      extras: { movingMill: 4_000, waitingPerHour: 6_000, wasteHauled: 5_000, wasteBundled: 3_000, stickerEach: 40, deliveryPerLoad: 7_500 },
    }, { waste: 'bundled' });
    const work = { ...NO_WORK, quartersawnBf: 120, underFourQuarterBf: 45, overWideLogs: 1, overLongLogs: 2, dirtyLogs: 3, waitingMinutes: 50, millMoves: 1, stickers: 150, deliveryLoads: 1, wasteDone: 'bundled' as const };
    expect(amounts(terms, work)).toEqual([
      ['Quartersawn', 1_800], // 120 × 0.15
      ['Under 4/4', 450], // 45 × 0.10
      ['Logs over 30 in', 2_500],
      ['Logs over 16 ft', 4_000],
      ['Dirty logs', 3_000],
      ['Waiting', 4_500], // 50 min → 0.75 h × 60.00
      ['Moving the mill', 4_000],
      ['Slabs bundled', 3_000],
      ['Stickers', 6_000], // 150 × 0.40
      ['Delivery', 7_500],
    ]);
  });

  it('tops up to the minimum: of the whole job, or of the sawing only', () => {
    const work = { ...NO_WORK, boardFeet: 200, setUps: 1, trips: 1 };
    // 100.00 + 75.00 + 24.00 = 199.00 → 250.00
    expect(priceWork(termsWith({ minimum: { cents: 25_000, covers: 'whole-job' } }), work)).toMatchObject({ workCents: 25_000, costCents: 25_000 });
    // max(250.00, 100.00) + 75.00 + 24.00 = 349.00
    expect(priceWork(termsWith({ minimum: { cents: 25_000, covers: 'sawing-only' } }), work)).toMatchObject({ workCents: 34_900 });
  });

  it('taxes work and metal at the stated rate, and keeps metal above the minimum', () => {
    const terms = termsWith({ minimum: { cents: 25_000, covers: 'whole-job' }, tax: { pct: 5.5, label: 'Sales tax, county and state' } });
    // 250.00 + 10.00 = 260.00 × 5.5 % = 14.30
    expect(priceWork(terms, { ...NO_WORK, boardFeet: 200, setUps: 1, trips: 1, bladesResharpened: 1 })).toMatchObject({ metalCents: 1_000, taxCents: 1_430, costCents: 27_430 });
  });
});

const work = fc.record({
  boardFeet: fc.integer({ min: 0, max: 5_000 }), clockMinutes: fc.integer({ min: 0, max: 900 }), setUps: fc.integer({ min: 0, max: 3 }), trips: fc.integer({ min: 0, max: 3 }),
  bladesDestroyed: fc.integer({ min: 0, max: 9 }), bladesResharpened: fc.integer({ min: 0, max: 9 }), waitingMinutes: fc.integer({ min: 0, max: 300 }),
});

describe('any job', () => {
  it('has lines that sum to its cost, metal within the cap, and never less than the minimum', () => {
    fc.assert(
      fc.property(work, fc.integer({ min: 0, max: 40_000 }), fc.integer({ min: 0, max: 12_000 }), fc.constantFrom('whole-job' as const, 'sawing-only' as const), (part, minimum, cap, covers) => {
        const job = priceWork(termsWith({ minimum: { cents: minimum, covers }, tax: { pct: 8.875, label: 'Tax' } }, { metalCapCents: cap }), { ...NO_WORK, ...part });
        expect(job.lines.reduce((sum, { amountCents }) => sum + amountCents, 0)).toBe(job.costCents);
        expect(job.workCents + job.metalCents + job.taxCents).toBe(job.costCents);
        expect(job.metalCents).toBeLessThanOrEqual(cap);
        expect(job.workCents).toBeGreaterThanOrEqual(minimum);
        expect(job.lines.every(({ amountCents }) => Number.isSafeInteger(amountCents))).toBe(true);
      }),
    );
  });
});
