import type { Point } from '~/domain/geo.ts';
import { rows, oneRow } from '../db.ts';
import { notFound } from '../errors.ts';
import { jobsOfSawyer, type SettledJob, type WorkPhoto } from './jobs-of-sawyer.ts';
import { earliestOpenDayOf } from './open-days.ts';
import { shownWork, type OwnWork } from './photos.ts';
import { publicSawyerColumns, publicSawyerConditions, type PublicSawyer } from './sawyers-near.ts';
import { sqlBuilder } from './sql-builder.ts';

export interface PublicReview {
  readonly id: string;
  readonly stars: number;
  readonly body: string;
  readonly on: string;
  readonly by: string;
}

export interface SawyerPage extends PublicSawyer {
  readonly about: string;
  readonly services: readonly string[];
  readonly languages: readonly string[];
  /** The grade or certification for lumber of a dwelling that the sawyer states; empty for none. */
  readonly lumberCredential: string;
  /** A moderator looked at the paper behind it, which is valid until this day. */
  readonly lumberCertificateExpiresOn: string | null;
  readonly noticeDays: number;
  readonly earliestOpenDay: string | null;
  readonly reviews: readonly PublicReview[];
  readonly jobs: readonly SettledJob[];
  /** From jobs that both sides show around. */
  readonly photos: readonly WorkPhoto[];
  /** What the sawyer shows of their own work. */
  readonly ownWork: readonly OwnWork[];
}

const uuid = /^[0-9a-f]{8}(-[0-9a-f]{4}){3}-[0-9a-f]{12}$/i;
const mostReviews = 30;

/**
 * A sawyer as anyone may see them; reviews newest first, by first name only.
 * @throws Refusal `notFound` when there is none, or the account is not in good standing
 */
export async function sawyerPage(id: string, from: Point | null, at: Date): Promise<SawyerPage> {
  if (!uuid.test(id)) throw notFound('sawyer');
  const sql = sqlBuilder();
  const today = sql.value(at);
  const here = from && `ST_SetSRID(ST_MakePoint(${sql.value(from.lng)}::float8, ${sql.value(from.lat)}::float8), 4326)::geography`;
  const found = await oneRow<Omit<SawyerPage, 'earliestOpenDay' | 'reviews' | 'jobs' | 'photos' | 'ownWork'> & { timeZone: string | null }>(
    `SELECT ${publicSawyerColumns(here ? `(s.base <-> ${here})` : 'NULL::float8', today)}, s.about, s.services, s.languages, s.lumber_credential AS "lumberCredential",
       (SELECT c.expires_on::text FROM certificate c WHERE c.sawyer_id = a.id AND c.kind = 'lumber' AND c.expires_on >= ${today}::date) AS "lumberCertificateExpiresOn", s.notice_days AS "noticeDays", s.time_zone AS "timeZone"
     FROM sawyer_profile s JOIN account a ON a.id = s.account_id WHERE ${publicSawyerConditions} AND a.id = ${sql.value(id)}`,
    sql.values,
  );
  if (!found) throw notFound('sawyer');
  const { timeZone, ...sawyer } = found;
  const reviews = await rows<PublicReview>(
    `SELECT v.id, v.stars, v.body, (v.created_at AT TIME ZONE 'UTC')::date::text AS on, split_part(a.name, ' ', 1) AS by
     FROM review v JOIN account a ON a.id = v.author_id WHERE v.subject_id = $1 AND v.hidden_at IS NULL ORDER BY v.created_at DESC LIMIT ${mostReviews}`,
    [id],
  );
  return { ...sawyer, ...(await jobsOfSawyer(id)), ownWork: await shownWork(id, sawyer.name), reviews, earliestOpenDay: await earliestOpenDayOf(id, timeZone ?? 'UTC', at) };
}
