import { pictureView, type PictureView } from '~/domain/photo.ts';
import { rows } from './db.ts';

/** A photograph of the milling day as the two sides see it; `picture` is there once it has been checked. */
export interface DayPhoto {
  readonly id: string;
  readonly shows: 'metal' | 'boards';
  readonly hitId: string | null;
  /** What it shows, in words. */
  readonly words: string;
  readonly byName: string;
  readonly ownerId: string;
  readonly at: Date;
  readonly refusedBecause: string | null;
  readonly picture: PictureView | null;
}

interface Row {
  id: string;
  shows: 'metal' | 'boards';
  hitId: string | null;
  outcome: string | null;
  logLabel: string | null;
  byName: string;
  ownerId: string;
  at: Date;
  status: string;
  refusedBecause: string | null;
  width: number | null;
  height: number | null;
  blur: string | null;
}

function wordsOf({ shows, outcome, logLabel }: Row): string {
  if (shows === 'boards') return 'Boards';
  return ['Metal hit', outcome && `blade ${outcome}`, logLabel].filter(Boolean).join(', ');
}

/** The photographs of a booking's day, oldest first. Whether they may be seen is decided by the caller. Leans on `photo_of_booking`. */
export async function dayPhotos(bookingId: string): Promise<DayPhoto[]> {
  const found = await rows<Row>(
    `SELECT photo.id, photo.shows, photo.hit_id AS "hitId", metal_hit.outcome, CASE WHEN log.label = '' THEN 'log ' || log.position ELSE log.label END AS "logLabel",
       account.name AS "byName", photo.owner_id AS "ownerId", photo.created_at AS at, photo.status, photo.refused_because AS "refusedBecause", photo.width, photo.height, photo.blur
     FROM photo JOIN account ON account.id = photo.owner_id
     LEFT JOIN metal_hit ON metal_hit.id = photo.hit_id AND metal_hit.removed_at IS NULL LEFT JOIN log ON log.id = metal_hit.log_id
     WHERE photo.booking_id = $1 AND photo.removed_at IS NULL AND photo.status <> 'awaiting' ORDER BY photo.created_at, photo.id`,
    [bookingId],
  );
  return found.map((row) => {
    const words = wordsOf(row);
    const { id, shows, hitId, byName, ownerId, at, refusedBecause, width, height } = row;
    return { id, shows, hitId, words, byName, ownerId, at, refusedBecause, picture: row.status === 'ready' && width && height ? pictureView({ id, width, height, blur: row.blur ?? '' }, words) : null };
  });
}
