/** Geometry of the drawings of logs. Inches throughout; the origin is the pith, y upward as in a sawing plan. */

export interface Point {
  readonly x: number;
  readonly y: number;
}

/** A board seen from the small end: lower left corner from the pith, as `POST /api/saw-plan` answers it. */
export interface DrawnBoard {
  readonly xIn: number;
  readonly yIn: number;
  readonly thicknessIn: number;
  readonly widthIn: number;
  readonly turned: boolean;
  /** Where it begins, ft from the small end: a script can then leave out boards that are not there yet. */
  readonly startFt?: number | undefined;
}

/** Turns any name or number into a 32-bit seed (FNV-1a), so that one log is always drawn the same. */
export function seedOf(name: string | number): number {
  let hash = 0x811c9dc5;
  for (const character of String(name)) hash = Math.imul(hash ^ (character.codePointAt(0) ?? 0), 0x01000193);
  return hash >>> 0;
}

/** A repeatable stream of numbers in [0, 1) (mulberry32). */
function stream(seed: number): () => number {
  let state = seed >>> 0;
  return () => {
    state = (state + 0x6d2b79f5) >>> 0;
    let mixed = Math.imul(state ^ (state >>> 15), state | 1);
    mixed ^= mixed + Math.imul(mixed ^ (mixed >>> 7), mixed | 61);
    return ((mixed ^ (mixed >>> 14)) >>> 0) / 2 ** 32;
  };
}

/**
 * The outline of a log end. It bulges outward only: the measured circle always fits inside, so a board that fits the
 * measured log is never drawn across the bark.
 * @param radiusIn measured radius @param unevenness largest bulge as a share of the radius (0.06 is an ordinary log)
 */
export function outline(radiusIn: number, seed: number, unevenness = 0.06, corners = 24): readonly Point[] {
  const random = stream(seed);
  const waves = [2, 3, 4, 5, 7].map((order) => ({ order, height: random() / order, phase: random() * 2 * Math.PI }));
  const angles = Array.from({ length: corners }, (_, index) => ((index + (random() - 0.5) * 0.35) / corners) * 2 * Math.PI);
  const raw = angles.map((angle) => waves.reduce((sum, wave) => sum + wave.height * Math.cos(wave.order * angle + wave.phase), 0));
  const low = Math.min(...raw);
  const span = Math.max(...raw) - low || 1;
  // Straight sides between corners cut inside the circle by 1 − cos(half a step); that much is given back.
  const sag = 1 / Math.cos((1.35 * Math.PI) / corners);
  return angles.map((angle, index) => {
    const radius = radiusIn * (sag + (unevenness * ((raw[index] ?? low) - low)) / span);
    return { x: radius * Math.cos(angle), y: radius * Math.sin(angle) };
  });
}

const at = (value: number): string => String(Math.round(value * 1000) / 1000);

/** A closed path through the points with straight sides, in SVG's axes (y downward). */
export const closedPath = (points: readonly Point[]): string =>
  `${points.map((point, index) => `${index === 0 ? 'M' : 'L'}${at(point.x)} ${at(-point.y)}`).join('')}Z`;

/** A closed smooth path through the points (Catmull-Rom as cubic curves), in SVG's axes. */
export function smoothPath(points: readonly Point[]): string {
  const count = points.length;
  const point = (index: number): Point => points[(index + count) % count] ?? { x: 0, y: 0 };
  const start = point(0);
  const curves = points.map((here, index) => {
    const [before, next, after] = [point(index - 1), point(index + 1), point(index + 2)];
    const first = { x: here.x + (next.x - before.x) / 6, y: here.y + (next.y - before.y) / 6 };
    const second = { x: next.x - (after.x - here.x) / 6, y: next.y - (after.y - here.y) / 6 };
    return `C${at(first.x)} ${at(-first.y)} ${at(second.x)} ${at(-second.y)} ${at(next.x)} ${at(-next.y)}`;
  });
  return `M${at(start.x)} ${at(-start.y)}${curves.join('')}Z`;
}

/** A board as an SVG rectangle (y downward). */
export function boardRect(board: DrawnBoard): { x: number; y: number; width: number; height: number } {
  const width = board.turned ? board.thicknessIn : board.widthIn;
  const height = board.turned ? board.widthIn : board.thicknessIn;
  return { x: board.xIn, y: -(board.yIn + height), width, height };
}

/** Radii of the growth rings drawn between pith and `radiusIn`: a picture of growth, narrower toward the bark, not a count. */
export function ringRadii(radiusIn: number, rings: number): readonly number[] {
  return Array.from({ length: rings }, (_, index) => radiusIn * Math.sqrt((index + 1) / (rings + 1)));
}
