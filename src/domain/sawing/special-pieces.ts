import { type Board, totalBoardFeet } from './board.ts';
import type { WantedPiece } from './cut-list.ts';
import { cutsOf } from './cuts.ts';
import { boxedHeart, FOHC_CLEAR_IN, freeOfHeart } from './heart-timber.ts';
import { largeEnd, type LogShape, trimmed } from './log-shape.ts';
import { boardFeet, type Mill } from './pieces.ts';
import type { SawPlan } from './saw-plan.ts';
import { liveEdgeSlabs } from './slabs.ts';
import { inches, unitsUp } from './units.ts';

/** A wanted timber or slab, or a board. */
export type KindSize = Pick<WantedPiece, 'thicknessIn' | 'widthIn' | 'lengthFt' | 'kind'>;

/** Bands looked at for free-of-heart timbers: many logs are tried, and only the number of timbers counts. */
const EFFORT = 24;

const none = (reason: string): SawPlan => ({ pattern: 'cant', boards: [], boardFeet: 0, value: 0, upperBoundValue: 0, boundCovers: '', cuts: [], reason });

/** Why a mill cannot cut a timber of this size in a log of this length, or null. A slab's width is settled by its faces. */
export function hindrance(log: LogShape, mill: Mill, { kind, thicknessIn, widthIn, lengthFt }: KindSize): string | null {
  if (mill.longestFt !== undefined && log.lengthFt > mill.longestFt + 1e-9) return `This log is ${log.lengthFt} ft long and the mill takes logs up to ${mill.longestFt} ft.`;
  if (lengthFt > log.lengthFt + 1e-9) return `The ${kind === 'slab' ? 'slab' : 'timber'} is longer than this log (${log.lengthFt} ft).`;
  if (kind !== 'slab' && mill.widestBoardIn !== undefined && Math.max(thicknessIn, widthIn) > mill.widestBoardIn) return 'This timber is wider than the mill\'s widest board.';
  return null;
}

/** How far from the pith slabs of a thickness begin on a mill: 0 when one may lie across it. */
function slabsBeginAt(log: LogShape, mill: Mill, thicknessIn: number): number {
  const widest = Math.min(mill.widestCutIn ?? Infinity, mill.widestBoardIn ?? Infinity) / 2;
  // Both cuts of a slab go through at most as much wood as the mill cuts, and so does the one that opens it.
  const beyond = Math.sqrt(Math.max(0, (largeEnd(log) / 2) ** 2 - widest ** 2));
  const narrow = beyond > thicknessIn / 2 ? beyond + mill.kerfIn : 0;
  const clear = Math.max((log.heartDefectIn ?? 0) / 2, narrow);
  return clear > 0 ? inches(unitsUp(Math.max(clear, mill.kerfIn / 2))) : 0;
}

/**
 * The slabs of one size that a log gives, sawn through and through: boards as wide as the narrower face where the slab begins, the
 * middle ones first. The pith lies in the middle of one, or they keep clear of a rotten heart and of cuts wider than the mill makes.
 */
export function slabsIn(log: LogShape, mill: Mill, size: KindSize): Board[] {
  const { thicknessIn, widthIn, lengthFt } = size;
  const part = hindrance(log, mill, size) === null ? trimmed(log, Math.max(0, log.lengthFt - lengthFt), 0) : null;
  if (!part) return [];
  const startFt = log.lengthFt - lengthFt;
  return liveEdgeSlabs(part, mill.kerfIn, thicknessIn, widthIn, slabsBeginAt(log, mill, thicknessIn))
    .sort((a, b) => Math.abs(a.bottomIn + thicknessIn / 2) - Math.abs(b.bottomIn + thicknessIn / 2))
    .map(({ bottomIn, narrowFaceIn }): Board => {
      const wide = Math.max(widthIn, Math.floor(narrowFaceIn.small * 8 + 1e-9) / 8);
      return { xIn: -wide / 2, yIn: bottomIn, thicknessIn, widthIn: wide, lengthFt, startFt, turned: false, boardFeet: boardFeet(thicknessIn, wide, lengthFt), piece: 0 };
    });
}

/** The plan of one log for pieces of one kind alone, with no more than `most` of them; its boards are all of this piece. */
export function planFor(log: LogShape, mill: Mill, size: KindSize, most: number): SawPlan {
  const { kind, thicknessIn, widthIn, lengthFt } = size;
  const timber = { thicknessIn, widthIn, lengthFt };
  const hindered = hindrance(log, mill, size);
  if (hindered !== null) return none(hindered);
  if (kind === 'slab') {
    const boards = slabsIn(log, mill, size).slice(0, most);
    const feet = totalBoardFeet(boards);
    if (boards.length === 0) return none('No slab of this size fits in this log on this mill.');
    return { pattern: 'live', boards, boardFeet: feet, value: feet, upperBoundValue: feet, boundCovers: 'slabs of this thickness with the pith in the middle of one', cuts: cutsOf(log, mill.kerfIn, boards, false) };
  }
  if (kind === 'free-of-heart') {
    const plan = freeOfHeart({ log, mill, timber: { ...timber, count: most }, pieces: [] }, FOHC_CLEAR_IN, EFFORT);
    return plan.boards.length > 0 ? plan : none(plan.reason ?? 'No timber of this size fits clear of the heart.');
  }
  return log.heartDefectIn ? none('A rotten heart cannot be boxed in a timber.') : boxedHeart({ log, mill, timber, pieces: [] });
}

const LARGEST_LOG_IN = 60;

/** The smallest whole-inch log, at the small end, that gives one piece of its kind in its own length; null when none up to 60 in does. */
export function leastLogOf(piece: KindSize, mill: Mill): number | null {
  for (let smallEndIn = 4; smallEndIn <= LARGEST_LOG_IN; smallEndIn++) if (planFor({ smallEndIn, lengthFt: Math.max(4, piece.lengthFt) }, mill, piece, 1).boards.length > 0) return smallEndIn;
  return null;
}
