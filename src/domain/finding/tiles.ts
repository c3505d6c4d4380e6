import type { Point } from '../geo.ts';

/** A tile of the square world map (Web Mercator): at zoom `z` the map is 2^z tiles each way, columns from 180° west, rows from the north. */
export interface Tile {
  readonly z: number;
  readonly x: number;
  readonly y: number;
}

/** The deepest zoom that tiles are made for; a map that goes deeper stretches these. */
export const DEEPEST_TILE = 12;
/** Positions inside a tile run from 0 to this, as is usual for vector tiles. */
export const TILE_EXTENT = 4096;
/** Places are kept to 1 part in 2^26 of the world's width: under a metre. */
export const FINEST = 26;
/** Cells this fine hold one point of the coarse grid each. */
const GRID_LEVEL = 17;
/** From this zoom on each point of the coarse grid has its own mark. */
const FROM_GRID = 11;

/**
 * How finely the places of a tile are gathered into marks: at low zooms into cells an eighth of a tile wide, near enough to the ground
 * one mark for each point of the coarse grid.
 */
export const markLevel = (z: number): number => (z >= FROM_GRID ? GRID_LEVEL : z + 3);

const onMap = (share: number): number => Math.min(2 ** FINEST - 1, Math.max(0, Math.floor(share * 2 ** FINEST)));

/** Column and row of a point among 2^26. */
export function mapPlace({ lat, lng }: Point): { readonly x: number; readonly y: number } {
  const steep = Math.min(89.9, Math.max(-89.9, lat));
  return { x: onMap((lng + 180) / 360), y: onMap((1 - Math.asinh(Math.tan((steep * Math.PI) / 180)) / Math.PI) / 2) };
}

/** The cell of a level that a point lies in: the bits of its row and column interleaved. Fewer than 2^53 up to level 26. */
export function cellOf(point: Point, level: number): number {
  const { x, y } = mapPlace(point);
  return interleaved(Math.floor(x / 2 ** (FINEST - level)), Math.floor(y / 2 ** (FINEST - level)));
}

/** The cell in a column and row, the bits of both interleaved. */
export function interleaved(x: number, y: number): number {
  let cell = 0;
  for (let bit = 0; 2 ** bit <= Math.max(x, y); bit += 1) cell += 4 ** bit * ((Math.floor(x / 2 ** bit) % 2) + 2 * (Math.floor(y / 2 ** bit) % 2));
  return cell;
}

/** The finest cells of a tile: from `first` up to, without, `end`. */
export function cellsOf({ z, x, y }: Tile): { readonly first: number; readonly end: number } {
  const size = 4 ** (FINEST - z);
  const first = interleaved(x, y) * size;
  return { first, end: first + size };
}

/** The level at which open listings are kept counted, and the deepest zoom whose marks are made of such counts. */
const COUNTED_LEVEL = 10;
export const DEEPEST_COUNTED = COUNTED_LEVEL - 3;
/** How far a finest cell is divided to come to a counted one, in bits; the database says the same of `map_count`. */
export const COUNTED_SHIFT = 2 * (FINEST - COUNTED_LEVEL);

/** How far a finest cell is divided to come to a mark's cell (bits), and a finest column to a position in a tile of this zoom (units). */
export const markShift = (z: number): number => 2 * (FINEST - markLevel(z));
export const unitsPerStep = (z: number): number => (TILE_EXTENT * 2 ** z) / 2 ** FINEST;
