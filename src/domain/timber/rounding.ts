/** The trade's ways of rounding, safe against binary noise (16.1 × 10 is 161, not 160.99999999999997). */

/** Drops binary noise: twelve significant digits are far finer than any tape. */
export const tidy = (value: number): number => Number(value.toPrecision(12));

/** Nearest whole number, an exact half up. */
export const roundHalfUp = (value: number): number => Math.floor(tidy(value) + 0.5);

/** Nearest multiple of `step`, an exact half up. */
export const roundToMultiple = (value: number, step: number): number => roundHalfUp(tidy(value) / step) * step;

/** A length down to the whole foot; trim is ignored. */
export const wholeFeet = (lengthFt: number): number => Math.floor(tidy(lengthFt));

/** Which way an exact half inch of diameter goes; it differs by region. */
export type HalfInchRounding = 'up' | 'down';

/** A diameter to the whole inch: class n holds n − ½ up to n + ½ (Idaho Board of Scaling Practices); the exact half by the setting. */
export const wholeInches = (diameterIn: number, halfInch: HalfInchRounding = 'up'): number =>
  halfInch === 'up' ? roundHalfUp(diameterIn) : Math.ceil(tidy(diameterIn) - 0.5);
