import { Account } from '~/server/models/account.ts';
import { oneRow } from '~/server/db.ts';
import type { Viewer } from '~/server/viewer.ts';

/** What an account of the cast is. Left out means no; the address is confirmed unless `confirmed` is false. */
export interface Part {
  readonly name: string;
  readonly landowner?: boolean;
  readonly sawyer?: boolean;
  readonly moderator?: boolean;
  readonly confirmed?: boolean;
}

/** Every account of the cast is made on this day, before anything that a check plays out. */
export const CAST_MADE_AT = new Date('2026-07-01T12:00:00Z');

/** The address of a member of the cast: `ada@cast.example`. */
export const addressOf = (name: string): string => `${name.toLowerCase().replaceAll(' ', '.')}@cast.example`;

/**
 * Makes an account straight in the database, for checks whose subject is not signing up.
 * Its password hash matches no password: sign in through the commands, or take `viewerFor`.
 */
export async function makeAccount(part: Part): Promise<Account> {
  return Account.create({
    email: addressOf(part.name),
    emailConfirmedAt: part.confirmed === false ? null : CAST_MADE_AT,
    passwordHash: 'no password matches this',
    name: part.name,
    isLandowner: part.landowner ?? false,
    isSawyer: part.sawyer ?? false,
    isModerator: part.moderator ?? false,
    createdAt: CAST_MADE_AT,
  });
}

/** The account as it would ask: signed in, a moderator with the second factor given. Read anew, so it shows what has changed. */
export async function viewerFor(accountId: string): Promise<Viewer> {
  const account = await Account.findByPk(accountId, { rejectOnEmpty: true });
  const unread = await oneRow<{ count: number }>('SELECT count(*)::int AS count FROM message WHERE recipient_id = $1 AND read_at IS NULL AND hidden_at IS NULL', [accountId]);
  return {
    id: account.id,
    name: account.name,
    email: account.email,
    emailConfirmed: account.emailConfirmedAt !== null,
    isLandowner: account.isLandowner,
    isSawyer: account.isSawyer,
    isModerator: account.isModerator,
    secondFactorDue: false,
    active: account.status === 'active',
    sessionId: accountId,
    unread: unread?.count ?? 0,
  };
}

/** The fixed cast as viewers. */
export interface Cast {
  /** A landowner. */
  readonly ada: Viewer;
  /** Another landowner, who also saws. */
  readonly dora: Viewer;
  /** A sawyer. */
  readonly bram: Viewer;
  /** Another sawyer. */
  readonly cleo: Viewer;
  /** A moderator. */
  readonly mo: Viewer;
}

/** Makes the whole cast. Call it once, in `beforeAll`. */
export async function makeCast(): Promise<Cast> {
  const viewer = async (part: Part): Promise<Viewer> => viewerFor((await makeAccount(part)).id);
  return {
    ada: await viewer({ name: 'Ada', landowner: true }),
    dora: await viewer({ name: 'Dora', landowner: true, sawyer: true }),
    bram: await viewer({ name: 'Bram', sawyer: true }),
    cleo: await viewer({ name: 'Cleo', sawyer: true }),
    mo: await viewer({ name: 'Mo', moderator: true }),
  };
}
