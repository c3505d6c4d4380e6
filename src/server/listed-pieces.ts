import type { LogRead, PieceRead } from '~/domain/listing/rows.ts';
import type { Defect } from '~/domain/timber/defects.ts';
import { Log, Piece } from './models/listing.ts';

/** The logs of a listing as plans are made of them, in the order they lie. */
export async function listedShapes(listingId: string): Promise<(LogRead & { readonly position: number })[]> {
  const rows = await Log.findAll({ where: { listingId, removedAt: null }, order: ['position'] });
  return rows.map(({ id, position, species, smallEndIn, largeEndIn, lengthFt, heartDefectIn, defects, note }) => ({ id, position, species, smallEndIn, largeEndIn, lengthFt, heartDefectIn, defects: defects as Defect[], note }));
}

/** The cut list of a listing, in its order. */
export async function listedPieces(listingId: string): Promise<PieceRead[]> {
  const rows = await Piece.findAll({ where: { listingId }, order: ['position'] });
  return rows.map(({ label, thicknessIn, widthIn, lengthFt, count, sizing, forDwelling, kind }) => ({ label, thicknessIn, widthIn, lengthFt, count, sizing, forDwelling, kind }));
}
