import { readFileSync } from 'node:fs';
import { createRequire } from 'node:module';
import { feature } from 'topojson-client';
import type { Feature, MultiPolygon, Polygon, Position } from 'geojson';
import type { GeometryCollection, Topology } from 'topojson-specification';
import type { Point } from '~/domain/geo.ts';

export interface County {
  readonly name: string;
  /** Two letters. */
  readonly state: string;
}

// Census FIPS codes of the states, FIPS 5-2.
const stateByFips: Readonly<Record<string, string>> = Object.fromEntries(
  ('01AL 02AK 04AZ 05AR 06CA 08CO 09CT 10DE 11DC 12FL 13GA 15HI 16ID 17IL 18IN 19IA 20KS 21KY 22LA 23ME 24MD 25MA 26MI 27MN 28MS 29MO 30MT 31NE ' +
    '32NV 33NH 34NJ 35NM 36NY 37NC 38ND 39OH 40OK 41OR 42PA 44RI 45SC 46SD 47TN 48TX 49UT 50VT 51VA 53WA 54WV 55WI 56WY 60AS 66GU 69MP 72PR 78VI')
    .split(' ')
    .map((entry) => [entry.slice(0, 2), entry.slice(2)]),
);

interface Shape extends County {
  readonly rings: readonly (readonly Position[])[];
  readonly west: number;
  readonly south: number;
  readonly east: number;
  readonly north: number;
}

type CountyTopology = Topology<{ counties: GeometryCollection<{ name: string }> }>;

function shapeOf(county: Feature<Polygon | MultiPolygon, { name: string }>): Shape {
  const rings = county.geometry.type === 'Polygon' ? county.geometry.coordinates : county.geometry.coordinates.flat();
  const longitudes = rings.flat().map((position) => position[0] ?? 0);
  const latitudes = rings.flat().map((position) => position[1] ?? 0);
  const state = stateByFips[String(county.id).slice(0, 2)] ?? '';
  return { name: county.properties.name, state, rings, west: Math.min(...longitudes), east: Math.max(...longitudes), south: Math.min(...latitudes), north: Math.max(...latitudes) };
}

let known: readonly Shape[] | undefined;

/** Read on first use: the file is 0.8 MB, and most requests need no county. */
function shapes(): readonly Shape[] {
  if (known) return known;
  const file = createRequire(import.meta.url).resolve('us-atlas/counties-10m.json');
  const topology = JSON.parse(readFileSync(file, 'utf8')) as CountyTopology;
  const counties = feature(topology, topology.objects.counties);
  known = counties.features.map((county) => shapeOf(county as Feature<Polygon | MultiPolygon, { name: string }>));
  return known;
}

/** Even-odd rule over all rings, so that holes and islands need no special case. */
function holds(shape: Shape, { lat, lng }: Point): boolean {
  if (lng < shape.west || lng > shape.east || lat < shape.south || lat > shape.north) return false;
  let inside = false;
  for (const ring of shape.rings) {
    for (let index = 1; index < ring.length; index += 1) {
      const [x1 = 0, y1 = 0] = ring[index - 1] ?? [];
      const [x2 = 0, y2 = 0] = ring[index] ?? [];
      if (y1 > lat !== y2 > lat && lng < x1 + ((lat - y1) / (y2 - y1)) * (x2 - x1)) inside = !inside;
    }
  }
  return inside;
}

/** The county a point lies in, or null at sea and abroad. Outlines are simplified to about a mile. */
export function countyOf(point: Point): County | null {
  const found = shapes().find((shape) => holds(shape, point));
  return found ? { name: found.name, state: found.state } : null;
}
