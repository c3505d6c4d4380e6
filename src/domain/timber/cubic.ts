/** Cubic content of logs. Diameters in inches and lengths in feet give cubic feet; the metric twin takes cm and m and gives m³. */
export interface CubicFeet {
  readonly smalian: number;
  readonly huber: number;
  readonly newton: number;
}

const circle = (diameter: number): number => (Math.PI / 4) * diameter ** 2;

/** Mean of the two end areas × length. */
export const smalian = (smallIn: number, largeIn: number, lengthFt: number): number => ((circle(smallIn) + circle(largeIn)) / 2 / 144) * lengthFt;

/** Area at the middle × length. Source: T. E. Avery and H. E. Burkhart, Forest Measurements (from memory). */
export const huber = (middleIn: number, lengthFt: number): number => (circle(middleIn) / 144) * lengthFt;

/** (small + 4 × middle + large) / 6 × length. Source: Avery and Burkhart (from memory). */
export const newton = (smallIn: number, middleIn: number, largeIn: number, lengthFt: number): number =>
  ((circle(smallIn) + 4 * circle(middleIn) + circle(largeIn)) / 6 / 144) * lengthFt;

/** The three formulas, the middle diameter being the mean of the ends. */
export function cubicFeetOf(smallIn: number, largeIn: number, lengthFt: number): CubicFeet {
  const middleIn = (smallIn + largeIn) / 2;
  return { smalian: smalian(smallIn, largeIn, lengthFt), huber: huber(middleIn, lengthFt), newton: newton(smallIn, middleIn, largeIn, lengthFt) };
}

/** Smalian in metric: centimetres and metres to cubic metres. */
export const smalianCubicMetres = (smallCm: number, largeCm: number, lengthM: number): number =>
  ((circle(smallCm) + circle(largeCm)) / 2 / 10_000) * lengthM;

/** Exactly 0.3048³. */
export const cubicMetresPerCubicFoot = 0.3048 ** 3;

/** Cubic feet to cubic metres. */
export const cubicMetres = (cubicFeet: number): number => cubicFeet * cubicMetresPerCubicFoot;
