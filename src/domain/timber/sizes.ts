import { boardThickness, boardWidth, dimensionThickness, dimensionWidth, hardwoodThickness, type DressedSizeRow } from './data/sizes-table.ts';
import { sizeAtMoisture } from './drying.ts';
import { tidy } from './rounding.ts';

/** Boards are under 2 in thick, dimension 2 to under 5 in, timbers 5 in and over (PS 20). */
export type LumberClass = 'board' | 'dimension' | 'timber';

export interface DressedSize {
  readonly dryIn: number;
  readonly greenIn: number;
}

/** The class of a softwood piece by its nominal thickness, the lesser of its two faces. */
export const lumberClass = (nominalThicknessIn: number): LumberClass => (nominalThicknessIn < 2 ? 'board' : nominalThicknessIn < 5 ? 'dimension' : 'timber');

const timber = (nominalIn: number): DressedSize => ({
  dryIn: nominalIn - (nominalIn >= 16 ? 1 : nominalIn >= 7 ? 0.75 : 0.5),
  greenIn: nominalIn - 0.5,
});

const look = (rows: readonly DressedSizeRow[], nominalIn: number): DressedSize | null => {
  const row = rows.find((candidate) => candidate.nominalIn === nominalIn);
  return row && row.greenIn !== null ? { dryIn: row.dryIn, greenIn: row.greenIn } : null;
};

/**
 * Least dressed size of a nominal softwood face, inches, dry (19 % or less) and green; null for a size the standard does not list.
 * Source: American Softwood Lumber Standard PS 20.
 */
export function dressedSoftwood(face: 'thickness' | 'width', nominalIn: number, lumber: LumberClass): DressedSize | null {
  if (lumber === 'timber') return nominalIn >= 5 ? timber(nominalIn) : null;
  if (face === 'thickness') return look(lumber === 'board' ? boardThickness : dimensionThickness, nominalIn);
  return look(lumber === 'board' ? boardWidth : dimensionWidth, nominalIn);
}

/** Thickness of hardwood surfaced two sides, inches, by its rough thickness; null when the trade lists none. From memory of the trade's practice. */
export const surfacedHardwood = (roughIn: number): number | null => hardwoodThickness.find((row) => row.nominalIn === roughIn)?.dryIn ?? null;

/**
 * What to saw green for a finished size after drying and planing, inches: (wanted + planing) / (what is left of an inch at
 * the final moisture). `planingIn` is taken off both faces together; `shrinkagePct` is green to oven-dry in that direction.
 */
export const greenSizeFor = (wantedIn: number, planingIn: number, shrinkagePct: number, finalMoisturePct: number): number =>
  tidy((wantedIn + planingIn) / sizeAtMoisture(1, shrinkagePct, finalMoisturePct));

/** Up to the next 1/16 or 1/32 of an inch, so that a setting on the mill never comes out under size. */
export const upToFraction = (inches: number, denominator: 8 | 16 | 32): number => Math.ceil(tidy(inches * denominator)) / denominator;
