import { formatInches } from '../measure.ts';
import type { CutKind } from './cuts.ts';

/** What a cut does. */
export const cutKindWords: Readonly<Record<CutKind, string>> = { slab: 'slab off', board: 'board off', face: 'face of the cant', quarter: 'quarter the log' };

/** How the log is turned before a cut. @param degrees from how it lay for the cut before, less than a whole turn */
export const turnWords = (degrees: number): string => (degrees === 0 ? 'as it lies' : degrees > 180 ? `turn back ${360 - degrees}°` : `turn ${degrees}°`);

/** A height as it is set at the mill, to the thirty-second of an inch. */
export const heightWords = (inches: number): string => formatInches(inches, 32);
