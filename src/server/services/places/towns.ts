import { greatCircleMiles, type Point } from '~/domain/geo.ts';
import written from './us-towns.json' with { type: 'json' };

export interface Town {
  readonly name: string;
  /** Two letters. */
  readonly state: string;
  readonly point: Point;
  readonly population: number;
}

const towns: readonly Town[] = Object.entries(written as Readonly<Record<string, string>>).flatMap(([state, list]) =>
  list.split(';').map((line) => {
    const [name = '', lat, lng, population] = line.split('|');
    return { name, state, point: { lat: Number(lat), lng: Number(lng) }, population: Number(population) };
  }),
);

const cellOf = (lat: number, lng: number): string => `${Math.floor(lat)},${Math.floor(lng)}`;
const cells = new Map<string, Town[]>();
for (const town of towns) {
  const key = cellOf(town.point.lat, town.point.lng);
  cells.set(key, [...(cells.get(key) ?? []), town]);
}

/** Every town in the whole degrees within `reach` of the point's own. */
function around(point: Point, reach: number): Town[] {
  const found: Town[] = [];
  for (let lat = -reach; lat <= reach; lat += 1)
    for (let lng = -reach; lng <= reach; lng += 1) found.push(...(cells.get(cellOf(point.lat + lat, point.lng + lng)) ?? []));
  return found;
}

/** The nearest town and how far it is, or null beyond some 200 miles of any (`state` limits the choice to one). */
export function nearestTown(point: Point, state?: string): (Town & { readonly miles: number }) | null {
  for (const reach of [1, 3]) {
    let best: (Town & { readonly miles: number }) | null = null;
    for (const town of around(point, reach)) {
      if (state !== undefined && town.state !== state) continue;
      const miles = greatCircleMiles(point, town.point);
      if (best === null || miles < best.miles) best = { ...town, miles };
    }
    if (best) return best;
  }
  return null;
}

/** The largest towns within a distance, for the names on a map. */
export function townsNear(point: Point, withinMi: number, most: number): readonly Town[] {
  const reach = Math.ceil(withinMi / 45);
  return around(point, Math.min(reach, 12))
    .filter((town) => greatCircleMiles(point, town.point) <= withinMi)
    .sort((a, b) => b.population - a.population)
    .slice(0, most);
}
