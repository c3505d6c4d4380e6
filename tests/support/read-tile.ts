import { VectorTile } from '@mapbox/vector-tile';
import { PbfReader } from 'pbf';
import type { Point } from '~/domain/geo.ts';
import { TILE_EXTENT, type Tile } from '~/domain/finding/tiles.ts';

/** A mark of the map as a tile's bytes have it. */
export interface ReadMark {
  readonly cell: number;
  readonly listings: number;
  readonly largest: number;
  readonly number: number | undefined;
  readonly title: string | undefined;
  readonly place: Point;
}

/** Decodes a tile by the format's own reader, and turns positions back into degrees by the usual formula of the projection. */
export function readMarks(bytes: Uint8Array, { z, x, y }: Tile): readonly ReadMark[] {
  const layer = new VectorTile(new PbfReader(bytes)).layers['logs'];
  return Array.from({ length: layer?.length ?? 0 }, (_, index) => {
    const feature = layer?.feature(index);
    const at = feature?.loadGeometry()[0]?.[0];
    if (!feature || !at) throw new Error(`Feature ${index} has no place.`);
    const [across, down] = [(x + at.x / TILE_EXTENT) / 2 ** z, (y + at.y / TILE_EXTENT) / 2 ** z];
    const { listings, largest, number, title } = feature.properties;
    return {
      cell: Number(feature.id), listings: Number(listings), largest: Number(largest), number: number === undefined ? undefined : Number(number), title: title === undefined ? undefined : String(title),
      place: { lng: across * 360 - 180, lat: (Math.atan(Math.sinh(Math.PI * (1 - 2 * down))) * 180) / Math.PI },
    };
  });
}

/** The tile of a zoom that a point lies in, by the usual formula. */
export function tileAt({ lat, lng }: Point, z: number): Tile {
  const radians = (lat * Math.PI) / 180;
  return { z, x: Math.floor(((lng + 180) / 360) * 2 ** z), y: Math.floor(((1 - Math.log(Math.tan(radians) + 1 / Math.cos(radians)) / Math.PI) / 2) * 2 ** z) };
}
