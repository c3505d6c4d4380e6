import { termsVersion } from '~/domain/terms.ts';
import { oneRow, rows } from '../db.ts';
import type { Viewer } from '../viewer.ts';
import { knownName } from './known-name.ts';

export interface AccountPage {
  readonly name: string;
  readonly email: string;
  readonly zip: string | null;
  readonly isLandowner: boolean;
  readonly isSawyer: boolean;
  readonly suspendedReason: string | null;
  readonly secondFactorSince: Date | null;
  readonly blocked: readonly { readonly id: string; readonly name: string }[];
}

/** One's own account, with the people one has blocked. */
export async function accountPage(viewer: Viewer): Promise<AccountPage> {
  const account = await oneRow<Omit<AccountPage, 'blocked'>>(
    `SELECT name, email, zip, is_landowner AS "isLandowner", is_sawyer AS "isSawyer",
       CASE WHEN status = 'suspended' THEN suspended_reason END AS "suspendedReason", totp_confirmed_at AS "secondFactorSince"
     FROM account WHERE id = $1`,
    [viewer.id],
  );
  if (!account) throw new Error('the viewer has no account');
  const blocked = await rows<AccountPage['blocked'][number]>(
    `SELECT account.id, ${knownName('$1')} AS name FROM account_block JOIN account ON account.id = blocked_id WHERE blocker_id = $1 ORDER BY account_block.created_at DESC LIMIT 200`,
    [viewer.id],
  );
  return { ...account, blocked };
}

export interface SessionRow {
  readonly id: string;
  readonly mine: boolean;
  readonly device: string;
  readonly since: Date;
  readonly lastSeen: Date;
}

/** What a browser calls itself, in words: never more than a hint. */
export function deviceWords(userAgent: string): string {
  const known = (list: readonly (readonly [RegExp, string])[]): string | undefined => list.find(([pattern]) => pattern.test(userAgent))?.[1];
  const browser = known([[/Edg\//, 'Edge'], [/Firefox\//, 'Firefox'], [/Chrome\//, 'Chrome'], [/Safari\//, 'Safari']]);
  const system = known([[/iPhone/, 'an iPhone'], [/iPad/, 'an iPad'], [/Android/, 'Android'], [/Windows/, 'Windows'], [/Mac OS X/, 'a Mac'], [/Linux/, 'Linux']]);
  if (!browser && !system) return 'Unknown device';
  return `${browser ?? 'Browser'}${system ? ` on ${system}` : ''}`;
}

/** One's sessions that still run, the one in use first. Index: session_of_account. */
export async function sessionsOf(viewer: Viewer, at: Date): Promise<SessionRow[]> {
  const found = await rows<Omit<SessionRow, 'device'> & { userAgent: string }>(
    `SELECT public_id AS id, public_id = $2 AS mine, user_agent AS "userAgent", created_at AS since, last_seen_at AS "lastSeen"
     FROM session WHERE account_id = $1 AND expires_at > $3 ORDER BY public_id = $2 DESC, last_seen_at DESC LIMIT 100`,
    [viewer.id, viewer.sessionId, at],
  );
  return found.map(({ userAgent, ...row }) => ({ ...row, device: deviceWords(userAgent) }));
}

export interface TermsRow {
  readonly version: string;
  readonly acceptedAt: Date;
}

/** The versions of the terms that one has accepted, newest first, and whether the present one is among them. */
export async function termsOf(viewer: Viewer): Promise<{ readonly accepted: readonly TermsRow[]; readonly due: boolean }> {
  const accepted = await rows<TermsRow>('SELECT version, accepted_at AS "acceptedAt" FROM terms_acceptance WHERE account_id = $1 ORDER BY accepted_at DESC', [viewer.id]);
  return { accepted, due: !accepted.some(({ version }) => version === termsVersion) };
}

/**
 * The time zone in which to show a person instants that belong to no site: that of the sawyer's base, or of the last listing; else UTC.
 */
export async function zoneOf(accountId: string): Promise<string> {
  const found = await oneRow<{ zone: string }>(
    `SELECT coalesce(
       (SELECT time_zone FROM sawyer_profile WHERE account_id = $1),
       (SELECT time_zone FROM listing WHERE owner_id = $1 AND time_zone IS NOT NULL ORDER BY updated_at DESC LIMIT 1),
       'UTC') AS zone`,
    [accountId],
  );
  return found?.zone ?? 'UTC';
}
