import type { PieceRead } from '~/domain/listing/rows.ts';
import { greenSize } from '~/domain/sawing/green-size.ts';
import { leftOf } from '~/domain/trade/still-wanted.ts';
import type { TalliedBoard } from '~/domain/trade/tally-count.ts';
import { sizeAtMoisture, shrinkageByGrain } from './drying.ts';
import { dressedSoftwood, lumberClass } from './sizes.ts';
import { speciesOf } from './species.ts';

interface Section {
  readonly thicknessIn: number;
  readonly widthIn: number;
}

/** A wanted piece beside what was sawn for it and what that comes to when dry, inches. */
export interface PieceWhenDry {
  readonly piece: PieceRead;
  readonly made: number;
  /** Boards of its thickness that are wider, and long enough: they hold it too once they are edged. */
  readonly wider: number;
  readonly green: Section;
  /** Flat-sawn, at the moisture asked for; null when the species has no published shrinkage. */
  readonly dry: Section | null;
  /** What it has to hold in the end: the dressed size of a store size; null for full-sawn, which is wanted as it comes from the saw. */
  readonly finished: Section | null;
  /** What is left over the finished size for the planer, both faces together; negative where the dry board is too small. */
  readonly toPlane: Section | null;
}

/** Dressed dry sizes of a store size (American Softwood Lumber Standard PS 20); null for what the standard does not list. */
function dressed({ thicknessIn, widthIn, sizing }: PieceRead): Section | null {
  if (sizing === 'full-sawn') return null;
  const kind = lumberClass(thicknessIn);
  const [thick, wide] = [dressedSoftwood('thickness', thicknessIn, kind), dressedSoftwood('width', widthIn, kind)];
  return thick && wide ? { thicknessIn: thick.dryIn, widthIn: wide.dryIn } : null;
}

/**
 * The cut list against the boards as they will be: how many were sawn of each piece, and its section at a moisture content. Boards are
 * tallied under the size as written, so a store size is shrunk from what is sawn green for it.
 * @param speciesOfPiece a species code for the boards of a piece
 */
export function againstList(pieces: readonly PieceRead[], boards: readonly TalliedBoard[], speciesOfPiece: (piece: PieceRead) => string, moisturePct: number): PieceWhenDry[] {
  return pieces.map((piece) => {
    const green = greenSize(piece);
    const { radial, tangential } = speciesOf(speciesOfPiece(piece)).shrinkagePct;
    const shrinkage = radial === null || tangential === null ? null : shrinkageByGrain({ radial, tangential }, 'flat');
    const dry = shrinkage && { thicknessIn: sizeAtMoisture(green.thicknessIn, shrinkage.thicknessPct, moisturePct), widthIn: sizeAtMoisture(green.widthIn, shrinkage.widthPct, moisturePct) };
    const finished = dressed(piece);
    const toPlane = dry && finished && { thicknessIn: dry.thicknessIn - finished.thicknessIn, widthIn: dry.widthIn - finished.widthIn };
    const wider = boards.filter((board) => board.kind === 'board' && board.thicknessIn === piece.thicknessIn && board.widthIn > piece.widthIn && board.lengthFt >= piece.lengthFt).reduce((sum, { count }) => sum + count, 0);
    return { piece, made: piece.count - leftOf(piece, boards), wider, green, dry, finished, toPlane };
  });
}
