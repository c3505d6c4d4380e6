import { createHash } from 'node:crypto';
import { Lucia, TimeSpan, type Adapter, type Cookie, type DatabaseSession, type DatabaseUser } from 'lucia';
import { Op } from 'sequelize';
import { termsVersion } from '~/domain/terms.ts';
import { now } from './clock.ts';
import { oneRow } from './db.ts';
import { env } from './env.ts';
import { Account, Session } from './models/account.ts';
import type { Viewer } from './viewer.ts';

declare module 'lucia' {
  interface Register {
    Lucia: Lucia;
    DatabaseUserAttributes: Record<string, never>;
    DatabaseSessionAttributes: { userAgent: string };
  }
}

const hashed = (secret: string): string => createHash('sha256').update(secret).digest('hex');
const asSession = (row: Session, id: string): DatabaseSession => ({ id, userId: row.accountId, expiresAt: row.expiresAt, attributes: { userAgent: row.userAgent } });

/** Lucia's storage on our own table: the secret in the cookie is kept only as its SHA-256. */
const adapter: Adapter = {
  async getSessionAndUser(sessionId): Promise<[DatabaseSession | null, DatabaseUser | null]> {
    const row = await Session.findByPk(hashed(sessionId));
    if (!row) return [null, null];
    return [asSession(row, sessionId), { id: row.accountId, attributes: {} }];
  },
  async getUserSessions(accountId) {
    return (await Session.findAll({ where: { accountId } })).map((row) => asSession(row, row.publicId));
  },
  async setSession(session) {
    const at = now();
    await Session.create({ idHash: hashed(session.id), accountId: session.userId, expiresAt: session.expiresAt, createdAt: at, lastSeenAt: at, userAgent: session.attributes.userAgent.slice(0, 300) });
  },
  async updateSessionExpiration(sessionId, expiresAt) {
    await Session.update({ expiresAt }, { where: { idHash: hashed(sessionId) } });
  },
  async deleteSession(sessionId) {
    await Session.destroy({ where: { idHash: hashed(sessionId) } });
  },
  async deleteUserSessions(accountId) {
    await Session.destroy({ where: { accountId } });
  },
  async deleteExpiredSessions() {
    await Session.destroy({ where: { expiresAt: { [Op.lte]: now() } } });
  },
};

let known: Lucia | undefined;

/** Lucia, configured once: 30 days, renewed by use, `Secure` when our origin is https. */
export const lucia = (): Lucia =>
  (known ??= new Lucia(adapter, {
    sessionExpiresIn: new TimeSpan(30, 'd'),
    sessionCookie: { name: 'skidway_session', attributes: { secure: env().ORIGIN.startsWith('https:'), sameSite: 'lax', path: '/' } },
  }));

/** The name of the session's cookie. */
export const sessionCookieName = 'skidway_session';

/** Opens a session with a new secret. @returns the cookie to set. */
export async function openSession(accountId: string, userAgent: string): Promise<Cookie> {
  const session = await lucia().createSession(accountId, { userAgent });
  return lucia().createSessionCookie(session.id);
}

/** The part of Astro's context that signing in needs. */
interface Door {
  readonly request: Request;
  readonly cookies: { get(name: string): { value: string } | undefined; set(name: string, value: string, attributes: Cookie['attributes']): void };
}

/**
 * Signs the browser in: whatever session it had ends, a new one with a new secret begins.
 * @param secondFactorAt when the second factor was given, or null
 */
export async function enter(door: Door, accountId: string, secondFactorAt: Date | null): Promise<void> {
  await endSession(door.cookies.get(sessionCookieName)?.value);
  const cookie = await openSession(accountId, door.request.headers.get('user-agent') ?? '');
  if (secondFactorAt) await markSecondFactor(cookie.value, secondFactorAt);
  door.cookies.set(cookie.name, cookie.value, cookie.attributes);
}

/** Ends the session that this cookie value opened. @returns the cookie that clears it. */
export async function endSession(cookieValue: string | undefined): Promise<Cookie> {
  if (cookieValue) await lucia().invalidateSession(cookieValue);
  return lucia().createBlankSessionCookie();
}

/** Marks the session as having passed the second factor. */
export async function markSecondFactor(cookieValue: string, at: Date): Promise<void> {
  await Session.update({ secondFactorAt: at }, { where: { idHash: hashed(cookieValue) } });
}

/**
 * The viewer behind a session cookie.
 * @returns the viewer (null when there is none, it has run out, or the account is closed) and the cookie to renew, if any.
 */
export async function viewerOf(cookieValue: string | undefined): Promise<{ viewer: Viewer | null; renew: Cookie | null }> {
  if (!cookieValue) return { viewer: null, renew: null };
  const { session } = await lucia().validateSession(cookieValue);
  if (!session) return { viewer: null, renew: lucia().createBlankSessionCookie() };
  const row = await oneRow<{ publicId: string; secondFactor: boolean; unread: number; lastSeenAt: Date }>(
    `SELECT public_id AS "publicId", second_factor_at IS NOT NULL AS "secondFactor", last_seen_at AS "lastSeenAt",
       (SELECT count(*)::int FROM message WHERE recipient_id = session.account_id AND read_at IS NULL AND hidden_at IS NULL) AS unread
     FROM session WHERE id_hash = $1`,
    [hashed(cookieValue)],
  );
  const account = await Account.findByPk(session.userId);
  if (!row || !account || account.status === 'closed') return { viewer: null, renew: lucia().createBlankSessionCookie() };
  if (now().getTime() - row.lastSeenAt.getTime() > 300_000) await Session.update({ lastSeenAt: now() }, { where: { idHash: hashed(cookieValue) } });
  const viewer: Viewer = {
    id: account.id,
    name: account.name,
    email: account.email,
    emailConfirmed: account.emailConfirmedAt !== null,
    isLandowner: account.isLandowner,
    isSawyer: account.isSawyer,
    isModerator: account.isModerator && row.secondFactor,
    secondFactorDue: account.isModerator && !row.secondFactor,
    active: account.status === 'active',
    sessionId: row.publicId,
    unread: row.unread,
    termsDue: account.termsVersion !== null && account.termsVersion !== termsVersion,
  };
  return { viewer, renew: session.fresh ? lucia().createSessionCookie(session.id) : null };
}
