import { passwordChanged } from '~/emails/account-letters.ts';
import { inTransaction } from '../db.ts';
import { deadLink, endTakeoverLinks, useToken } from '../email-tokens.ts';
import { enqueue } from '../jobs/queue.ts';
import { Account, Session } from '../models/account.ts';
import { hashPassword } from '../passwords.ts';
import { record } from '../transition.ts';

/**
 * Sets a new password by the link of a letter and ends every session, and the links of earlier letters. Whoever can read the letters has shown that the address
 * is theirs, so it counts as confirmed.
 * @throws Refusal `notFound` for a link that does not work
 */
export async function resetPassword(input: { readonly token: string; readonly newPassword: string }, at: Date): Promise<void> {
  const passwordHash = await hashPassword(input.newPassword);
  await inTransaction(async () => {
    const used = await useToken(input.token, ['reset-password'], at);
    const account = await Account.findByPk(used.accountId, { lock: true, rejectOnEmpty: true });
    if (account.status === 'closed' || account.email.toLowerCase() !== used.email.toLowerCase()) throw deadLink();
    await account.update({ passwordHash, emailConfirmedAt: account.emailConfirmedAt ?? at });
    await Session.destroy({ where: { accountId: account.id } });
    await endTakeoverLinks(account.id, at);
    await record(account, 'resetPassword', 'account', account.id, at);
    await enqueue('send-mail', passwordChanged(account));
  });
}
