import { boardFeet, type Piece, type Stock } from './pieces.ts';
import type { RowBoard } from './row.ts';
import { inches, type Units } from './units.ts';

/**
 * A sawn board, green, placed in the log: `xIn`, `yIn` is its lower left corner from the pith; not `turned`, its width lies
 * along x and its thickness along y; `startFt` is measured from the small end and every board reaches the large end.
 */
export interface Board {
  readonly xIn: number;
  readonly yIn: number;
  readonly thicknessIn: number;
  readonly widthIn: number;
  readonly lengthFt: number;
  readonly startFt: number;
  readonly turned: boolean;
  readonly boardFeet: number;
  /** Index of the piece it was cut for. */
  readonly piece: number;
}

/** Makes a board of a row: `along` is its near edge along the row, `across` its lower edge across it. */
export function boardOf(stock: Stock, row: RowBoard, across: Units, turned: boolean): Board {
  const { choice } = row;
  const piece = stock.pieces[choice.piece] as Piece;
  const lengthFt = stock.lengthsFt[choice.length] as number;
  const [along, other] = [inches(row.at), inches(across)];
  return {
    xIn: turned ? other : along,
    yIn: turned ? along : other,
    thicknessIn: piece.thicknessIn,
    widthIn: choice.widthIn,
    lengthFt,
    startFt: Math.max(0, stock.log.lengthFt - lengthFt),
    turned,
    boardFeet: boardFeet(piece.thicknessIn, choice.widthIn, lengthFt),
    piece: choice.piece,
  };
}

/** Board feet of some boards, unrounded. */
export const totalBoardFeet = (boards: readonly Board[]): number => boards.reduce((sum, board) => sum + board.boardFeet, 0);

/** Value of some boards at their pieces' value per board foot. */
export const totalValue = (boards: readonly Board[], pieces: readonly Piece[]): number =>
  boards.reduce((sum, board) => sum + board.boardFeet * (pieces[board.piece]?.value ?? 1), 0);

/** Extent of a board in the cross-section. */
export function section(board: Board): { readonly left: number; readonly right: number; readonly bottom: number; readonly top: number } {
  const [wide, high] = board.turned ? [board.thicknessIn, board.widthIn] : [board.widthIn, board.thicknessIn];
  return { left: board.xIn, right: board.xIn + wide, bottom: board.yIn, top: board.yIn + high };
}
