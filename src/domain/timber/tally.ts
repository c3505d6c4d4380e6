import { roundHalfUp, tidy, wholeFeet } from './rounding.ts';

export type TallyRule = 'hardwood' | 'softwood';

/** Boards of one size. Thickness and width in inches (nominal for softwood), length in feet. */
export interface TallyRow {
  readonly thicknessIn: number;
  readonly widthIn: number;
  readonly lengthFt: number;
  readonly count: number;
}

export interface TalliedRow {
  /** Hardwood only: the surface measure of all boards of the row, square feet. */
  readonly surfaceMeasureSqFt?: number;
  readonly boardFeet: number;
}

export interface Tally {
  readonly pieces: readonly TalliedRow[];
  readonly totalBoardFeet: number;
}

/** Hardwood under an inch thick counts as an inch (National Hardwood Lumber Association rules). */
export const countedThicknessIn = (thicknessIn: number): number => Math.max(1, thicknessIn);

/** How many exact halves of each thickness have been met so far: the next goes up when the number is even. */
type HalvesMet = Map<number, number>;

/**
 * Surface measure of `count` boards of one size, square feet: width × whole feet / 12 each to the nearest whole, exact halves
 * alternately up and down, up first, board by board within a thickness.
 * Source: National Hardwood Lumber Association rules as quoted in tests/reference/data/tally_examples.csv.
 */
const surfaceMeasure = (row: TallyRow, halves: HalvesMet): number => {
  const twelfths = tidy(row.widthIn * wholeFeet(row.lengthFt));
  const whole = Math.floor(twelfths / 12);
  const rest = tidy(twelfths - whole * 12);
  if (rest !== 6) return row.count * (rest > 6 ? whole + 1 : whole);
  const met = halves.get(row.thicknessIn) ?? 0;
  halves.set(row.thicknessIn, met + row.count);
  const up = met % 2 === 0 ? Math.ceil(row.count / 2) : Math.floor(row.count / 2);
  return row.count * whole + up;
};

const tallyHardwood = (rows: readonly TallyRow[]): Tally => {
  const halves: HalvesMet = new Map();
  const byThickness = new Map<number, number>();
  const pieces = rows.map((row) => {
    const surfaceMeasureSqFt = surfaceMeasure(row, halves);
    const boardFeet = tidy(surfaceMeasureSqFt * countedThicknessIn(row.thicknessIn));
    byThickness.set(row.thicknessIn, (byThickness.get(row.thicknessIn) ?? 0) + surfaceMeasureSqFt);
    return { surfaceMeasureSqFt, boardFeet };
  });
  let totalBoardFeet = 0;
  for (const [thicknessIn, squareFeet] of byThickness) totalBoardFeet += roundHalfUp(squareFeet * countedThicknessIn(thicknessIn));
  return { pieces, totalBoardFeet };
};

/** Board feet of full-sawn or nominal sizes: thickness × width × length / 12, unrounded. */
export const exactBoardFeet = (thicknessIn: number, widthIn: number, lengthFt: number): number => (thicknessIn * widthIn * lengthFt) / 12;

const tallySoftwood = (rows: readonly TallyRow[]): Tally => {
  const pieces = rows.map((row) => ({ boardFeet: exactBoardFeet(row.thicknessIn, row.widthIn, row.lengthFt) * row.count }));
  return { pieces, totalBoardFeet: pieces.reduce((sum, { boardFeet }) => sum + boardFeet, 0) };
};

/**
 * Tallies boards in the order given: the answer of `POST /api/tally`.
 * Hardwood: the total is each thickness rounded half up to whole board feet, then summed. Softwood keeps decimals.
 */
export const tallyBoards = (rule: TallyRule, pieces: readonly TallyRow[]): Tally => (rule === 'hardwood' ? tallyHardwood(pieces) : tallySoftwood(pieces));

/** Square feet of face and lineal feet of boards, for siding and flooring. */
export const coverage = (pieces: readonly TallyRow[]): { readonly squareFeet: number; readonly linealFeet: number } =>
  pieces.reduce(
    (sum, row) => ({ squareFeet: sum.squareFeet + (row.widthIn / 12) * row.lengthFt * row.count, linealFeet: sum.linealFeet + row.lengthFt * row.count }),
    { squareFeet: 0, linealFeet: 0 },
  );

/** Thickness in the trade's words: quarters for hardwood (`5/4`), inches for dimension lumber. */
export function thicknessName(thicknessIn: number, rule: TallyRule): string {
  const quarters = tidy(thicknessIn * 4);
  return rule === 'hardwood' && Number.isInteger(quarters) && quarters >= 3 ? `${quarters}/4` : `${thicknessIn} in`;
}
