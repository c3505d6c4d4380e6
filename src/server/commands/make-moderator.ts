import { inTransaction } from '../db.ts';
import { invalid } from '../errors.ts';
import { Account, Session } from '../models/account.ts';
import { hashPassword } from '../passwords.ts';
import { newSecondFactor, sealSecret } from '../second-factor.ts';
import { record } from '../transition.ts';
import { system } from '../viewer.ts';

export interface NewModerator {
  readonly email: string;
  /** Needed for a new account; an account that is there keeps its own. */
  readonly name: string | null;
  readonly password: string | null;
  /** A base32 secret to use instead of a new one. */
  readonly secret?: string;
}

export interface MadeModerator {
  readonly accountId: string;
  /** Whether an account that was there already has been raised. */
  readonly raised: boolean;
  /** The second factor's secret in base32, said this once. */
  readonly secret: string;
}

/**
 * Makes a moderator, or raises an account to one, and turns its second factor on with a new secret. Its sessions end: they were
 * opened without it. Not for pages: whoever runs commands on the server answers for who asks.
 * @throws Refusal `invalid` when there is no such account and no name and password for a new one, or the account is not active
 */
export async function makeModerator(input: NewModerator, at: Date): Promise<MadeModerator> {
  const secret = input.secret ?? newSecondFactor();
  const passwordHash = input.password === null ? null : await hashPassword(input.password);
  return inTransaction(async () => {
    const known = await Account.findOne({ where: { email: input.email }, lock: true });
    if (!known && (input.name === null || passwordHash === null)) throw invalid([{ path: 'name', message: 'This address has no account yet. Give a name to make one.' }]);
    if (known && known.status !== 'active') throw invalid([{ path: 'email', message: `This account is ${known.status}.` }]);
    const account = known ?? (await Account.create({ email: input.email, emailConfirmedAt: at, passwordHash: passwordHash ?? '', name: input.name ?? '', isModerator: true, createdAt: at }));
    await account.update({ isModerator: true, emailConfirmedAt: account.emailConfirmedAt ?? at, totpSecret: sealSecret(account.id, secret), totpConfirmedAt: at, totpLastStep: null });
    await Session.destroy({ where: { accountId: account.id } });
    await record(system('command line'), 'makeModerator', 'account', account.id, at);
    return { accountId: account.id, raised: known !== null, secret };
  });
}
