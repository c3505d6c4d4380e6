import { formatInches } from '../measure.ts';
import type { CutKind } from './cuts.ts';

/** What a cut does. */
export const cutKindWords: Readonly<Record<CutKind, string>> = { slab: 'slab off', board: 'board off', face: 'face of the cant', quarter: 'quarter the log' };

/** How the log is turned before a cut. @param degrees from how it lay for the cut before, less than a whole turn */
export const turnWords = (degrees: number): string => (degrees === 0 ? 'as it lies' : degrees > 180 ? `turn back ${360 - degrees}°` : `turn ${degrees}°`);

/** A height as it is set at the mill, to the thirty-second of an inch. */
export const heightWords = (inches: number): string => formatInches(inches, 32);

/**
 * How the quarters of a quartered log lie for their cuts; empty for other logs. A quarter has no flat to lie on level, so it is blocked.
 * @param coreLargeEndIn the large end of the wood that was planned in
 */
export const quarterWords = (cuts: readonly { readonly kind: CutKind }[], coreLargeEndIn: number): string =>
  cuts.some(({ kind }) => kind === 'quarter') ? `Block up each quarter so that its boards lie level as drawn, its pith edge ${heightWords(coreLargeEndIn / 2)} over the bed at both ends: the heights of its cuts hold for that.` : '';
