import { cellsOf, COUNTED_SHIFT, DEEPEST_COUNTED, markShift, TILE_EXTENT, unitsPerStep, type Tile } from '~/domain/finding/tiles.ts';
import { rows } from '../db.ts';
import { conditions, type ListingsWanted } from './open-listings.ts';
import { sqlBuilder } from './sql-builder.ts';

/** The layer's name inside a tile. */
export const LOGS_LAYER = 'logs';

type Sql = ReturnType<typeof sqlBuilder>;

/** The marks of a tile, counted now by the index `listing_open_map`. */
function countedNow(sql: Sql, tile: Tile, wanted: ListingsWanted, at: Date): string {
  const { first, end } = cellsOf(tile);
  const where = [...conditions(sql, wanted, at), `l.map_cell >= ${sql.value(first)}::bigint AND l.map_cell < ${sql.value(end)}::bigint`];
  return `SELECT l.map_cell >> ${markShift(tile.z)} AS cell, count(*)::int AS listings, max(l.largest_end_ob_in) AS largest, min(l.number) AS number, avg(l.map_x) AS x, avg(l.map_y) AS y
    FROM listing l WHERE ${where.join(' AND ')} GROUP BY 1`;
}

/**
 * The marks of a tile of a low zoom, from the counts that are kept: only cells that have changed since are counted now. A listing whose
 * bidding has just ended is in a count until the worker closes it, a minute at most.
 */
function countedBefore(sql: Sql, tile: Tile, at: Date): string {
  const { first, end } = cellsOf(tile);
  const [from, to] = [first, end].map((cell) => `${sql.value(cell / 2 ** COUNTED_SHIFT)}::integer`);
  const inside = `cell >= ${from} AND cell < ${to}`;
  return `SELECT part.cell >> ${markShift(tile.z) - COUNTED_SHIFT} AS cell, sum(part.listings)::int AS listings, max(part.largest) AS largest, min(part.number) AS number, sum(part.x) / sum(part.listings) AS x, sum(part.y) / sum(part.listings) AS y
    FROM (
      SELECT cell, listings, largest_end_ob_in AS largest, least_number AS number, sum_x AS x, sum_y AS y FROM map_count
        WHERE ${inside} AND cell NOT IN (SELECT cell FROM map_changed WHERE ${inside})
      UNION ALL
      SELECT changed.cell, met.* FROM (SELECT DISTINCT cell FROM map_changed WHERE ${inside}) changed CROSS JOIN LATERAL (
        SELECT count(*)::int AS listings, max(l.largest_end_ob_in) AS largest, min(l.number) AS number, sum(l.map_x) AS x, sum(l.map_y) AS y FROM listing l
        WHERE ${conditions(sql, {}, at).join(' AND ')} AND l.map_cell >= changed.cell::bigint << ${COUNTED_SHIFT} AND l.map_cell < (changed.cell + 1)::bigint << ${COUNTED_SHIFT}) met
        WHERE met.listings > 0
    ) part GROUP BY 1`;
}

/** Whether every open listing is wanted. */
const unfiltered = (wanted: ListingsWanted): boolean => Object.values(wanted).every((value) => value === undefined);

/**
 * A vector tile of open listings: one point for each cell of the zoom's level, in the middle of the coarse points it gathers, with
 * how many `listings` they are, the `largest` end over the bark (in), and for a single one its `number` and `title`; the feature's id
 * is the cell. Made from the coarse points alone, and the same for whoever asks.
 */
export async function logsTile(tile: Tile, wanted: ListingsWanted, at: Date): Promise<Buffer> {
  const sql = sqlBuilder();
  const marks = tile.z <= DEEPEST_COUNTED && unfiltered(wanted) ? countedBefore(sql, tile, at) : countedNow(sql, tile, wanted, at);
  const units = sql.value(unitsPerStep(tile.z));
  const [made] = await rows<{ tile: Buffer }>(
    `WITH mark AS (
       ${marks}
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
