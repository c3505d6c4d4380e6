import { createHash } from 'node:crypto';
import { photoAlt, pictureView, type PictureView } from '~/domain/photo.ts';
import { rows } from './db.ts';

export interface JobPhoto {
  readonly id: string;
  readonly words: string;
  readonly picture: PictureView;
}

/** Names what a job's page shows, so that a side agrees to what it read: any change gives another name. */
export const shownName = (kept: { readonly photoIds: readonly string[]; readonly words: string } | null): string =>
  createHash('sha256').update(JSON.stringify([kept?.photoIds ?? [], kept?.words ?? ''])).digest('base64url').slice(0, 22);

/** The photographs of a job that its page may show, from tree to boards: the listing's own in their order, then those of the milling day. */
export async function photosToPick(booking: { readonly id: string; readonly listingId: string }): Promise<JobPhoto[]> {
  const found = await rows<{ id: string; caption: string; shows: string | null; width: number; height: number; blur: string | null; logLabel: string | null }>(
    `SELECT photo.id, photo.caption, photo.shows, photo.width, photo.height, photo.blur, CASE WHEN log.label = '' THEN 'log ' || log.position ELSE log.label END AS "logLabel"
     FROM photo LEFT JOIN log ON log.id = photo.log_id
     WHERE photo.listing_id = $1 AND (photo.booking_id IS NULL OR photo.booking_id = $2) AND photo.removed_at IS NULL AND photo.status = 'ready'
     ORDER BY photo.booking_id IS NOT NULL, photo.position, photo.created_at, photo.id`,
    [booking.listingId, booking.id],
  );
  return found.map(({ id, caption, shows, width, height, blur, logLabel }) => {
    const words = shows === 'metal' ? 'Metal found in the log' : shows === 'boards' ? 'Boards' : photoAlt(caption, logLabel);
    return { id, words, picture: pictureView({ id, width, height, blur: blur ?? '' }, words) };
  });
}
