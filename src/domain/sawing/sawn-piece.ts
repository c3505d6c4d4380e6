import type { PieceRead } from '../listing/rows.ts';
import { greenSize } from './green-size.ts';

/** A piece of a cut list with what is sawn for it. */
export interface SawnPiece extends PieceRead {
  readonly id: string;
  readonly green: { readonly thicknessIn: number; readonly widthIn: number };
}

/** The pieces of a cut list with the green sizes that are sawn for them. */
export const sawnPieces = (pieces: readonly PieceRead[]): SawnPiece[] => pieces.map((piece, index) => ({ ...piece, id: String(index + 1), green: greenSize(piece) }));
