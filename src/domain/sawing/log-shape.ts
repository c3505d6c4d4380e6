/** A log as the saw sees it: inside bark, straight taper, the small end at 0 ft. */
export interface LogShape {
  readonly smallEndIn: number;
  /** Left out: ½ in of taper per 4 ft. */
  readonly largeEndIn?: number | undefined;
  readonly lengthFt: number;
  /** Diameter of a full-length cylinder round the pith that no board may meet (rot, shake, or a pith to be kept out). */
  readonly heartDefectIn?: number | undefined;
}

/** ½ in of diameter per 4 ft: the taper of the International rule, used when the large end was not measured. */
export const DEFAULT_TAPER_IN_PER_FT = 0.125;

/** Large-end diameter, inside bark, in. */
export const largeEnd = (log: LogShape): number => log.largeEndIn ?? log.smallEndIn + DEFAULT_TAPER_IN_PER_FT * log.lengthFt;

/** Radius inside bark (in) at a distance (ft) from the small end. */
export function radiusAt(log: LogShape, fromSmallEndFt: number): number {
  const small = log.smallEndIn / 2;
  return small + ((largeEnd(log) / 2 - small) * fromSmallEndFt) / log.lengthFt;
}

/** Cubic feet by Smalian's formula (mean of the end areas × length), inside bark. */
export function cubicFeet(log: LogShape): number {
  const area = (diameterIn: number): number => (Math.PI / 4) * (diameterIn / 12) ** 2;
  return ((area(log.smallEndIn) + area(largeEnd(log))) / 2) * log.lengthFt;
}

/**
 * The straight core of a swept log. A bow that departs `departureIn` from the chord leaves the lens common to a circle and
 * the same circle moved sideways by the departure; the round core inside it is smaller in diameter by the departure.
 * (Geometry, no published source.) Returns null when nothing straight is left.
 */
export function straightCore(log: LogShape, departureIn: number): LogShape | null {
  const smallEndIn = log.smallEndIn - departureIn;
  return smallEndIn > 0 ? { ...log, smallEndIn, largeEndIn: largeEnd(log) - departureIn } : null;
}

/** The log after both split ends are trimmed off (ft at each end); null when nothing is left. */
export function trimmed(log: LogShape, smallEndTrimFt: number, largeEndTrimFt: number): LogShape | null {
  const lengthFt = log.lengthFt - smallEndTrimFt - largeEndTrimFt;
  if (lengthFt <= 0) return null;
  return {
    ...log,
    smallEndIn: 2 * radiusAt(log, smallEndTrimFt),
    largeEndIn: 2 * radiusAt(log, log.lengthFt - largeEndTrimFt),
    lengthFt,
  };
}

/** How the pith is set before the first cut. */
export interface ToeBoards {
  /** How much the small end is raised so that the pith runs level: half the difference of the end diameters, in. */
  readonly raiseSmallEndIn: number;
  /** Height of the pith over the bed once it is level, over the bark, in. */
  readonly pithHeightIn: number;
}

/**
 * Toe-board heights that level the pith (common practice, no source). `barkIn` is the bark's thickness on one side; the log
 * lies on its bark for the faces that have nothing flat opposite them.
 */
export const toeBoards = (log: LogShape, barkIn = 0): ToeBoards => ({
  raiseSmallEndIn: (largeEnd(log) - log.smallEndIn) / 2,
  pithHeightIn: largeEnd(log) / 2 + barkIn,
});
