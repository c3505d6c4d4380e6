import { good, type Problem, type Result } from './result.ts';

/** Degrees, WGS 84. Latitude north, longitude east (so the United States are negative). */
export interface Point {
  readonly lat: number;
  readonly lng: number;
}

/** Mean radius of the earth (IUGG: 6,371.0088 km) in statute miles. PostGIS uses the same for spheres. */
export const EARTH_RADIUS_MI = 6371.0088 / 1.609344;

const radians = (degrees: number): number => (degrees * Math.PI) / 180;

/** Great-circle distance in statute miles, by the haversine formula. */
export function greatCircleMiles(a: Point, b: Point): number {
  const dLat = radians(b.lat - a.lat);
  const dLng = radians(b.lng - a.lng);
  const h = Math.sin(dLat / 2) ** 2 + Math.cos(radians(a.lat)) * Math.cos(radians(b.lat)) * Math.sin(dLng / 2) ** 2;
  return 2 * EARTH_RADIUS_MI * Math.asin(Math.min(1, Math.sqrt(h)));
}

/** Height of a grid row: one statute mile of latitude on the sphere above. */
const ROW_DEG = (180 / Math.PI) / EARTH_RADIUS_MI;
const ROWS = Math.ceil(180 / ROW_DEG);
const DECIMALS = 1e5;

/**
 * The centre of the grid cell a point lies in: cells are about one mile each way, the grid is fixed to the earth and the same for every
 * asker, so asking often or from many places tells nothing beyond the cell. Each row of latitude is divided into a whole number of
 * columns, as near a mile wide as that allows. Snapping the answer again gives the same answer.
 */
export function coarsePoint(point: Point): Point {
  const row = Math.min(ROWS - 1, Math.max(0, Math.floor((point.lat + 90) / ROW_DEG)));
  const lat = Math.min(90, (row + 0.5) * ROW_DEG - 90);
  const columns = Math.max(1, Math.round((360 * Math.cos(radians(lat))) / ROW_DEG));
  const column = Math.floor(((((point.lng + 180) % 360) + 360) % 360) / (360 / columns)) % columns;
  const lng = (column + 0.5) * (360 / columns) - 180;
  return { lat: Math.round(lat * DECIMALS) / DECIMALS, lng: Math.round(lng * DECIMALS) / DECIMALS };
}

/** Checks a latitude and longitude: finite, on the globe. The usual slip, the two swapped, is named. */
export function checkPoint(lat: number, lng: number): Result<Point> {
  const problems: Problem[] = [];
  if (!Number.isFinite(lat) || Math.abs(lat) > 90) {
    const swapped = Number.isFinite(lat) && Math.abs(lat) <= 180 && Math.abs(lng) <= 90;
    problems.push({ path: 'lat', message: `Latitude runs from −90 to 90 degrees.${swapped ? ' Perhaps the two are swapped.' : ''}` });
  }
  if (!Number.isFinite(lng) || Math.abs(lng) > 180) problems.push({ path: 'lng', message: 'Longitude runs from −180 to 180 degrees.' });
  return problems.length === 0 ? good({ lat, lng }) : { ok: false, problems };
}
