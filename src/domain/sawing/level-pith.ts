/** Which end of a log to raise, and by how much, so that the pith lies parallel to the bed. */
export interface PithLevel {
  readonly raise: 'small end' | 'large end' | 'neither';
  readonly byIn: number;
}

/** Nearer than this is level: a tape in the field reads no finer. */
const LEVEL_WITHIN_IN = 1 / 16;

/**
 * Levels the pith for the first two faces: measure from the bed to the pith at both ends and raise the lower until they are equal.
 * After that the flats lie on the bed. Common practice; no single source.
 * @param smallEndIn height of the pith above the bed at the small end, inches
 * @param largeEndIn the same at the large end
 */
export function levelPith(smallEndIn: number, largeEndIn: number): PithLevel {
  const difference = largeEndIn - smallEndIn;
  if (Math.abs(difference) < LEVEL_WITHIN_IN) return { raise: 'neither', byIn: 0 };
  return { raise: difference > 0 ? 'small end' : 'large end', byIn: Math.abs(difference) };
}
