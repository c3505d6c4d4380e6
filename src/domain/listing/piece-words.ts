import { formatFeet, formatFraction } from '../measure.ts';
import { dressedSoftwood, lumberClass } from '../timber/sizes.ts';
import type { PieceTyped } from './draft.ts';
import type { PieceRead } from './rows.ts';

type Sized = Pick<PieceRead, 'thicknessIn' | 'widthIn' | 'lengthFt' | 'count' | 'sizing'>;

const quarters: Readonly<Record<string, string>> = { '1.25': '5/4', '1.5': '6/4' };

/** A thickness as the trade says it: whole inches as they are, the in-between hardwood ones in quarters. */
const thickness = (inches: number): string => quarters[String(inches)] ?? formatFraction(inches);

/** `2 × 6 in × 8 ft` */
export const pieceSize = (piece: Sized): string => `${thickness(piece.thicknessIn)} × ${formatFraction(piece.widthIn)} in × ${formatFeet(piece.lengthFt)}`;

/** What a store size measures once planed and dry, by the softwood standard; null when the standard lists no such size. */
export function dressedSize(piece: Sized): string | null {
  const kind = lumberClass(piece.thicknessIn);
  const thick = dressedSoftwood('thickness', piece.thicknessIn, kind);
  const wide = dressedSoftwood('width', piece.widthIn, kind);
  return thick && wide ? `${formatFraction(thick.dryIn)} × ${formatFraction(wide.dryIn)} in` : null;
}

/** Board feet of all the pieces of a size, on the size as written. */
export const pieceBoardFeet = (piece: Sized): number => (piece.thicknessIn * piece.widthIn * piece.lengthFt * piece.count) / 12;

/** What a row of the cut list comes to: its board feet, and what a store size measures. */
export function pieceSaid(piece: Sized): string {
  const feet = `${pieceBoardFeet(piece).toLocaleString('en-US', { maximumFractionDigits: 1 })} bf lumber tally on the written size`;
  if (piece.sizing === 'full-sawn') return feet;
  const dressed = dressedSize(piece);
  return `${feet}; ${dressed ? `planed and dry ${dressed}` : 'not a size stores list, sawn to the size written'}`;
}

/** A piece as its form's row again. */
export const typedPiece = ({ label, thicknessIn, widthIn, lengthFt, count, sizing, kind, forDwelling }: PieceRead): PieceTyped => ({
  label, thickness: thickness(thicknessIn), width: formatFraction(widthIn), length: formatFeet(lengthFt), count: String(count), sizing, kind, dwelling: forDwelling ? 'on' : '',
});
