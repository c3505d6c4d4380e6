import { EARTH_RADIUS_MI, type Point } from '../geo.ts';
import { FINEST, interleaved, mapPlace } from './tiles.ts';

/** A stretch of the map's finest cells: from `first` up to, without, `end`. */
export interface CellRange {
  readonly first: number;
  readonly end: number;
}

/** The box round a circle is cut into at least this many cells each way, so that little beyond it is looked at. */
const CELLS_ACROSS = 4;
const radians = (degrees: number): number => (degrees * Math.PI) / 180;
const degrees = (angle: number): number => (angle * 180) / Math.PI;

/** A point as a vector of length one from the middle of the earth: two of them multiplied give the cosine of the arc between them. */
export function unitVector({ lat, lng }: Point): readonly [number, number, number] {
  return [Math.cos(radians(lat)) * Math.cos(radians(lng)), Math.cos(radians(lat)) * Math.sin(radians(lng)), Math.sin(radians(lat))];
}

/** The least product of unit vectors for points within so many miles, on the sphere. */
export const leastProduct = (radiusMi: number): number => Math.cos(radiusMi / EARTH_RADIUS_MI);

/** The stretches of longitude that a circle touches, in degrees from −180 to 180: two when it crosses the 180th meridian. */
function lngsOf({ lat, lng }: Point, arc: number): readonly (readonly [west: number, east: number])[] {
  const ratio = Math.sin(arc) / Math.cos(radians(lat));
  if (Math.abs(radians(lat)) + arc >= Math.PI / 2 || ratio >= 1) return [[-180, 180]];
  const half = degrees(Math.asin(ratio)) + 1e-6;
  const [west, east] = [lng - half, lng + half];
  if (west < -180) return [[-180, east], [west + 360, 180]];
  if (east > 180) return [[west, 180], [-180, east - 360]];
  return [[west, east]];
}

/**
 * Stretches of cells that together hold every point within so many miles, and some beyond: few enough to ask an index for each.
 * In order, none touching the next.
 */
export function cellsNear(from: Point, radiusMi: number): readonly CellRange[] {
  const arc = radiusMi / EARTH_RADIUS_MI;
  const [south, north] = [Math.max(-90, from.lat - degrees(arc) - 1e-6), Math.min(90, from.lat + degrees(arc) + 1e-6)];
  const cells: number[] = [];
  let size = 0;
  for (const [west, east] of lngsOf(from, arc)) {
    const [low, high] = [mapPlace({ lat: north, lng: west }), mapPlace({ lat: south, lng: east })];
    // Both halves of a circle on the 180th meridian are cut alike: the first is measured.
    if (size === 0) size = 2 ** Math.max(0, Math.floor(Math.log2(Math.max(high.x - low.x, high.y - low.y, 1) / CELLS_ACROSS)));
    for (let x = Math.floor(low.x / size); x <= Math.floor(high.x / size); x += 1) for (let y = Math.floor(low.y / size); y <= Math.floor(high.y / size); y += 1) cells.push(interleaved(x, y));
  }
  const ranges: { first: number; end: number }[] = [];
  for (const cell of [...new Set(cells)].sort((a, b) => a - b)) {
    const last = ranges.at(-1);
    if (last && last.end === cell * size * size) last.end += size * size;
    else ranges.push({ first: cell * size * size, end: (cell + 1) * size * size });
  }
  return ranges.map(({ first, end }) => ({ first, end: Math.min(end, 4 ** FINEST) }));
}
