import { COUNTED_SHIFT } from '~/domain/finding/tiles.ts';
import { execute, inTransaction, lockFor, rows } from '../db.ts';

/**
 * Counts again the cells of the map in which listings came, went or changed, for the tiles of low zooms (`queries/logs-tile`). What others
 * write meanwhile stays noted for the next time: the notes are taken first, and what they are about is read after.
 */
export async function countMap(at: Date): Promise<void> {
  await inTransaction(async () => {
    await lockFor('map', 'counts');
    const noted = await rows<{ cell: number }>('DELETE FROM map_changed RETURNING cell');
    if (noted.length === 0) return;
    const cells = [...new Set(noted.map(({ cell }) => cell))];
    await execute('DELETE FROM map_count WHERE cell = ANY ($1::integer[])', [cells]);
    await execute(
      `INSERT INTO map_count (cell, listings, largest_end_ob_in, least_number, sum_x, sum_y)
       SELECT noted.cell, met.listings, met.largest, met.number, met.x, met.y
       FROM unnest($1::integer[]) noted (cell) CROSS JOIN LATERAL (
         SELECT count(*)::int AS listings, max(l.largest_end_ob_in) AS largest, min(l.number) AS number, sum(l.map_x) AS x, sum(l.map_y) AS y
         FROM listing l WHERE l.status = 'open' AND l.hidden_at IS NULL AND l.closes_at > $2
           AND l.map_cell >= noted.cell::bigint << ${COUNTED_SHIFT} AND l.map_cell < (noted.cell + 1)::bigint << ${COUNTED_SHIFT}
       ) met WHERE met.listings > 0`,
      [cells, at],
    );
  });
}
