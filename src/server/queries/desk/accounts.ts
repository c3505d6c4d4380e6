import type { CertificateKind } from '~/domain/certificate.ts';
import { abilities, type Action } from '~/domain/permissions.ts';
import type { AccountState } from '~/domain/states/account.ts';
import { oneRow, rows } from '../../db.ts';
import { anywhere, DESK_PAGE, openDesk, pageOf } from '../../desk.ts';
import { notFound } from '../../errors.ts';
import { baseRoles, type Viewer } from '../../viewer.ts';
import { sqlBuilder } from '../sql-builder.ts';
import { historyOf, type DeskEvent } from './events.ts';
import { reportsAbout, type ReportRow } from './reports.ts';

export interface DeskAccountRow {
  readonly id: string;
  readonly name: string;
  readonly email: string;
  readonly emailConfirmed: boolean;
  readonly isLandowner: boolean;
  readonly isSawyer: boolean;
  readonly isModerator: boolean;
  readonly status: AccountState;
  readonly createdAt: Date;
}

const columns = `a.id, a.name, a.email, a.email_confirmed_at IS NOT NULL AS "emailConfirmed", a.is_landowner AS "isLandowner", a.is_sawyer AS "isSawyer", a.is_moderator AS "isModerator", a.status, a.created_at AS "createdAt"`;

const kinds = { landowner: 'a.is_landowner', sawyer: 'a.is_sawyer', moderator: 'a.is_moderator', suspended: `a.status = 'suspended'`, closed: `a.status = 'closed'` } as const;
export type AccountKind = keyof typeof kinds;
export const accountKinds = Object.keys(kinds) as AccountKind[];

export interface AccountsAsked {
  readonly q: string;
  readonly kind: AccountKind | '';
  /** The id of the last account of the page before. */
  readonly after: string | null;
}

/** Accounts, newest first. Leans on account_newest; a name or address on account_by_name and account_by_email. */
export async function deskAccounts(viewer: Viewer | null, asked: AccountsAsked): Promise<{ readonly accounts: readonly DeskAccountRow[]; readonly next: string | null }> {
  openDesk(viewer);
  const sql = sqlBuilder();
  const where = ['true'];
  if (asked.q !== '') {
    const pattern = sql.value(anywhere(asked.q));
    where.push(`(a.name ILIKE ${pattern} OR a.email::text ILIKE ${pattern} OR a.id::text = ${sql.value(asked.q.toLowerCase())})`);
  }
  if (asked.kind !== '') where.push(kinds[asked.kind]);
  if (asked.after !== null) where.push(`(a.created_at, a.id) < (SELECT created_at, id FROM account WHERE id = ${sql.value(asked.after)})`);
  const found = await rows<DeskAccountRow>(`SELECT ${columns} FROM account a WHERE ${where.join(' AND ')} ORDER BY a.created_at DESC, a.id DESC LIMIT ${DESK_PAGE + 1}`, sql.values);
  const { rows: accounts, last } = pageOf(found);
  return { accounts, next: last?.id ?? null };
}

export interface DeskAccount extends DeskAccountRow {
  readonly zip: string | null;
  readonly suspendedReason: string | null;
  readonly secondFactorSince: Date | null;
  readonly termsVersion: string | null;
  readonly sessions: number;
  readonly certificates: readonly { readonly kind: CertificateKind; readonly sentAt: Date | null; readonly saysUntil: string | null; readonly seenAt: Date | null; readonly expiresOn: string | null; readonly hasFile: boolean }[];
  readonly listings: readonly { readonly number: number; readonly title: string; readonly status: string }[];
  readonly bookings: readonly { readonly number: number; readonly title: string; readonly status: string; readonly side: 'landowner' | 'sawyer' }[];
  readonly reports: readonly ReportRow[];
  readonly history: readonly DeskEvent[];
  readonly isSelf: boolean;
  readonly can: Record<Action<'account'>, boolean>;
}

const uuid = /^[0-9a-f]{8}(-[0-9a-f]{4}){3}-[0-9a-f]{12}$/i;

/** One account at the desk: its newest 20 listings and bookings, reports about it, and its history. @throws Refusal `notFound` */
export async function deskAccount(viewer: Viewer | null, id: string, at: Date): Promise<DeskAccount> {
  openDesk(viewer);
  type Found = Omit<DeskAccount, 'certificates' | 'listings' | 'bookings' | 'reports' | 'history' | 'isSelf' | 'can'>;
  const found = uuid.test(id)
    ? await oneRow<Found>(
        `SELECT ${columns}, a.zip, a.suspended_reason AS "suspendedReason", a.totp_confirmed_at AS "secondFactorSince", a.terms_version AS "termsVersion",
           (SELECT count(*)::int FROM session WHERE account_id = a.id AND expires_at > $2) AS sessions FROM account a WHERE a.id = $1`,
        [id, at],
      )
    : undefined;
  if (!found) throw notFound('account');
  const certificates = await rows<DeskAccount['certificates'][number]>(
    `SELECT kind, sent_at AS "sentAt", says_until::text AS "saysUntil", seen_at AS "seenAt", expires_on::text AS "expiresOn", coalesce(waiting_file, seen_file) IS NOT NULL AS "hasFile"
     FROM certificate WHERE sawyer_id = $1 ORDER BY kind`,
    [id],
  );
  const listings = await rows<DeskAccount['listings'][number]>(`SELECT number, coalesce(title, '') AS title, status FROM listing WHERE owner_id = $1 AND status <> 'draft' ORDER BY number DESC LIMIT 20`, [id]);
  const bookings = await rows<DeskAccount['bookings'][number]>(
    `SELECT k.number, coalesce(l.title, '') AS title, k.status, CASE WHEN k.landowner_id = $1 THEN 'landowner' ELSE 'sawyer' END AS side
     FROM booking k JOIN listing l ON l.id = k.listing_id WHERE k.landowner_id = $1 OR k.sawyer_id = $1 ORDER BY k.number DESC LIMIT 20`,
    [id],
  );
  return {
    ...found, certificates, listings, bookings, isSelf: id.toLowerCase() === viewer.id,
    reports: await reportsAbout(viewer, 'account', id), history: await historyOf(viewer, 'account', id),
    can: abilities('account', baseRoles(viewer), found.status),
  };
}
