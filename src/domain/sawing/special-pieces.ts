import { type Board, totalBoardFeet } from './board.ts';
import type { WantedPiece } from './cut-list.ts';
import { cutsOf } from './cuts.ts';
import { boxedHeart, FOHC_CLEAR_IN, freeOfHeart } from './heart-timber.ts';
import { cubicFeet, type LogShape } from './log-shape.ts';
import { boardFeet, type Mill } from './pieces.ts';
import type { PieceKind } from './piece-kind.ts';
import type { SawPlan } from './saw-plan.ts';
import { liveEdgeSlabs } from './slabs.ts';

/** A wanted piece that may have to lie in its log in a certain way; a slab's width is the least that both of its faces have. */
export interface KindPiece extends WantedPiece {
  /** A board when left out. */
  readonly kind?: PieceKind | undefined;
}

/** A log given over to timbers or slabs. */
export interface Dedicated {
  readonly id: string;
  readonly plan: SawPlan;
}

/** Bands looked at for free-of-heart timbers: many logs are tried, and only the number of timbers counts. */
const EFFORT = 24;

const none = (reason: string): SawPlan => ({ pattern: 'cant', boards: [], boardFeet: 0, value: 0, upperBoundValue: 0, boundCovers: '', cuts: [], reason });

/** A log sawn through and through into slabs of one thickness, as boards as wide as the narrower face at the small end; at most `most` of them, the middle ones first. */
function slabPlan(log: LogShape, mill: Mill, piece: KindPiece, most: number): SawPlan {
  if (mill.longestFt !== undefined && log.lengthFt > mill.longestFt + 1e-9) return none(`This log is ${log.lengthFt} ft long and the mill takes logs up to ${mill.longestFt} ft.`);
  if (piece.lengthFt > log.lengthFt + 1e-9) return none('The slab is longer than this log.');
  const heart = (log.heartDefectIn ?? 0) / 2;
  const cut = Math.min(mill.widestCutIn ?? Infinity, mill.widestBoardIn ?? Infinity);
  const startFt = log.lengthFt - piece.lengthFt;
  const slabs = liveEdgeSlabs(log, mill.kerfIn, piece.thicknessIn, piece.widthIn)
    .filter(({ bottomIn, thicknessIn, wideFaceIn }) => wideFaceIn.large <= cut + 1e-9 && (heart === 0 || bottomIn >= heart || bottomIn + thicknessIn <= -heart))
    .sort((a, b) => Math.abs(a.bottomIn + a.thicknessIn / 2) - Math.abs(b.bottomIn + b.thicknessIn / 2));
  const boards = slabs.slice(0, most).map(({ bottomIn, thicknessIn, narrowFaceIn }): Board => {
    const widthIn = Math.floor(narrowFaceIn.small * 8 + 1e-9) / 8;
    return { xIn: -widthIn / 2, yIn: bottomIn, thicknessIn, widthIn, lengthFt: piece.lengthFt, startFt, turned: false, boardFeet: boardFeet(thicknessIn, widthIn, piece.lengthFt), piece: 0 };
  });
  const feet = totalBoardFeet(boards);
  return { pattern: 'live', boards, boardFeet: feet, value: feet, upperBoundValue: feet, boundCovers: 'slabs of this thickness with the pith in the middle of one', cuts: cutsOf(log, mill.kerfIn, boards, false) };
}

/** The plan of one log for a piece of its kind, with no more than `most` of them; its boards are all of this piece. */
export function planFor(log: LogShape, mill: Mill, piece: KindPiece, most: number): SawPlan {
  const { thicknessIn, widthIn, lengthFt } = piece;
  const timber = { thicknessIn, widthIn, lengthFt };
  if (mill.widestBoardIn !== undefined && Math.max(thicknessIn, widthIn) > mill.widestBoardIn) return none('This timber is wider than the mill\'s widest board.');
  if (piece.kind === 'slab') return slabPlan(log, mill, piece, most);
  if (piece.kind === 'free-of-heart') {
    const plan = freeOfHeart({ log, mill, timber: { ...timber, count: most }, pieces: [] }, FOHC_CLEAR_IN, EFFORT);
    return plan.boards.length > 0 ? plan : none(plan.reason ?? 'No timber of this size fits clear of the heart.');
  }
  return log.heartDefectIn ? none('A rotten heart cannot be boxed in a timber.') : boxedHeart({ log, mill, timber, pieces: [] });
}

/** A plan with some of its boards left out. */
const only = (plan: SawPlan, log: LogShape, mill: Mill, boards: readonly Board[]): SawPlan => {
  const feet = totalBoardFeet(boards);
  return { ...plan, boards, boardFeet: feet, value: feet, cuts: boards.length === plan.boards.length ? plan.cuts : cutsOf(log, mill.kerfIn, boards, false) };
};

/**
 * Gives logs over to timbers and slabs, piece after piece in the order of the list, the logs that give most of a piece for their
 * volume first. A simple rule, not an optimum: such pieces are few, and each asks for a log of its own.
 * @returns the logs taken, whose boards name their piece by its index in `pieces`, and how many of each piece are made.
 */
export function dedicate(logs: readonly { readonly id: string; readonly core: LogShape }[], mill: Mill, pieces: readonly KindPiece[]): { readonly taken: readonly Dedicated[]; readonly made: readonly number[] } {
  const free = new Map(logs.map(({ id, core }) => [id, core]));
  const taken: Dedicated[] = [];
  const made = pieces.map((piece, index) => {
    if ((piece.kind ?? 'board') === 'board') return 0;
    const plans = new Map<string, SawPlan>();
    const planOf = (core: LogShape): SawPlan => {
      const key = JSON.stringify(core);
      const plan = plans.get(key) ?? planFor(core, mill, piece, piece.count);
      plans.set(key, plan);
      return plan;
    };
    let left = piece.count;
    while (left > 0) {
      let best: { id: string; core: LogShape; worth: number } | null = null;
      for (const [id, core] of free) {
        const worth = Math.min(left, planOf(core).boards.length) / cubicFeet(core);
        if (worth > (best?.worth ?? 0) + 1e-12) best = { id, core, worth };
      }
      if (!best) break;
      const { id, core } = best;
      const boards = planOf(core).boards.slice(0, left);
      free.delete(id);
      left -= boards.length;
      taken.push({ id, plan: only(planOf(core), core, mill, boards.map((board) => ({ ...board, piece: index }))) });
    }
    return piece.count - left;
  });
  return { taken, made };
}

const LARGEST_LOG_IN = 60;

/** The smallest whole-inch log, at the small end, that gives one piece of its kind in its own length; null when none up to 60 in does. */
export function leastLogOf(piece: KindPiece, mill: Mill): number | null {
  for (let smallEndIn = 4; smallEndIn <= LARGEST_LOG_IN; smallEndIn++) if (planFor({ smallEndIn, lengthFt: Math.max(4, piece.lengthFt) }, mill, piece, 1).boards.length > 0) return smallEndIn;
  return null;
}
