import { inTransaction } from '../db.ts';
import { invalid } from '../errors.ts';
import { countTry, forgetTries } from '../http/limits.ts';
import { Account } from '../models/account.ts';
import { codeStep, openSecret } from '../second-factor.ts';
import { record } from '../transition.ts';

/** Takes a code of an account whose row the caller has locked, and remembers its step. @returns false when it is wrong or used. */
export async function takeCode(account: Account, code: string, at: Date): Promise<boolean> {
  const secret = account.totpSecret === null ? null : openSecret(account.id, account.totpSecret);
  if (secret === null) return false;
  const step = codeStep(secret, code, at, account.totpLastStep === null ? null : Number(account.totpLastStep));
  if (step === null) return false;
  await account.update({ totpLastStep: step });
  return true;
}

/**
 * The second step of signing in, after the password.
 * @throws Refusal `invalid` when the code is wrong or has been used, `tooMany`
 */
export async function giveSecondFactor(accountId: string, code: string, at: Date): Promise<void> {
  await countTry('second factor', accountId);
  await inTransaction(async () => {
    const account = await Account.findByPk(accountId, { lock: true, rejectOnEmpty: true });
    if (!(await takeCode(account, code, at))) throw invalid([{ path: 'code', message: 'That code is not the one of this moment, or it was used. Wait for the next one.' }]);
    await record(account, 'signIn', 'account', account.id, at, { data: { secondFactor: true } });
  });
  await forgetTries('second factor', accountId);
}
