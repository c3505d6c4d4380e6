import type { CertificateKind } from '~/domain/certificate.ts';
import { rows, oneRow } from '../../db.ts';
import { openDesk } from '../../desk.ts';
import type { Viewer } from '../../viewer.ts';

export interface WaitingBooking {
  readonly number: number;
  readonly title: string;
  readonly status: string;
  readonly landownerName: string;
  readonly sawyerName: string;
  readonly since: Date;
}

export interface WaitingCertificate {
  readonly accountId: string;
  readonly kind: CertificateKind;
  readonly name: string;
  readonly sentAt: Date;
  readonly saysUntil: string;
}

export interface StuckCall {
  readonly id: string;
  readonly kind: string;
  readonly booking: number | null;
  readonly error: string;
  readonly since: Date;
}

/** What waits for a moderator, the longest waiting first; each list at most 20 long, with the whole count beside it. */
export interface DeskHome {
  readonly reports: { readonly count: number; readonly oldest: Date | null };
  readonly queried: readonly WaitingBooking[];
  /** No-shows that the other side contests. */
  readonly noShows: readonly WaitingBooking[];
  readonly certificates: readonly WaitingCertificate[];
  readonly stuck: readonly StuckCall[];
  readonly ofSuspended: readonly WaitingBooking[];
  readonly counts: { readonly queried: number; readonly noShows: number; readonly certificates: number; readonly stuck: number; readonly ofSuspended: number };
}

const most = 20;
const booking = (where: string): string =>
  `SELECT k.number, l.title, k.status, a.name AS "landownerName", s.name AS "sawyerName", k.updated_at AS since, count(*) OVER ()::int AS whole
   FROM booking k JOIN listing l ON l.id = k.listing_id JOIN account a ON a.id = k.landowner_id JOIN account s ON s.id = k.sawyer_id
   WHERE ${where} ORDER BY k.updated_at LIMIT ${most}`;

type Counted<Row> = Row & { readonly whole: number };
const whole = (found: readonly { readonly whole: number }[]): number => found[0]?.whole ?? 0;

/** The first page of the desk. */
export async function deskHome(viewer: Viewer | null): Promise<DeskHome> {
  openDesk(viewer);
  const reports = await oneRow<{ count: number; oldest: Date | null }>('SELECT count(*)::int AS count, min(created_at) AS oldest FROM report WHERE handled_at IS NULL');
  const queried = await rows<Counted<WaitingBooking>>(booking(`k.status = 'queried'`));
  const noShows = await rows<Counted<WaitingBooking>>(booking(`EXISTS (SELECT 1 FROM no_show n WHERE n.booking_id = k.id AND n.status = 'contested')`));
  const ofSuspended = await rows<Counted<WaitingBooking>>(booking(`k.status NOT IN ('settled', 'lapsed', 'cancelled') AND (a.status = 'suspended' OR s.status = 'suspended')`));
  const certificates = await rows<Counted<WaitingCertificate>>(
    `SELECT c.sawyer_id AS "accountId", c.kind, a.name, c.sent_at AS "sentAt", c.says_until::text AS "saysUntil", count(*) OVER ()::int AS whole
     FROM certificate c JOIN account a ON a.id = c.sawyer_id WHERE c.sent_at IS NOT NULL AND a.status <> 'closed' ORDER BY c.sent_at LIMIT ${most}`,
  );
  const stuck = await rows<Counted<StuckCall>>(
    `SELECT c.id, c.kind, k.number AS booking, coalesce(c.error, '') AS error, c.created_at AS since, count(*) OVER ()::int AS whole
     FROM provider_call c LEFT JOIN booking k ON k.id = c.booking_id WHERE c.status = 'stuck' ORDER BY c.created_at LIMIT ${most}`,
  );
  return {
    reports: reports ?? { count: 0, oldest: null }, queried, noShows, certificates, stuck, ofSuspended,
    counts: { queried: whole(queried), noShows: whole(noShows), certificates: whole(certificates), stuck: whole(stuck), ofSuspended: whole(ofSuspended) },
  };
}
