import { FIRST_YIELD, type MillAtWork } from './expected.ts';

/** A mobile band mill of the usual size, for plans before any sawyer has bid (common practice, no source). */
export const TYPICAL_BAND_MILL: MillAtWork = { kerfIn: 1 / 8, widestCutIn: 26, widestBoardIn: 24, longestFt: 20, paceBfPerHour: 150, realisedYield: FIRST_YIELD };
