import { setTimeout as wait } from 'node:timers/promises';
import { paths } from '~/domain/paths.ts';
import { newPasswordLink } from '~/emails/account-letters.ts';
import { inTransaction } from '../db.ts';
import { makeToken } from '../email-tokens.ts';
import { countTry } from '../http/limits.ts';
import { enqueue } from '../jobs/queue.ts';
import { Account } from '../models/account.ts';
import { linkTo } from '../parties.ts';
import { record } from '../transition.ts';

/** Every answer takes this long, so that the time does not tell whether the address is known. */
const ANSWER_MS = 250;

/** Sends the link for a new password when the address has an account; says nothing either way. @throws Refusal `tooMany` */
export async function askPasswordReset(input: { readonly email: string; readonly clientAddress: string }, at: Date): Promise<void> {
  await countTry('password reset', `from ${input.clientAddress}`);
  await countTry('password reset', input.email);
  const answer = wait(ANSWER_MS);
  await inTransaction(async () => {
    const account = await Account.findOne({ where: { email: input.email } });
    if (!account || account.status === 'closed') return;
    const token = await makeToken(account.id, 'reset-password', account.email, at);
    await record(account, 'askPasswordReset', 'account', account.id, at);
    await enqueue('send-mail', newPasswordLink(account, linkTo(paths.resetPassword(token))));
  });
  await answer;
}
