import { createHash } from 'node:crypto';
import { Account } from './models/account.ts';
import { seal, unseal } from './sealing.ts';

/** The cookie between password and second factor: it opens nothing by itself. */
export const pendingCookieName = 'skidway_second_step';
/** How long the code may be looked for, in seconds. */
export const PENDING_S = 600;

// A password that was changed meanwhile must be given anew.
const fingerprint = (account: Account): string => createHash('sha256').update(account.passwordHash).digest('base64url').slice(0, 16);

/** The value of the cookie for an account whose password was right at this time. */
export async function pendingFor(accountId: string, at: Date): Promise<string> {
  const account = await Account.findByPk(accountId, { rejectOnEmpty: true });
  return seal('pending sign-in', '', JSON.stringify([accountId, at.getTime() + PENDING_S * 1000, fingerprint(account)]));
}

/** The account that the cookie speaks for; null when it is not ours, too old, or the password has changed since. */
export async function pendingAccount(value: string | undefined, at: Date): Promise<string | null> {
  const opened = value ? unseal('pending sign-in', '', value) : null;
  if (opened === null) return null;
  const [accountId, until, print] = JSON.parse(opened) as [string, number, string];
  const account = at.getTime() < until ? await Account.findByPk(accountId) : null;
  return account && account.status !== 'closed' && fingerprint(account) === print ? accountId : null;
}
