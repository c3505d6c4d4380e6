import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { estimateLogs, estimateRange, type Estimate } from '~/domain/timber/estimate.ts';
import { logRules } from '~/domain/timber/log-rules.ts';
import { matchSpecies, searchSpecies, speciesList, speciesOf } from '~/domain/timber/species.ts';
import { barkRatio, insideBarkIn, largestEndOutsideBark, outsideBarkIn, trimOf } from '~/domain/timber/taper-and-bark.ts';
import { canLift, greenWeightRange, greenWeightWithBark, greenWoodWeightLb, planTrips } from '~/domain/timber/weight.ts';
import { logs } from './arbitraries.ts';

const numbersIn = (value: unknown): readonly number[] =>
  typeof value === 'number' ? [value] : typeof value === 'object' && value !== null ? Object.values(value).flatMap(numbersIn) : [];

describe('an estimate', () => {
  test('white oak 18, 16, 14 in × 12 ft: the worked job', () => {
    const { totals } = estimateLogs({ logs: [18, 16, 14].map((smallEndIn) => ({ species: 'white-oak', smallEndIn, lengthFt: 12 })) });
    expect(totals.boardFeet).toEqual({ doyle: 330, scribnerDecimalC: 370, internationalQuarter: 400 });
  });

  test('cubic content and weight use the full length and the measured diameters', () => {
    const { logs: [log] } = estimateLogs({ logs: [{ species: 'black-walnut', smallEndIn: 15.25, largeEndIn: 18.75, lengthFt: 10.5 }] });
    const densityLbPerFt3 = 62.4 * 0.51 * 1.7912;
    expect(log?.scalingDiameterIn).toBe(15);
    expect(log?.scalingLengthFt).toBe(10);
    expect(log?.cubicFeet.huber).toBeCloseTo((Math.PI / 4) * (17 / 12) ** 2 * 10.5, 10);
    expect(log?.greenWeightLb).toBeCloseTo(densityLbPerFt3 * (Math.PI / 4) * (17 / 12) ** 2 * 10.5, 8);
  });

  test('totals are the sums of the parts, and nothing is NaN', () => {
    fc.assert(
      fc.property(fc.array(logs, { minLength: 1, maxLength: 20 }), (some) => {
        const estimate: Estimate = estimateLogs({ logs: some });
        for (const rule of logRules) expect(estimate.totals.boardFeet[rule]).toBe(estimate.logs.reduce((sum, log) => sum + log.boardFeet[rule], 0));
        expect(estimate.totals.greenWeightLb).toBeCloseTo(estimate.logs.reduce((sum, log) => sum + log.greenWeightLb, 0), 6);
        expect(numbersIn(estimate).every((value) => Number.isFinite(value) && value >= 0)).toBe(true);
      }),
    );
  });

  test('the same logs in another order give the same totals', () => {
    fc.assert(
      fc.property(fc.array(logs, { minLength: 2, maxLength: 10 }), (some) => {
        expect(estimateLogs({ logs: some.toReversed() }).totals.boardFeet).toEqual(estimateLogs({ logs: some }).totals.boardFeet);
      }),
    );
  });

  test('Smalian ≥ Newton ≥ Huber for a straight taper', () => {
    fc.assert(
      fc.property(logs, (log) => {
        const cubic = estimateLogs({ logs: [log] }).totals.cubicFeet;
        expect(cubic.smalian).toBeGreaterThanOrEqual(cubic.newton - 1e-9);
        expect(cubic.newton).toBeGreaterThanOrEqual(cubic.huber - 1e-9);
      }),
    );
  });
});

describe('the range', () => {
  test('a landowner: an inch less to half an inch more; a sawyer: half an inch either way', () => {
    const input = { logs: [{ species: 'white-oak', smallEndIn: 18, lengthFt: 12 }] };
    const owner = estimateRange(input, 'landowner');
    expect([owner.low, owner.asMeasured, owner.high].map(({ boardFeet }) => boardFeet.doyle)).toEqual([127, 147, 169]);
    expect(estimateRange(input, 'sawyer').low.boardFeet.doyle).toBe(147);
  });

  test('low ≤ as measured ≤ high', () => {
    fc.assert(
      fc.property(logs, fc.constantFrom('landowner' as const, 'sawyer' as const), (log, measuredBy) => {
        const { low, asMeasured, high } = estimateRange({ logs: [log] }, measuredBy);
        for (const rule of ['doyle', 'internationalQuarter'] as const) {
          expect(low.boardFeet[rule]).toBeLessThanOrEqual(asMeasured.boardFeet[rule]);
          expect(asMeasured.boardFeet[rule]).toBeLessThanOrEqual(high.boardFeet[rule]);
        }
        expect(low.greenWeightLb).toBeLessThanOrEqual(asMeasured.greenWeightLb);
        expect(asMeasured.greenWeightLb).toBeLessThan(high.greenWeightLb);
      }),
    );
  });
});

describe('bark, trim and weight', () => {
  const oak = speciesOf('white-oak');

  test('bark taken off and put on again changes nothing; 16 % of the volume', () => {
    expect(outsideBarkIn(insideBarkIn(20, oak), oak)).toBeCloseTo(20, 12);
    expect(barkRatio(oak) ** 2).toBeCloseTo(1.16, 12);
  });

  test('the largest end outside bark is small end + taper + bark', () => {
    expect(largestEndOutsideBark({ smallEndIn: 18, lengthFt: 16 }, oak)).toBeCloseTo(20 * Math.sqrt(1.16), 10);
    expect(largestEndOutsideBark({ smallEndIn: 18, largeEndIn: 23, lengthFt: 16 }, oak)).toBeCloseTo(23 * Math.sqrt(1.16), 10);
  });

  test('a stick of exactly 12 ft gives no clean 12-ft board', () => {
    expect(trimOf(12)).toEqual({ trimIn: 0, enough: false, nominalFt: 12, cleanFt: 11 });
    expect(trimOf(12 + 4 / 12)).toEqual({ trimIn: 4, enough: true, nominalFt: 12, cleanFt: 12 });
  });

  test('weight with bark stands inside its range, and is a multiple of ten', () => {
    fc.assert(
      fc.property(logs, (log) => {
        const species = speciesOf(log.species);
        const { lowLb, highLb } = greenWeightRange(log, species);
        const weight = greenWeightWithBark(log, species);
        expect(weight).toBeGreaterThan(greenWoodWeightLb(log, species));
        expect(lowLb - 5).toBeLessThanOrEqual(weight);
        expect(highLb + 5).toBeGreaterThanOrEqual(weight);
        expect([lowLb % 10, highLb % 10]).toEqual([0, 0]);
      }),
    );
  });

  test('trips: every log once, no load over the margin, too heavy ones named', () => {
    expect(planTrips([3000, 900, 1500, 2500], 3500)).toEqual({ loads: [{ logs: [3], weightLb: 2500 }, { logs: [2, 1], weightLb: 2400 }], tooHeavy: [0] });
    expect([canLift(800, 1000), canLift(801, 1000)]).toEqual([true, false]);
  });
});

describe('finding a species', () => {
  test.each([
    ['walnut', 'black-walnut'],
    ['quercus alba', 'white-oak'],
    ['juglans nigra', 'black-walnut'],
    ['White oak', 'white-oak'],
    // Bur and chestnut oak are called white oak too; the tree that is named so comes first.
    ['white o', 'white-oak'],
    ['hard maple', 'sugar-maple'],
    ['tulip', 'yellow-poplar'],
    ['douglas fir', 'douglas-fir'],
    ['bald cypress', 'baldcypress'],
    ['redwood', 'redwood'],
  ])('%s', (typed, code) => {
    expect(searchSpecies(typed)[0]?.code).toBe(code);
  });

  test('a name that several species share is not guessed', () => {
    expect(matchSpecies('soft maple')).toBeUndefined();
    expect(matchSpecies('Norway pine')?.code).toBe('red-pine');
    expect(matchSpecies('Pinus strobus')?.code).toBe('eastern-white-pine');
    expect(matchSpecies('')).toBeUndefined();
  });

  test('every species is found by its name, its scientific name and its code', () => {
    for (const species of speciesList) {
      for (const typed of [species.name, species.scientificName, species.code]) expect(searchSpecies(typed)[0]?.code).toBe(species.code);
    }
  });
});
