import type { TalliedBoard } from './tally-count.ts';

/** A wanted size: thickness and width as written, and the least length. */
export interface WantedSize {
  readonly thicknessIn: number;
  readonly widthIn: number;
  readonly lengthFt: number;
  readonly count: number;
}

/** How many of a wanted piece the tally still lacks: boards of its very section, at least as long, count for it. */
export function leftOf(piece: WantedSize, boards: readonly TalliedBoard[]): number {
  const fits = ({ kind, thicknessIn, widthIn, lengthFt }: TalliedBoard): boolean => kind === 'board' && thicknessIn === piece.thicknessIn && widthIn === piece.widthIn && lengthFt >= piece.lengthFt;
  return Math.max(0, piece.count - boards.filter(fits).reduce((sum, { count }) => sum + count, 0));
}
