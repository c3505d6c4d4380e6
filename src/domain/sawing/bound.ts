import type { Choice, Stock } from './pieces.ts';

/**
 * What no plan of any pattern passes, by area. At any place along the log, boards widened by a kerf do not overlap and lie within
 * the wood widened by a kerf's half diagonal, so their sections cannot be worth more than that circle at the best worth per area.
 * A board spreads its value over its length in any way that is the same for all boards of that length; two ways are tried: evenly
 * (good for sizes of their own lengths), and as what each foot adds (good where every length may be cut).
 */
export function areaBound(stock: Stock): number {
  const { kerf, lengthsFt, groups } = stock;
  const lengths = lengthsFt.map((_, index) => index).reverse(); // shortest first
  const circle = (length: number): number => Math.PI * (Math.sqrt(stock.radiusSquared[length] ?? 0) + kerf * Math.SQRT1_2) ** 2;
  const feet = (length: number | undefined): number => (length === undefined ? 0 : (lengthsFt[length] ?? 0));
  const overStretches = (worth: (choices: readonly Choice[], length: number, shorter: number | undefined) => number): number =>
    lengths.reduce((sum, length, order) => {
      let density = 0;
      for (const { thickness, widths } of groups) {
        for (const { width, choices } of widths) density = Math.max(density, worth(choices, length, lengths[order - 1]) / ((width + kerf) * (thickness + kerf)));
      }
      return sum + density * circle(length);
    }, 0);
  const worthFrom = (choices: readonly Choice[], index: number | undefined): number =>
    index === undefined ? 0 : choices.reduce((most, choice) => (choice.length >= index ? Math.max(most, choice.value) : most), 0);
  const added = overStretches((choices, length, shorter) => worthFrom(choices, length) - worthFrom(choices, shorter));
  // Boards that reach a stretch are at least as long as it is far from the large end.
  const evenly = overStretches((choices, length, shorter) =>
    choices.reduce((most, choice) => (choice.length <= length ? Math.max(most, choice.value / feet(choice.length)) : most), 0) * (feet(length) - feet(shorter)),
  );
  return Math.min(added, evenly);
}

/** Words for what a bound covers, to stand beside it. */
export const BOUND_COVERS = {
  live: 'every live plan of this log, at any opening',
  cant: 'every plan of this log in layers round a cant, wherever its faces lie',
  quartersawn: 'every quartersawn plan of this log, at any opening',
  best: 'every live, cant and quartersawn plan of this log',
} as const;

