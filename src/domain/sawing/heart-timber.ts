import { bandWorks } from './band.ts';
import { type Board, totalBoardFeet, totalValue } from './board.ts';
import { cutsOf } from './cuts.ts';
import { acrossLog, mirrored } from './layers.ts';
import { boardsOfLayers, flatStack } from './live.ts';
import { type LogShape, radiusAt } from './log-shape.ts';
import { blockedHalfWidth, boardFeet, type Mill, type Piece, stockOf } from './pieces.ts';
import { sawPlan, type SawPlan } from './saw-plan.ts';
import { inches, unitsUp } from './units.ts';

/** A timber of its own length, green. */
export interface Timber {
  readonly thicknessIn: number;
  readonly widthIn: number;
  readonly lengthFt: number;
  readonly value?: number | undefined;
  /** At most so many, for timbers free of heart centre; no limit when left out. */
  readonly count?: number | undefined;
}

export interface TimberRequest {
  readonly log: LogShape;
  readonly mill: Mill;
  readonly timber: Timber;
  /** Sizes for the wood round the timber. */
  readonly pieces: readonly Piece[];
  readonly waneAllowanceIn?: number | undefined;
}

const none = (reason: string): SawPlan => ({ pattern: 'cant', boards: [], boardFeet: 0, value: 0, upperBoundValue: 0, boundCovers: '', cuts: [], reason });

/**
 * One timber with the heart boxed in its middle, and boards from all four sides of it. The timber's place is given by the pith; the
 * boards round it are the best there are (exact when every thickness has one length).
 */
export function boxedHeart({ log, mill, timber, pieces, waneAllowanceIn = 0 }: TimberRequest): SawPlan {
  const { thicknessIn, widthIn, lengthFt, value = 1 } = timber;
  if (mill.longestFt !== undefined && log.lengthFt > mill.longestFt + 1e-9) return none(`This log is ${log.lengthFt} ft long and the mill takes logs up to ${mill.longestFt} ft.`);
  if (lengthFt > log.lengthFt + 1e-9) return none(`The timber is longer than this log (${log.lengthFt} ft).`);
  const startFt = log.lengthFt - lengthFt;
  if (Math.hypot(thicknessIn, widthIn) / 2 > radiusAt(log, startFt) + waneAllowanceIn + 1e-9) return none('This log is too small to box the heart in a timber of this size.');
  const all: readonly Piece[] = [...pieces, { thicknessIn, widthIn, lengthFt, value }];
  const stock = stockOf(log, mill, pieces, waneAllowanceIn);
  const half = Math.ceil(unitsUp(thicknessIn) / 2);
  if (blockedHalfWidth(stock) > half || (mill.widestCutIn !== undefined && Math.min(thicknessIn, widthIn) > mill.widestCutIn)) return none('The faces of this timber are wider cuts than the mill makes.');
  const own: Board = { xIn: -widthIn / 2, yIn: -thicknessIn / 2, thicknessIn, widthIn, lengthFt, startFt, turned: false, boardFeet: boardFeet(thicknessIn, widthIn, lengthFt), piece: pieces.length };
  const band = { below: half, above: half };
  const flats = flatStack(stock);
  const flat = acrossLog(stock);
  const side = bandWorks(stock).columnsFrom(band, Math.ceil(unitsUp(widthIn) / 2) + stock.kerf);
  const boards = [
    own,
    ...boardsOfLayers(stock, flat, flats.layers(half + stock.kerf)),
    ...boardsOfLayers(stock, flat, mirrored(flats.layers(half + stock.kerf))),
    ...boardsOfLayers(stock, acrossLog(stock, -half, half), [...side, ...mirrored(side)], true),
  ];
  const worth = totalValue(boards, all);
  return { pattern: 'cant', boards, boardFeet: totalBoardFeet(boards), value: worth, upperBoundValue: worth, boundCovers: 'boards round this timber, the heart in its middle', cuts: cutsOf(log, mill.kerfIn, boards, false) };
}

/** How far a timber free of heart centre keeps from the pith (common practice, no source). */
export const FOHC_CLEAR_IN = 1;

/** Timbers and boards free of heart centre: nothing lies within `clearIn` of the pith. */
export const freeOfHeart = ({ log, mill, timber, pieces, waneAllowanceIn }: TimberRequest, clearIn = FOHC_CLEAR_IN, effort?: number): SawPlan =>
  sawPlan({ log: { ...log, heartDefectIn: Math.max(log.heartDefectIn ?? 0, 2 * clearIn) }, mill, pattern: 'cant', pieces: [timber, ...pieces], waneAllowanceIn, effort });

/** The largest square timber, in whole inches, that boxes the heart of a log of full length. */
export function largestBoxedHeartIn(log: LogShape): number {
  const side = Math.SQRT2 * (log.smallEndIn / 2);
  return Math.floor(inches(unitsUp(side)) + 1e-9);
}
