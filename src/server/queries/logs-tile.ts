import { cellsOf, markShift, TILE_EXTENT, unitsPerStep, type Tile } from '~/domain/finding/tiles.ts';
import { rows } from '../db.ts';
import { conditions, type ListingsWanted } from './open-listings.ts';
import { sqlBuilder } from './sql-builder.ts';

/** The layer's name inside a tile. */
export const LOGS_LAYER = 'logs';

/**
 * A vector tile of open listings: one point for each cell of the zoom's level, in the middle of the coarse points it gathers, with
 * how many `listings` they are, the `largest` end over the bark (in), and for a single one its `number` and `title`; the feature's id
 * is the cell. Made from the coarse points alone, by the index `listing_open_map`, and the same for whoever asks.
 */
export async function logsTile(tile: Tile, wanted: ListingsWanted, at: Date): Promise<Buffer> {
  const sql = sqlBuilder();
  const { first, end } = cellsOf(tile);
  const where = [...conditions(sql, wanted, at), `l.map_cell >= ${sql.value(first)}::bigint AND l.map_cell < ${sql.value(end)}::bigint`];
  const units = sql.value(unitsPerStep(tile.z));
  const [made] = await rows<{ tile: Buffer }>(
    `WITH mark AS (
       SELECT l.map_cell >> ${markShift(tile.z)} AS cell, count(*)::int AS listings, max(l.largest_end_ob_in) AS largest, min(l.number) AS number, avg(l.map_x) AS x, avg(l.map_y) AS y
       FROM listing l WHERE ${where.join(' AND ')} GROUP BY 1
     )
     SELECT ST_AsMVT(shown, '${LOGS_LAYER}', ${TILE_EXTENT}, 'place', 'cell') AS tile
     FROM (
       SELECT m.cell, m.listings, round(m.largest)::int AS largest, l.number, l.title,
         ST_MakePoint(round(m.x * ${units}::float8) - ${tile.x * TILE_EXTENT}, round(m.y * ${units}::float8) - ${tile.y * TILE_EXTENT}) AS place
       FROM mark m LEFT JOIN listing l ON m.listings = 1 AND l.number = m.number
       ORDER BY m.cell
     ) shown`,
    sql.values,
  );
  return made?.tile ?? Buffer.alloc(0);
}
