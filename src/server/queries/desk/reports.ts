import type { PictureView } from '~/domain/photo.ts';
import type { ReportReason } from '~/schemas/account-forms.ts';
import { oneRow, rows } from '../../db.ts';
import { DESK_PAGE, openDesk } from '../../desk.ts';
import { notFound } from '../../errors.ts';
import type { Viewer } from '../../viewer.ts';
import { onePhoto } from '../photos.ts';

export interface ReportRow {
  readonly id: string;
  readonly thing: string;
  readonly thingId: string;
  readonly reason: ReportReason;
  readonly note: string;
  readonly createdAt: Date;
  readonly reporterId: string | null;
  readonly reporterName: string | null;
  readonly handledAt: Date | null;
  readonly handledByName: string | null;
  readonly outcome: string | null;
  /** What is reported, as far as it has a name: a title, a person, or the words of a message, a review or below a photograph. */
  readonly about: string;
  readonly listing: number | null;
  readonly personId: string | null;
  readonly personName: string | null;
}

const select = `SELECT r.id, r.thing, r.thing_id AS "thingId", r.reason, r.note, r.created_at AS "createdAt", r.reporter_id AS "reporterId", reporter.name AS "reporterName",
    r.handled_at AS "handledAt", handler.name AS "handledByName", r.outcome, coalesce(l.title, m.body, v.stars || ' of 5' || CASE WHEN v.body = '' THEN '' ELSE E':\\n' || v.body END, nullif(p.caption, ''), person.name, '') AS about, l.number AS listing,
    person.id AS "personId", person.name AS "personName"
  FROM report r LEFT JOIN account reporter ON reporter.id = r.reporter_id LEFT JOIN account handler ON handler.id = r.handled_by
  LEFT JOIN photo p ON r.thing = 'photo' AND p.id = r.thing_id
  LEFT JOIN review v ON r.thing = 'review' AND v.id = r.thing_id
  LEFT JOIN listing l ON r.thing IN ('listing', 'photo') AND l.id = CASE r.thing WHEN 'photo' THEN p.listing_id ELSE r.thing_id END
  LEFT JOIN message m ON r.thing = 'message' AND m.id = r.thing_id
  LEFT JOIN account person ON person.id = CASE r.thing WHEN 'listing' THEN l.owner_id WHEN 'photo' THEN p.owner_id WHEN 'message' THEN m.sender_id WHEN 'review' THEN v.author_id WHEN 'account' THEN r.thing_id END`;

/** Reports that wait, the oldest first, or those that were handled, the newest first. Index: report_open. */
export async function deskReports(viewer: Viewer | null, handled: boolean, page: number): Promise<{ readonly reports: readonly ReportRow[]; readonly more: boolean }> {
  openDesk(viewer);
  const found = await rows<ReportRow>(
    `${select} WHERE r.handled_at IS ${handled ? 'NOT ' : ''}NULL ORDER BY ${handled ? 'r.handled_at DESC' : 'r.created_at'}, r.id LIMIT ${DESK_PAGE + 1} OFFSET $1`,
    [(page - 1) * DESK_PAGE],
  );
  return { reports: found.slice(0, DESK_PAGE), more: found.length > DESK_PAGE };
}

/** Reports about one thing, newest first. Index: report_of_thing. */
export async function reportsAbout(viewer: Viewer | null, thing: 'listing' | 'account', thingId: string): Promise<ReportRow[]> {
  openDesk(viewer);
  return rows<ReportRow>(`${select} WHERE r.thing = $1 AND r.thing_id = $2 ORDER BY r.created_at DESC LIMIT 50`, [thing, thingId]);
}

export interface ReportPage extends ReportRow {
  /** Whether it was taken out by itself already. */
  readonly isOut: boolean;
  /** For a photograph that is still there: itself. */
  readonly picture: PictureView | null;
  /** Other reports about the same thing that wait. */
  readonly alsoWaiting: number;
}

const uuid = /^[0-9a-f]{8}(-[0-9a-f]{4}){3}-[0-9a-f]{12}$/i;

/** One report. @throws Refusal `notFound` */
export async function deskReport(viewer: Viewer | null, id: string): Promise<ReportPage> {
  openDesk(viewer);
  const report = uuid.test(id) ? await oneRow<ReportRow>(`${select} WHERE r.id = $1`, [id]) : undefined;
  if (!report) throw notFound('report');
  const more = await oneRow<{ isOut: boolean; also: number }>(
    `SELECT EXISTS (SELECT 1 FROM message WHERE $2 = 'message' AND id = $1 AND hidden_at IS NOT NULL UNION ALL SELECT 1 FROM review WHERE $2 = 'review' AND id = $1 AND hidden_at IS NOT NULL
         UNION ALL SELECT 1 FROM photo WHERE $2 = 'photo' AND id = $1 AND removed_at IS NOT NULL) AS "isOut",
       (SELECT count(*)::int FROM report WHERE thing = $2 AND thing_id = $1 AND handled_at IS NULL AND id <> $3) AS also`,
    [report.thingId, report.thing, report.id],
  );
  const isOut = more?.isOut ?? false;
  return { ...report, isOut, picture: report.thing === 'photo' && !isOut ? (await onePhoto(report.thingId)).picture : null, alsoWaiting: more?.also ?? 0 };
}
