import type { Map } from 'maplibre-gl';
import { cellOf, DEEPEST_TILE, markLevel } from '~/domain/finding/tiles.ts';
import type { MapMark } from './mark.ts';
import { TILES } from './style.ts';
import type { MapPlace } from './types.ts';

/** The zoom of the tiles that a map shows now. */
export const tileZoom = (zoom: number): number => Math.min(DEEPEST_TILE, Math.max(0, Math.floor(zoom)));

const groupBy = <Thing, Key>(things: readonly Thing[], keyOf: (thing: Thing) => Key): ReadonlyMap<Key, readonly Thing[]> => {
  const groups = new globalThis.Map<Key, Thing[]>();
  for (const thing of things) {
    const key = keyOf(thing);
    groups.set(key, [...(groups.get(key) ?? []), thing]);
  }
  return groups;
};

/** Marks of the list's own rows alone: those that share a cell of the grid share a mark. */
export function marksOfRows(places: readonly MapPlace[]): readonly MapMark[] {
  return [...groupBy(places, ({ lat, lng }) => `${lat},${lng}`)].flatMap(([key, rows]): MapMark[] => {
    const [first] = rows;
    return first ? [{ key, at: { lat: first.lat, lng: first.lng }, listings: rows.length, largestIn: Math.max(...rows.map(({ largestIn }) => largestIn)), rows, only: null }] : [];
  });
}

/** Marks of what the tiles on the screen hold, the list's rows found in them by their cell. Rows of the list come first, in its order. */
export function marksOfTiles(map: Map, places: readonly MapPlace[]): readonly MapMark[] {
  const level = markLevel(tileZoom(map.getZoom()));
  const rowsOf = groupBy(places, (place) => cellOf(place, level));
  const order = [...rowsOf.keys()];
  const seen = new globalThis.Map<number, MapMark>();
  const bounds = map.getBounds();
  for (const { id, geometry, properties } of map.querySourceFeatures(TILES, { sourceLayer: 'logs' })) {
    if (typeof id !== 'number' || seen.has(id) || geometry.type !== 'Point') continue;
    const [lng = 0, lat = 0] = geometry.coordinates;
    const rows = rowsOf.get(id) ?? [];
    if (!bounds.contains([lng, lat]) && rows.length === 0) continue;
    const listings = Number(properties['listings']);
    const single = listings === 1 && rows.length === 0 ? { number: Number(properties['number']), title: String(properties['title'] ?? '') } : null;
    seen.set(id, { key: `${level}/${id}`, at: { lat, lng }, listings, largestIn: Number(properties['largest']), rows, only: single });
  }
  const rank = ({ rows: [first] }: MapMark): number => (first ? order.indexOf(cellOf(first, level)) : order.length);
  return [...seen.values()].sort((a, b) => rank(a) - rank(b) || b.at.lat - a.at.lat || a.at.lng - b.at.lng);
}
