import { Refusal } from '../errors.ts';
import { countTry, forgetTries } from '../http/limits.ts';
import { Account } from '../models/account.ts';
import { passwordMatches } from '../passwords.ts';
import { record } from '../transition.ts';

export interface SigningIn {
  readonly email: string;
  readonly password: string;
  readonly clientAddress: string;
}

/** The same words whether the address is unknown or the password is wrong. */
const wrong = (): Refusal => new Refusal('invalid', 'That address and password do not go together.', { problems: [{ path: '', message: 'That address and password do not go together. Check both, or ask for a new password.' }] });

/**
 * Checks address and password. The page then opens the session, or asks for the second factor first.
 * @throws Refusal `invalid` when they do not go together (after the same time in every case), `tooMany`
 */
export async function signIn(input: SigningIn, at: Date): Promise<{ readonly accountId: string; readonly secondFactor: boolean }> {
  await countTry('sign-in by address', input.clientAddress);
  const here = `${input.clientAddress} ${input.email}`;
  await countTry('sign-in by account and address', here);
  await countTry('sign-in by account', input.email);
  const account = await Account.findOne({ where: { email: input.email } });
  const matches = await passwordMatches(account?.passwordHash ?? null, input.password);
  if (!account || !matches || account.status === 'closed') throw wrong();
  await forgetTries('sign-in by account and address', here);
  const secondFactor = account.totpConfirmedAt !== null;
  if (!secondFactor) await record(account, 'signIn', 'account', account.id, at);
  return { accountId: account.id, secondFactor };
}
