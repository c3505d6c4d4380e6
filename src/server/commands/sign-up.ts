import { termsVersion } from '~/domain/terms.ts';
import { paths } from '~/domain/paths.ts';
import { confirmAddress } from '~/emails/account-letters.ts';
import type { RoleName } from '~/schemas/account-forms.ts';
import { inTransaction, refusedBy } from '../db.ts';
import { makeToken } from '../email-tokens.ts';
import { invalid } from '../errors.ts';
import { countTry } from '../http/limits.ts';
import { enqueue } from '../jobs/queue.ts';
import { Account, TermsAcceptance } from '../models/account.ts';
import { linkTo } from '../parties.ts';
import { hashPassword } from '../passwords.ts';
import { record } from '../transition.ts';

export interface SigningUp {
  readonly name: string;
  readonly email: string;
  readonly password: string;
  readonly as: readonly RoleName[];
  readonly zip: string | null;
  /** Where to go on to once the address is confirmed: one of our own paths. */
  readonly next?: string | null;
  /** The network address of whoever asks; null for the demo's story and commands of ours. */
  readonly clientAddress: string | null;
}

/**
 * Opens an account, with the terms accepted in their present version, and sends the link that confirms the address.
 * @throws Refusal `invalid` when the address has an account already, `tooMany`
 */
export async function signUp(input: SigningUp, at: Date): Promise<{ readonly accountId: string }> {
  if (input.clientAddress !== null) await countTry('sign-up', input.clientAddress);
  const passwordHash = await hashPassword(input.password);
  const taken = invalid([{ path: 'email', message: 'This address has an account already. Sign in instead, or ask for a new password.' }]);
  if ((await Account.count({ where: { email: input.email } })) > 0) throw taken;
  try {
    return await inTransaction(async () => {
      const account = await Account.create({
        email: input.email, passwordHash, name: input.name, zip: input.zip, createdAt: at,
        isLandowner: input.as.includes('landowner'), isSawyer: input.as.includes('sawyer'), termsVersion, termsAcceptedAt: at,
      });
      await TermsAcceptance.create({ accountId: account.id, version: termsVersion, acceptedAt: at });
      await record(account, 'signUp', 'account', account.id, at, { data: { as: input.as, terms: termsVersion } });
      await enqueue('send-mail', confirmAddress(account, await confirmationLink(account.id, account.email, at, input.next)));
      return { accountId: account.id };
    });
  } catch (error) {
    // Two at once with the same address: the database lets one in.
    if (refusedBy(error, 'account_email_key')) throw taken;
    throw error;
  }
}

/** Makes the link of a confirmation letter, in the caller's transaction. */
export async function confirmationLink(accountId: string, email: string, at: Date, next?: string | null): Promise<string> {
  const token = await makeToken(accountId, 'confirm-email', email, at);
  return linkTo(paths.confirmEmail(token) + (next ? `?next=${encodeURIComponent(next)}` : ''));
}
