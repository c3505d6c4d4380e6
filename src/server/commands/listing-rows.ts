import { randomUUID } from 'node:crypto';
import { Op } from 'sequelize';
import { isBlankLog, type ListingTyped } from '~/domain/listing/draft.ts';
import { readLogRow, type LogRead, type PieceRead } from '~/domain/listing/rows.ts';
import { execute, rows } from '../db.ts';
import { Log, Piece } from '../models/listing.ts';

const isUuid = (text: string): boolean => /^[0-9a-f]{8}-[0-9a-f]{4}-[0-9a-f]{4}-[0-9a-f]{4}-[0-9a-f]{12}$/i.test(text);

/**
 * Gives every row of logs an id that is its own: a row keeps the id it came with unless that is missing, given twice, or belongs to
 * another listing.
 */
export async function withLogIds(typed: ListingTyped, listingId: string | null): Promise<ListingTyped> {
  const given = typed.logs.map(({ id }) => id.toLowerCase()).filter(isUuid);
  const elsewhere = new Set(
    (await rows<{ id: string }>('SELECT id FROM log WHERE id = ANY($1::uuid[]) AND listing_id IS DISTINCT FROM $2::uuid', [given, listingId])).map(({ id }) => id),
  );
  const seen = new Set<string>();
  const logs = typed.logs.map((log) => {
    const known = log.id.toLowerCase();
    const id = isUuid(known) && !elsewhere.has(known) && !seen.has(known) ? known : randomUUID();
    seen.add(id);
    return { ...log, id };
  });
  return { ...typed, logs };
}

/** The rows of a draft that can be understood already, so that photographs can name their log before publishing. */
export const understoodLogs = (typed: ListingTyped): readonly LogRead[] =>
  typed.logs.flatMap((log) => {
    const read = isBlankLog(log) ? null : readLogRow(log, typed.measured === 'over' ? 'over' : 'inside');
    return read?.ok ? [read.value] : [];
  });

/**
 * Writes the logs of a listing in this order, keeping their ids. Logs that are gone are marked removed, not deleted: a photograph or
 * a frozen bid may still name them. Call it inside the transaction that holds the listing's lock.
 */
export async function writeLogs(listingId: string, logs: readonly LogRead[], at: Date): Promise<void> {
  const kept = logs.map(({ id }) => id);
  await Log.update({ removedAt: at }, { where: { listingId, removedAt: null, id: { [Op.notIn]: kept } } });
  // Out of the way first: positions are unique among the logs that are there, and two may be swapped.
  await execute('UPDATE log SET position = position + 1000 WHERE listing_id = $1 AND removed_at IS NULL', [listingId]);
  for (const [index, log] of logs.entries()) {
    await Log.upsert({
      id: log.id, listingId, position: index + 1, species: log.species, smallEndIn: log.smallEndIn, largeEndIn: log.largeEndIn, lengthFt: log.lengthFt,
      heartDefectIn: log.heartDefectIn, defects: [...log.defects], note: log.note, label: '', addedOnTheDay: false, removedAt: null,
    });
  }
}

/** Writes the cut list of a listing, replacing the one before. */
export async function writePieces(listingId: string, pieces: readonly PieceRead[]): Promise<void> {
  await Piece.destroy({ where: { listingId } });
  await Piece.bulkCreate(pieces.map((piece, index) => ({ ...piece, listingId, position: index + 1 })));
}
