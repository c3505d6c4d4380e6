import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { boardFeetByRule, logRules } from '~/domain/timber/log-rules.ts';
import { scaleLog, splitLength, type LongestScalingLengthFt } from '~/domain/timber/log-scale.ts';
import { wholeInches } from '~/domain/timber/rounding.ts';
import { logs } from './arbitraries.ts';

const longest = fc.constantFrom<LongestScalingLengthFt>(16, 20, 32, 40);
const diameters = fc.integer({ min: 4, max: 60 });
const lengths = fc.integer({ min: 4, max: 40 });

describe('rounding a diameter', () => {
  test.each([
    [13.5, 'up', 14],
    [13.5, 'down', 13],
    [13.51, 'down', 14],
    [13.49, 'up', 13],
    [9.1 + 0.4, 'up', 10],
    [0.1 + 0.2 + 13.2, 'down', 13],
  ] as const)('%d goes %s to %i', (diameterIn, halfInch, whole) => {
    expect(wholeInches(diameterIn, halfInch)).toBe(whole);
  });
});

describe('long logs', () => {
  test.each([
    [20, 20, [20]],
    [21, 20, [10, 11]],
    [33, 20, [16, 17]],
    [34, 20, [16, 18]],
    [40, 16, [12, 14, 14]],
    [39, 20, [18, 21]],
    [36, 32, [18, 18]],
    [40, 40, [40]],
  ])('%i ft by %is', (lengthFt, longestFt, pieces) => {
    expect(splitLength(lengthFt, longestFt)).toEqual(pieces);
  });

  test('the pieces make the whole, the butt piece is the longest', () => {
    fc.assert(
      fc.property(lengths, longest, (lengthFt, longestFt) => {
        const pieces = splitLength(lengthFt, longestFt);
        expect(pieces.reduce((sum, piece) => sum + piece, 0)).toBe(lengthFt);
        expect(pieces).toHaveLength(Math.ceil(lengthFt / longestFt));
        expect(Math.max(...pieces)).toBe(pieces.at(-1));
        expect(Math.max(...pieces) - Math.min(...pieces)).toBeLessThanOrEqual(3);
      }),
    );
  });

  test('a 34-ft log of 12 to 18 in: 12 in × 16 ft, then 15 in × 18 ft, summed after rounding', () => {
    const { segments, boardFeet } = scaleLog({ smallEndIn: 12, largeEndIn: 18, lengthFt: 34 });
    expect(segments).toEqual([
      { startFt: 0, lengthFt: 16, diameterIn: 12 },
      { startFt: 16, lengthFt: 18, diameterIn: 15 },
    ]);
    for (const rule of logRules) expect(boardFeet[rule]).toBe(boardFeetByRule(rule, 12, 16) + boardFeetByRule(rule, 15, 18));
  });

  test('taper left out is half an inch per 4 ft', () => {
    expect(scaleLog({ smallEndIn: 12, lengthFt: 40 }).segments).toEqual([
      { startFt: 0, lengthFt: 20, diameterIn: 12 },
      { startFt: 20, lengthFt: 20, diameterIn: 15 },
    ]);
  });

  test('the half-inch setting reaches the diameters between', () => {
    const down = scaleLog({ smallEndIn: 12.5, lengthFt: 40 }, { halfInchRounding: 'down' });
    expect(down.segments.map(({ diameterIn }) => diameterIn)).toEqual([12, 15]);
    expect(down.scalingDiameterIn).toBe(12);
  });
});

describe('cells', () => {
  // The Scribner tables themselves are not monotonic everywhere: the factors of short and long logs and the printed
  // exceptions each move a cell by one unit, so a step may go back by at most 10 bf.
  const stepBack = { doyle: 0, scribnerDecimalC: 10, internationalQuarter: 0 } as const;

  test('an inch more never gives less', () => {
    fc.assert(
      fc.property(fc.constantFrom(...logRules), diameters, lengths, (rule, diameterIn, lengthFt) => {
        expect(boardFeetByRule(rule, diameterIn + 1, lengthFt)).toBeGreaterThanOrEqual(boardFeetByRule(rule, diameterIn, lengthFt) - stepBack[rule]);
      }),
      { numRuns: 5000 },
    );
  });

  test('a foot more never gives less', () => {
    fc.assert(
      fc.property(fc.constantFrom(...logRules), diameters, fc.integer({ min: 4, max: 39 }), (rule, diameterIn, lengthFt) => {
        expect(boardFeetByRule(rule, diameterIn, lengthFt + 1)).toBeGreaterThanOrEqual(boardFeetByRule(rule, diameterIn, lengthFt) - stepBack[rule]);
      }),
      { numRuns: 5000 },
    );
  });

  test('every cell is as its table prints: whole, fives, tens', () => {
    for (let diameterIn = 4; diameterIn <= 60; diameterIn += 1) {
      for (let lengthFt = 4; lengthFt <= 40; lengthFt += 1) {
        expect(Number.isInteger(boardFeetByRule('doyle', diameterIn, lengthFt))).toBe(true);
        expect(boardFeetByRule('internationalQuarter', diameterIn, lengthFt) % 5).toBe(0);
        const scribner = boardFeetByRule('scribnerDecimalC', diameterIn, lengthFt);
        expect(scribner % 10 === 0 || (scribner === 5 && diameterIn <= 7)).toBe(true);
      }
    }
  });

  test('there is no Scribner cell above 120 in', () => {
    expect(() => boardFeetByRule('scribnerDecimalC', 121, 16)).toThrow(RangeError);
  });
});

describe('net', () => {
  test('squared defect: 18 in × 16 ft, 51.2 bf off each rule, rounded as the rule is', () => {
    const { boardFeet, netBoardFeet } = scaleLog({ smallEndIn: 18, lengthFt: 16, defects: [{ kind: 'squared', widthIn: 6, heightIn: 8, lengthFt: 16 }] });
    expect(boardFeet).toEqual({ doyle: 196, scribnerDecimalC: 210, internationalQuarter: 230 });
    expect(netBoardFeet).toEqual({ doyle: 145, scribnerDecimalC: 160, internationalQuarter: 180 });
  });

  test('without defects the net is the gross, a printed half unit too', () => {
    const { boardFeet, netBoardFeet } = scaleLog({ smallEndIn: 6, lengthFt: 8 });
    expect(boardFeet.scribnerDecimalC).toBe(5);
    expect(netBoardFeet).toEqual(boardFeet);
  });

  test('between nothing and the gross, whatever the defects', () => {
    fc.assert(
      fc.property(logs, longest, fc.constantFrom('up' as const, 'down' as const), (log, longestScalingLengthFt, halfInchRounding) => {
        const { boardFeet, netBoardFeet } = scaleLog(log, { longestScalingLengthFt, halfInchRounding });
        for (const rule of logRules) {
          expect(netBoardFeet[rule]).toBeGreaterThanOrEqual(0);
          expect(netBoardFeet[rule]).toBeLessThanOrEqual(boardFeet[rule]);
        }
      }),
    );
  });
});
