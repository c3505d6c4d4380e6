import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { coverage, tallyBoards, thicknessName, type TallyRow } from '~/domain/timber/tally.ts';

const rows: fc.Arbitrary<TallyRow> = fc.record({
  thicknessIn: fc.constantFrom(0.75, 1, 1.25, 1.5, 2, 3),
  widthIn: fc.integer({ min: 6, max: 60 }).map((quarters) => quarters / 4),
  lengthFt: fc.integer({ min: 16, max: 80 }).map((quarters) => quarters / 4),
  count: fc.integer({ min: 1, max: 9 }),
});

describe('hardwood', () => {
  test('halves alternate across rows of a thickness, and each thickness starts again', () => {
    const half = (thicknessIn: number, count: number): TallyRow => ({ thicknessIn, widthIn: 6.5, lengthFt: 12, count });
    const tally = tallyBoards('hardwood', [half(1, 3), half(1.25, 1), half(1, 2), half(1.25, 1)]);
    // 4/4: 7 6 7 then 6 7; 5/4: 7 then 6.
    expect(tally.pieces.map(({ surfaceMeasureSqFt }) => surfaceMeasureSqFt)).toEqual([20, 7, 13, 6]);
    expect(tally.totalBoardFeet).toBe(33 + 16);
  });

  test('rows stay unrounded, each thickness is rounded half up', () => {
    const tally = tallyBoards('hardwood', [
      { thicknessIn: 1.25, widthIn: 6, lengthFt: 12, count: 1 },
      { thicknessIn: 1.5, widthIn: 6, lengthFt: 10, count: 1 },
    ]);
    expect(tally.pieces.map(({ boardFeet }) => boardFeet)).toEqual([7.5, 7.5]);
    expect(tally.totalBoardFeet).toBe(16);
  });

  test('one row of many is the same as many rows of one', () => {
    fc.assert(
      fc.property(fc.array(rows, { minLength: 1, maxLength: 12 }), (some) => {
        const single = some.flatMap((row) => Array.from({ length: row.count }, () => ({ ...row, count: 1 })));
        expect(tallyBoards('hardwood', some).totalBoardFeet).toBe(tallyBoards('hardwood', single).totalBoardFeet);
      }),
    );
  });
});

test('softwood keeps decimals and sums its parts', () => {
  fc.assert(
    fc.property(fc.array(rows, { minLength: 1, maxLength: 12 }), (some) => {
      const { pieces, totalBoardFeet } = tallyBoards('softwood', some);
      expect(totalBoardFeet).toBeCloseTo(pieces.reduce((sum, { boardFeet }) => sum + boardFeet, 0), 9);
      expect(pieces.every((piece) => piece.surfaceMeasureSqFt === undefined)).toBe(true);
    }),
  );
});

test('coverage and names', () => {
  expect(coverage([{ thicknessIn: 1, widthIn: 6, lengthFt: 10, count: 4 }])).toEqual({ squareFeet: 20, linealFeet: 40 });
  expect([thicknessName(1.25, 'hardwood'), thicknessName(2, 'hardwood'), thicknessName(2, 'softwood')]).toEqual(['5/4', '8/4', '2 in']);
});
