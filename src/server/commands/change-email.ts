import { paths } from '~/domain/paths.ts';
import { addressChanging, confirmNewAddress } from '~/emails/account-letters.ts';
import { inTransaction } from '../db.ts';
import { makeToken } from '../email-tokens.ts';
import { invalid } from '../errors.ts';
import { countTry } from '../http/limits.ts';
import { enqueue } from '../jobs/queue.ts';
import { Account } from '../models/account.ts';
import { linkTo } from '../parties.ts';
import { record } from '../transition.ts';
import type { Viewer } from '../viewer.ts';
import { provePassword } from './change-password.ts';

/**
 * Asks to move the account to another address: a link goes to the new one, a word to the old one. Nothing changes until the link
 * is followed. When the new address belongs to another account no link is sent, and the answer does not say so.
 * @throws Refusal `invalid` for a wrong password or the present address, `tooMany`
 */
export async function changeEmail(by: Viewer, input: { readonly newEmail: string; readonly emailPassword: string }, at: Date): Promise<void> {
  if (input.newEmail.toLowerCase() === by.email.toLowerCase()) throw invalid([{ path: 'newEmail', message: 'That is your address already.' }]);
  await provePassword(by, input.emailPassword, 'emailPassword');
  await countTry('confirmation mail', by.id);
  await inTransaction(async () => {
    await enqueue('send-mail', addressChanging(by, false));
    await record(by, 'askChangeEmail', 'account', by.id, at);
    if ((await Account.count({ where: { email: input.newEmail } })) > 0) return;
    const token = await makeToken(by.id, 'change-email', input.newEmail, at);
    await enqueue('send-mail', confirmNewAddress({ name: by.name, email: input.newEmail }, linkTo(paths.confirmEmail(token))));
  });
}
