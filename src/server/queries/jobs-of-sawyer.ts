import { photoAlt, pictureView, type PictureView } from '~/domain/photo.ts';
import { rows } from '../db.ts';

/** A settled job of a sawyer as anyone may read of it: month and town, never a day, a person or the exact place. */
export interface SettledJob {
  readonly title: string;
  readonly near: string;
  /** `2026-08` */
  readonly month: string;
  /** International ¼, as listed. */
  readonly scaleBf: number;
  /** The job's own page, where both sides show it around; null otherwise. */
  readonly shown: number | null;
}

/** A photograph of a sawyer's work, from a job that both sides show around. */
export interface WorkPhoto {
  readonly id: string;
  readonly job: number;
  readonly words: string;
  readonly picture: PictureView;
}

const MOST_JOBS = 8;
const MOST_PHOTOS = 6;

/** Whether both sides of booking `b` show it around, and neither they nor the listing `l` was taken off show. */
const shown = `EXISTS (SELECT 1 FROM job_page p WHERE p.booking_id = b.id AND p.landowner_agreed_at IS NOT NULL AND p.sawyer_agreed_at IS NOT NULL)
  AND l.hidden_at IS NULL AND EXISTS (SELECT 1 FROM account o WHERE o.id = b.landowner_id AND o.status = 'active')`;

/** A sawyer's newest settled jobs and photographs of work. Leans on booking_of_sawyer. */
export async function jobsOfSawyer(sawyerId: string): Promise<{ readonly jobs: readonly SettledJob[]; readonly photos: readonly WorkPhoto[] }> {
  const jobs = await rows<SettledJob>(
    `SELECT coalesce(l.title, '') AS title, concat_ws(', ', l.town, l.state) AS near, l.board_feet AS "scaleBf", CASE WHEN ${shown} THEN b.number END AS shown,
       to_char(coalesce((SELECT max(day) FROM booked_day d WHERE d.booking_id = b.id AND d.active), (b.updated_at AT TIME ZONE b.time_zone)::date), 'YYYY-MM') AS month
     FROM booking b JOIN listing l ON l.id = b.listing_id WHERE b.sawyer_id = $1 AND b.status = 'settled' AND l.hidden_at IS NULL ORDER BY b.updated_at DESC LIMIT ${MOST_JOBS}`,
    [sawyerId],
  );
  const photos = await rows<{ id: string; job: number; caption: string; shows: string | null; width: number; height: number; blur: string | null }>(
    `SELECT photo.id, b.number AS job, photo.caption, photo.shows, photo.width, photo.height, photo.blur
     FROM booking b JOIN listing l ON l.id = b.listing_id JOIN job_page page ON page.booking_id = b.id JOIN photo ON photo.id = ANY (page.photo_ids)
     WHERE b.sawyer_id = $1 AND b.status = 'settled' AND ${shown} AND photo.removed_at IS NULL AND photo.status = 'ready'
     ORDER BY photo.shows IS NOT DISTINCT FROM 'boards' DESC, page.updated_at DESC, photo.position, photo.id LIMIT ${MOST_PHOTOS}`,
    [sawyerId],
  );
  return {
    jobs,
    photos: photos.map(({ id, job, caption, shows, width, height, blur }) => {
      const words = shows === 'metal' ? 'Metal found in the log' : shows === 'boards' ? 'Boards' : photoAlt(caption, null);
      return { id, job, words, picture: pictureView({ id, width, height, blur: blur ?? '' }, words) };
    }),
  };
}
