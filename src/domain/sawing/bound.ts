import type { Stock } from './pieces.ts';

/**
 * What no plan of any pattern passes, by area. Foot by foot along the log, boards widened by a kerf do not overlap and lie within
 * the wood widened by a kerf's half diagonal, so their sections cannot be worth more than that circle at the best worth per area.
 */
export function areaBound(stock: Stock): number {
  const { kerf, lengthsFt, groups } = stock;
  const lengths = lengthsFt.map((_, index) => index).reverse(); // shortest first
  return lengths.reduce((sum, length, order) => {
    const shorter = lengths[order - 1];
    let density = 0;
    for (const { thickness, widths } of groups) {
      for (const { width, choices } of widths) {
        const worthTo = (index: number | undefined): number =>
          index === undefined ? 0 : choices.reduce((most, choice) => (choice.length >= index ? Math.max(most, choice.value) : most), 0);
        density = Math.max(density, (worthTo(length) - worthTo(shorter)) / ((width + kerf) * (thickness + kerf)));
      }
    }
    const radius = Math.sqrt(stock.radiusSquared[length] ?? 0) + kerf * Math.SQRT1_2;
    return sum + density * Math.PI * radius ** 2;
  }, 0);
}

/** Words for what a bound covers, to stand beside it. */
export const BOUND_COVERS = {
  live: 'every live plan of this log, at any opening',
  cant: 'every plan of this log in layers round a cant, wherever its faces lie',
  quartersawn: 'every quartersawn plan of this log, at any opening',
  best: 'every live, cant and quartersawn plan of this log',
} as const;

