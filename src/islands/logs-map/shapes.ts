import type { Feature, FeatureCollection, LineString, Point as GeoPoint } from 'geojson';
import { EARTH_RADIUS_MI, type Point } from '~/domain/geo.ts';

const degrees = (radians: number): number => (radians * 180) / Math.PI;
const radians = (angle: number): number => (angle * Math.PI) / 180;

/** The point a distance away on a bearing (degrees from north), on the sphere. */
export function pointAt(from: Point, miles: number, bearingDeg: number): Point {
  const arc = miles / EARTH_RADIUS_MI;
  const [lat, bearing] = [radians(from.lat), radians(bearingDeg)];
  const there = Math.asin(Math.sin(lat) * Math.cos(arc) + Math.cos(lat) * Math.sin(arc) * Math.cos(bearing));
  const east = Math.atan2(Math.sin(bearing) * Math.sin(arc) * Math.cos(lat), Math.cos(arc) - Math.sin(lat) * Math.sin(there));
  return { lat: degrees(there), lng: from.lng + degrees(east) };
}

/** Ring distances that divide a radius into three to five even steps. */
export function ringMiles(radiusMi: number): readonly number[] {
  const step = [1, 2, 5, 10, 20, 25, 50, 100, 200].find((size) => radiusMi / size <= 5) ?? 200;
  const rings: number[] = [];
  for (let miles = step; miles <= radiusMi; miles += step) rings.push(miles);
  return rings.length > 0 ? rings : [radiusMi];
}

/** Rings round a point, each with its distance in words. */
export function ringLines(from: Point, radiusMi: number): FeatureCollection<LineString> {
  const ring = (miles: number): Feature<LineString> => ({
    type: 'Feature',
    properties: {},
    geometry: { type: 'LineString', coordinates: Array.from({ length: 91 }, (_, step) => pointAt(from, miles, step * 4)).map(({ lat, lng }) => [lng, lat]) },
  });
  return { type: 'FeatureCollection', features: ringMiles(radiusMi).map(ring) };
}

/** A named point each, for labels. */
export function named(points: readonly (Point & { readonly name: string })[]): FeatureCollection<GeoPoint> {
  return { type: 'FeatureCollection', features: points.map(({ name, lat, lng }, rank) => ({ type: 'Feature', properties: { name, rank }, geometry: { type: 'Point', coordinates: [lng, lat] } })) };
}

/** Where each ring's distance is written: north-east of the middle, where the rows of a list do not hide it. */
export const ringLabels = (from: Point, radiusMi: number): FeatureCollection<GeoPoint> => named(ringMiles(radiusMi).map((miles) => ({ name: `${miles} mi`, ...pointAt(from, miles, 40) })));

/** The box that holds everything to be seen: the whole radius, or all listings, or the lower 48 states. */
export function bounds(from: Point | null, radiusMi: number | null, places: readonly Point[]): [number, number, number, number] {
  const corners = from && radiusMi ? [0, 90, 180, 270].map((bearing) => pointAt(from, radiusMi, bearing)) : places;
  if (corners.length === 0) return [-125, 24.5, -66.5, 49.5];
  const [lats, lngs] = [corners.map(({ lat }) => lat), corners.map(({ lng }) => lng)];
  const spare = from ? 0 : 0.3;
  return [Math.min(...lngs) - spare, Math.min(...lats) - spare, Math.max(...lngs) + spare, Math.max(...lats) + spare];
}
