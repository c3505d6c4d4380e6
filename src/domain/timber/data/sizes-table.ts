/**
 * Nominal and least dressed sizes of softwood lumber, inches. Source: American Softwood Lumber Standard, Voluntary Product
 * Standard PS 20 (through a public size table); hardwood surfaced two sides from memory of the hardwood trade's practice.
 * The source file is `tests/reference/data/sizes_ps20.csv`. Timbers (5 in and over) are a rule, not rows: see `sizes.ts`.
 */
export interface DressedSizeRow {
  readonly nominalIn: number;
  readonly dryIn: number;
  readonly greenIn: number | null;
}

// prettier-ignore
export const boardThickness: readonly DressedSizeRow[] = [
  { nominalIn: 0.375, dryIn: 0.3125, greenIn: 0.34375 },
  { nominalIn: 0.5, dryIn: 0.4375, greenIn: 0.46875 },
  { nominalIn: 0.625, dryIn: 0.5625, greenIn: 0.59375 },
  { nominalIn: 0.75, dryIn: 0.625, greenIn: 0.6875 },
  { nominalIn: 1, dryIn: 0.75, greenIn: 0.78125 },
  { nominalIn: 1.25, dryIn: 1, greenIn: 1.03125 },
  { nominalIn: 1.5, dryIn: 1.25, greenIn: 1.28125 },
];

// prettier-ignore
export const boardWidth: readonly DressedSizeRow[] = [
  { nominalIn: 2, dryIn: 1.5, greenIn: 1.5625 },
  { nominalIn: 3, dryIn: 2.5, greenIn: 2.5625 },
  { nominalIn: 4, dryIn: 3.5, greenIn: 3.5625 },
  { nominalIn: 5, dryIn: 4.5, greenIn: 4.625 },
  { nominalIn: 6, dryIn: 5.5, greenIn: 5.625 },
  { nominalIn: 7, dryIn: 6.5, greenIn: 6.625 },
  { nominalIn: 8, dryIn: 7.25, greenIn: 7.5 },
  { nominalIn: 9, dryIn: 8.25, greenIn: 8.5 },
  { nominalIn: 10, dryIn: 9.25, greenIn: 9.5 },
  { nominalIn: 11, dryIn: 10.25, greenIn: 10.5 },
  { nominalIn: 12, dryIn: 11.25, greenIn: 11.5 },
  { nominalIn: 14, dryIn: 13.25, greenIn: 13.5 },
  { nominalIn: 16, dryIn: 15.25, greenIn: 15.5 },
];

// prettier-ignore
export const dimensionThickness: readonly DressedSizeRow[] = [
  { nominalIn: 2, dryIn: 1.5, greenIn: 1.5625 },
  { nominalIn: 2.5, dryIn: 2, greenIn: 2.0625 },
  { nominalIn: 3, dryIn: 2.5, greenIn: 2.5625 },
  { nominalIn: 3.5, dryIn: 3, greenIn: 3.0625 },
  { nominalIn: 4, dryIn: 3.5, greenIn: 3.5625 },
  { nominalIn: 4.5, dryIn: 4, greenIn: 4.0625 },
];

// prettier-ignore
export const dimensionWidth: readonly DressedSizeRow[] = [
  { nominalIn: 2, dryIn: 1.5, greenIn: 1.5625 },
  { nominalIn: 2.5, dryIn: 2, greenIn: 2.0625 },
  { nominalIn: 3, dryIn: 2.5, greenIn: 2.5625 },
  { nominalIn: 3.5, dryIn: 3, greenIn: 3.0625 },
  { nominalIn: 4, dryIn: 3.5, greenIn: 3.5625 },
  { nominalIn: 4.5, dryIn: 4, greenIn: 4.0625 },
  { nominalIn: 5, dryIn: 4.5, greenIn: 4.625 },
  { nominalIn: 6, dryIn: 5.5, greenIn: 5.625 },
  { nominalIn: 8, dryIn: 7.25, greenIn: 7.5 },
  { nominalIn: 10, dryIn: 9.25, greenIn: 9.5 },
  { nominalIn: 12, dryIn: 11.25, greenIn: 11.5 },
  { nominalIn: 14, dryIn: 13.25, greenIn: 13.5 },
  { nominalIn: 16, dryIn: 15.25, greenIn: 15.5 },
];

// prettier-ignore
export const hardwoodThickness: readonly DressedSizeRow[] = [
  { nominalIn: 0.375, dryIn: 0.1875, greenIn: null },
  { nominalIn: 0.5, dryIn: 0.3125, greenIn: null },
  { nominalIn: 0.625, dryIn: 0.4375, greenIn: null },
  { nominalIn: 0.75, dryIn: 0.5625, greenIn: null },
  { nominalIn: 1, dryIn: 0.8125, greenIn: null },
  { nominalIn: 1.25, dryIn: 1.0625, greenIn: null },
  { nominalIn: 1.5, dryIn: 1.3125, greenIn: null },
  { nominalIn: 2, dryIn: 1.75, greenIn: null },
  { nominalIn: 3, dryIn: 2.75, greenIn: null },
  { nominalIn: 4, dryIn: 3.75, greenIn: null },
];
