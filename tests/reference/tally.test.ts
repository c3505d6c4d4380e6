import { describe, expect, test } from 'vitest';
import { tallyBoards, type TallyRow } from '~/domain/timber/tally.ts';

const row = (thicknessIn: number, widthIn: number, lengthFt: number, count = 1): TallyRow => ({ thicknessIn, widthIn, lengthFt, count });

describe('Hardwood surface measure, NHLA rule as quoted publicly', () => {
  test.each([
    ['6½ in × 8 ft is 4⅓, 4', row(1, 6.5, 8), 4],
    ['8 in × 12 ft is 8', row(1, 8, 12), 8],
    ['10 in × 13 ft is 10 10/12, 11', row(1, 10, 13), 11],
  ])('%s', (_, board, squareFeet) => {
    expect(tallyBoards('hardwood', [board]).pieces[0]?.surfaceMeasureSqFt).toBe(squareFeet);
  });

  test('2 in × 6¼ in × 8 ft: surface measure 4, 8 bf (American Hardwood Export Council)', () => {
    expect(tallyBoards('hardwood', [row(2, 6.25, 8)])).toEqual({ pieces: [{ surfaceMeasureSqFt: 4, boardFeet: 8 }], totalBoardFeet: 8 });
  });

  test('an exact half goes up, then down (E. M. Wengert, woodweb.com)', () => {
    expect(tallyBoards('hardwood', [row(1, 6.5, 12), row(1, 6.5, 12)]).pieces.map(({ boardFeet }) => boardFeet)).toEqual([7, 6]);
  });

  test('¾ in counts as an inch, 11 ft 8 in as 11 ft (NHLA rules, goodwoodcorp.com)', () => {
    expect(tallyBoards('hardwood', [row(0.75, 10, 11 + 8 / 12, 5)]).totalBoardFeet).toBe(45);
  });
});

describe('Softwood, nominal thickness × width / 12 per lineal foot', () => {
  test.each([
    [1, 4, 0.333],
    [1, 6, 0.5],
    [2, 4, 0.667],
    [2, 6, 1],
  ])('%i × %i in is %d bf a foot (public table)', (thicknessIn, widthIn, boardFeet) => {
    expect(tallyBoards('softwood', [row(thicknessIn, widthIn, 1)]).totalBoardFeet).toBeCloseTo(boardFeet, 3);
  });

  test('1 × 12 in × 10 ft is 10 bf (definition of the board foot)', () => {
    expect(tallyBoards('softwood', [row(1, 12, 10)]).totalBoardFeet).toBe(10);
  });
});

test('a worked job: white oak tally of 378 bf, each thickness rounded and then summed', () => {
  const tally = tallyBoards('hardwood', [row(1, 8, 12, 20), row(1.25, 6.5, 12, 8), row(2, 9, 12, 6), row(0.75, 10, 11 + 8 / 12, 5)]);
  expect(tally.pieces.map(({ boardFeet }) => boardFeet)).toEqual([160, 65, 108, 45]);
  expect(tally.totalBoardFeet).toBe(378);
});
