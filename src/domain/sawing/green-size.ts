import { dressedSoftwood, lumberClass, upToFraction } from '../timber/sizes.ts';

/** A wanted piece as the landowner wrote it, inches. */
export interface Written {
  readonly thicknessIn: number;
  readonly widthIn: number;
  readonly sizing: 'full-sawn' | 'store-size';
}

/** Taken off both faces together by planing (common practice, no source). */
export const PLANING_IN = 1 / 8;

/**
 * What to saw green for a wanted piece, inches. Full-sawn: the size as written. Store size: the standard's least green dressed size
 * and what planing takes, up to the next 1/16 in; a size the standard does not list is sawn as written.
 * Source: American Softwood Lumber Standard PS 20, green sizes.
 */
export function greenSize({ thicknessIn, widthIn, sizing }: Written): { readonly thicknessIn: number; readonly widthIn: number } {
  const kind = lumberClass(thicknessIn);
  const thick = dressedSoftwood('thickness', thicknessIn, kind);
  const wide = dressedSoftwood('width', widthIn, kind);
  if (sizing === 'full-sawn' || !thick || !wide) return { thicknessIn, widthIn };
  return { thicknessIn: upToFraction(thick.greenIn + PLANING_IN, 16), widthIn: upToFraction(wide.greenIn + PLANING_IN, 16) };
}
