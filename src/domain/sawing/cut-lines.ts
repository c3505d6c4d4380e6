import type { Cut } from './cuts.ts';
import { largeEnd, type LogShape } from './log-shape.ts';

/** Where a cut runs in the drawing of the log's end as it first lay. */
export interface CutLine {
  readonly order: number;
  /** How far the log is turned for it, degrees, clockwise seen from the drawn end: the cut lies level once it is turned. */
  readonly turnDeg: number;
  /** From the pith to the cut along the turned log's upright, in; negative below the pith. */
  readonly fromPithIn: number;
}

/** What the cuts made so far have left, as a rectangle round the pith in the drawing, y upward; infinite where nothing has been cut. */
export interface Left {
  readonly left: number;
  readonly right: number;
  readonly bottom: number;
  readonly top: number;
}

/** What stands between the innermost cuts of each side. Cuts that quarter the log leave it whole: its quarters are drawn together. */
export function leftAfter(made: readonly CutLine[]): Left {
  const nearest = (turnDeg: number): number => Math.min(...made.filter((line) => line.turnDeg === turnDeg).map(({ fromPithIn }) => fromPithIn));
  return { left: -nearest(270), right: nearest(90), bottom: -nearest(180), top: nearest(0) };
}

/**
 * The lines of a plan's cuts; of a quartered log those that quarter it, because its quarters then lie on the bed one by one. A height is
 * over what lies on the bed: the bark, with the pith half the large end's diameter over it, or the flat that the last cut from the side
 * opposite has left.
 * @param core the wood that was planned in
 */
export function cutLines(core: LogShape, cuts: readonly Cut[]): CutLine[] {
  const pith = largeEnd(core) / 2;
  if (cuts.some(({ kind }) => kind === 'quarter')) return cuts.filter(({ kind }) => kind === 'quarter').map(({ order, turnDeg, heightIn }) => ({ order, turnDeg, fromPithIn: heightIn - pith }));
  const surfaces = new Map<number, number>();
  return cuts.map(({ order, turnDeg, heightIn }) => {
    const fromPithIn = heightIn - (surfaces.get((turnDeg + 180) % 360) ?? pith);
    surfaces.set(turnDeg, fromPithIn);
    return { order, turnDeg, fromPithIn };
  });
}
