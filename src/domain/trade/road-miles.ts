import { coarsePoint, greatCircleMiles, type Point } from '~/domain/geo.ts';

/** Roads wander: road miles ≈ 1.25 × great circle. Common practice, no source. */
export const ROAD_FACTOR = 1.25;

/**
 * Road miles one way between two places, estimated between their coarse points and rounded to the whole mile (half up).
 * A starting figure: the sawyer may change it, and it is frozen with the bid.
 */
export const roadMiles = (a: Point, b: Point): number => Math.floor(greatCircleMiles(coarsePoint(a), coarsePoint(b)) * ROAD_FACTOR + 0.5);
