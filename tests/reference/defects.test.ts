import { describe, expect, test } from 'vitest';
import { defectShare, squaredDeduction, type Defect } from '~/domain/timber/defects.ts';
import { scaleLog, splitLength } from '~/domain/timber/log-scale.ts';
import { boardFeetByRule } from '~/domain/timber/log-rules.ts';
import { meanDiameterIn } from '~/domain/timber/taper-and-bark.ts';
import { wholeFeet, wholeInches } from '~/domain/timber/rounding.ts';

describe('Percentage rules, L. R. Grosenbaugh, Occasional Paper 126 (1952), p. 14 (formulas from memory)', () => {
  const cases: readonly (readonly [string, Defect, { diameterIn: number; lengthFt: number }, number])[] = [
    ['whole section 4 of 16 ft', { kind: 'section', lengthFt: 4 }, { diameterIn: 12, lengthFt: 16 }, 0.25],
    ['wedge of 90° along 8 of 16 ft', { kind: 'wedge', lengthFt: 8, angleDeg: 90 }, { diameterIn: 12, lengthFt: 16 }, 0.125],
    ['sweep of 5 in at 15 in', { kind: 'sweep', departureIn: 5 }, { diameterIn: 15, lengthFt: 16 }, 0.2],
    ['sweep of 2 in costs nothing', { kind: 'sweep', departureIn: 2 }, { diameterIn: 15, lengthFt: 16 }, 0],
    ['sweep on 8 ft allows 1 in', { kind: 'sweep', departureIn: 4 }, { diameterIn: 15, lengthFt: 8 }, 0.2],
    ['crook of 6 in along 4 of 16 ft', { kind: 'crook', deflectionIn: 6, lengthFt: 4 }, { diameterIn: 12, lengthFt: 16 }, 0.125],
    ['interior rot 5 × 7 in through 16 ft', { kind: 'interiorRot', widthIn: 5, heightIn: 7, lengthFt: 16 }, { diameterIn: 17, lengthFt: 16 }, 0.1875],
    ['interior rot 3 × 3 in along 8 of 16 ft', { kind: 'interiorRot', widthIn: 3, heightIn: 3, lengthFt: 8 }, { diameterIn: 13, lengthFt: 16 }, 16 / 144 / 2],
  ];
  test.each(cases)('%s', (_, defect, log, share) => {
    expect(defectShare(defect, log)).toBeCloseTo(share, 10);
  });
});

describe('Deductions of FSH 2409.11 (formula from memory, cells constructed)', () => {
  test('squared defect 6 × 8 in × 16 ft takes 51.2 bf', () => {
    expect(squaredDeduction([{ kind: 'squared', widthIn: 6, heightIn: 8, lengthFt: 16 }])).toBeCloseTo(51.2, 10);
  });

  test('length deduction: 16 in × 16 ft, 4 ft lost, Decimal C 16 units less 4', () => {
    const { boardFeet, netBoardFeet } = scaleLog({ smallEndIn: 16, lengthFt: 16, defects: [{ kind: 'section', lengthFt: 4 }] });
    expect([boardFeet.scribnerDecimalC, netBoardFeet.scribnerDecimalC]).toEqual([160, 120]);
  });

  test('pie cut: 20 in × 16 ft, 90° through, Decimal C 28 units less 7', () => {
    const { boardFeet, netBoardFeet } = scaleLog({ smallEndIn: 20, lengthFt: 16, defects: [{ kind: 'wedge', lengthFt: 16, angleDeg: 90 }] });
    expect([boardFeet.scribnerDecimalC, netBoardFeet.scribnerDecimalC]).toEqual([280, 210]);
  });

  test('diameter deduction: 18 in scaled again at a sound core of 14 in, Decimal C 21 to 11 units', () => {
    expect([boardFeetByRule('scribnerDecimalC', 18, 16), boardFeetByRule('scribnerDecimalC', 14, 16)]).toEqual([210, 110]);
  });
});

describe('Reading a log', () => {
  test('34 ft by 20s is 16 at the top and 18 at the butt (NVEL, segmnt.f; cell constructed)', () => {
    expect(splitLength(34, 20)).toEqual([16, 18]);
  });

  test('10.0 and 11.2 in at right angles scale as 11 in (extension practice)', () => {
    expect(wholeInches(meanDiameterIn(10, 11.2))).toBe(11);
  });

  test('13.7 and 14.9 in, 12 ft 8 in: 14 in × 12 ft, International 100, Doyle 75 (question by Wengert, woodweb.com; answer from the tables)', () => {
    const diameterIn = wholeInches(meanDiameterIn(13.7, 14.9));
    const lengthFt = wholeFeet(12 + 8 / 12);
    expect([diameterIn, lengthFt]).toEqual([14, 12]);
    expect([boardFeetByRule('internationalQuarter', diameterIn, lengthFt), boardFeetByRule('doyle', diameterIn, lengthFt)]).toEqual([100, 75]);
  });
});
