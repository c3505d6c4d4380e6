import { secondFactorEnded } from '~/emails/desk-letters.ts';
import { authorize } from '../authorize.ts';
import { inTransaction } from '../db.ts';
import { conflict, notFound } from '../errors.ts';
import { enqueue } from '../jobs/queue.ts';
import { Account, Session } from '../models/account.ts';
import { record } from '../transition.ts';
import { baseRoles, type Viewer } from '../viewer.ts';

/**
 * Ends the second factor of someone who has lost their authenticator. Every session of the account ends, and the owner is told.
 * @throws Refusal `conflict` for oneself and when there is none
 */
export async function endSecondFactor(by: Viewer, input: { readonly account: string; readonly reason: string }, at: Date): Promise<void> {
  await inTransaction(async () => {
    const account = await Account.findByPk(input.account, { lock: true });
    if (!account) throw notFound('account');
    authorize(by, 'account', 'endSecondFactor', baseRoles(by), account.status);
    if (account.id === by.id) throw conflict('That is you. Ask another moderator.');
    if (account.totpConfirmedAt === null) throw conflict('This account has no second step.');
    await account.update({ totpSecret: null, totpConfirmedAt: null, totpLastStep: null });
    await Session.destroy({ where: { accountId: account.id } });
    await record(by, 'endSecondFactor', 'account', account.id, at, { data: { reason: input.reason } });
    await enqueue('send-mail', secondFactorEnded(account));
  });
}
