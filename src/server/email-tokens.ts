import { createHash, randomBytes } from 'node:crypto';
import { Op } from 'sequelize';
import { currentTransaction } from './db.ts';
import { Refusal } from './errors.ts';
import { EmailToken, type TokenPurpose } from './models/account.ts';

const HOUR_MS = 3_600_000;

/** How long a link in a letter works. */
export const tokenHours: Readonly<Record<TokenPurpose, number>> = { 'confirm-email': 72, 'change-email': 24, 'reset-password': 1 };

const hashed = (token: string): string => createHash('sha256').update(token).digest('hex');

/**
 * Makes the secret of a link in a letter: 32 random bytes, of which only the hash is kept. An older unused one of the same
 * purpose stops working.
 */
export async function makeToken(accountId: string, purpose: TokenPurpose, email: string, at: Date): Promise<string> {
  await EmailToken.update({ usedAt: at }, { where: { accountId, purpose, usedAt: null } });
  const token = randomBytes(32).toString('base64url');
  await EmailToken.create({ hash: hashed(token), accountId, purpose, email, expiresAt: new Date(at.getTime() + tokenHours[purpose] * HOUR_MS), createdAt: at });
  return token;
}

/**
 * Ends the links that could take an account over, in the caller's transaction: whoever sets a new password shuts out everybody who asked
 * for one before, or for another address.
 */
export async function endTakeoverLinks(accountId: string, at: Date): Promise<void> {
  await EmailToken.update({ usedAt: at }, { where: { accountId, purpose: ['change-email', 'reset-password'], usedAt: null } });
}

/** Whether a link still works, without using it: a page asks before it shows its button. */
export async function tokenWorks(token: string, purposes: readonly TokenPurpose[], at: Date): Promise<boolean> {
  return (await EmailToken.count({ where: { hash: hashed(token), purpose: [...purposes], usedAt: null, expiresAt: { [Op.gt]: at } } })) === 1;
}

/** What to say of a link that has run out, was used, or never was: the same for all three. */
export const deadLink = (): Refusal => new Refusal('notFound', 'This link has been used or has run out. Ask for a new one.');

/**
 * Uses a link up, in the caller's transaction: of two who follow it at once, one gets it.
 * @throws Refusal `notFound` when it does not work (any more).
 */
export async function useToken(token: string, purposes: readonly TokenPurpose[], at: Date): Promise<{ accountId: string; purpose: TokenPurpose; email: string }> {
  if (!currentTransaction()) throw new Error('useToken needs a transaction');
  const row = await EmailToken.findByPk(hashed(token), { lock: true });
  if (!row || !purposes.includes(row.purpose) || row.usedAt !== null || row.expiresAt <= at) throw deadLink();
  await row.update({ usedAt: at });
  return { accountId: row.accountId, purpose: row.purpose, email: row.email };
}
