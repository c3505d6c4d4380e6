import { addressChanging } from '~/emails/account-letters.ts';
import { inTransaction, refusedBy } from '../db.ts';
import { deadLink, useToken } from '../email-tokens.ts';
import { conflict } from '../errors.ts';
import { enqueue } from '../jobs/queue.ts';
import { Account } from '../models/account.ts';
import { record } from '../transition.ts';

/**
 * Follows the link of a letter: confirms the address of a new account, or moves an account to its new address.
 * @throws Refusal `notFound` for a link that does not work, `conflict` when the new address has been taken meanwhile
 */
export async function confirmEmail(token: string, at: Date): Promise<{ readonly accountId: string; readonly changed: boolean }> {
  try {
    return await inTransaction(async () => {
      const used = await useToken(token, ['confirm-email', 'change-email'], at);
      const account = await Account.findByPk(used.accountId, { lock: true, rejectOnEmpty: true });
      if (account.status === 'closed') throw deadLink();
      const changed = used.purpose === 'change-email';
      // A link to an address that the account has left confirms nothing.
      if (!changed && account.email.toLowerCase() !== used.email.toLowerCase()) throw deadLink();
      const before = { name: account.name, email: account.email };
      await account.update({ email: used.email, emailConfirmedAt: at });
      await record(account, changed ? 'changeEmail' : 'confirmEmail', 'account', account.id, at);
      if (changed) await enqueue('send-mail', addressChanging(before, true));
      return { accountId: account.id, changed };
    });
  } catch (error) {
    if (refusedBy(error, 'account_email_key')) throw conflict('Another account uses this address by now.');
    throw error;
  }
}
