/**
 * The planner counts in whole units of 1/4000 in, so that a thousandth of an inch and 1/32 in are both exact.
 * Board feet and money stay ordinary numbers.
 */
export type Units = number;

export const UNITS_PER_IN = 4000;

/** The grid on which cant faces are searched: 1/32 in. */
export const FACE_GRID: Units = UNITS_PER_IN / 32;

/** Inches to units; what is not a whole unit is taken larger, so a board never comes out under size. */
export const unitsUp = (inches: number): Units => Math.ceil(inches * UNITS_PER_IN - 1e-6);

/** Inches to units; what is not a whole unit is taken smaller, so a limit is never passed. */
export const unitsDown = (inches: number): Units => Math.floor(inches * UNITS_PER_IN + 1e-6);

/** Units to inches. */
export const inches = (units: Units): number => units / UNITS_PER_IN;

/** Half the chord of a circle (given by its squared radius) at a distance from the centre, or -1 outside it. */
export function halfChord(radiusSquared: number, distance: Units): Units {
  const rest = radiusSquared - distance * distance;
  return rest < 0 ? -1 : Math.floor(Math.sqrt(rest) + 1e-7);
}
