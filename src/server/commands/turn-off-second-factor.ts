import { secondFactorChanged } from '~/emails/account-letters.ts';
import { inTransaction } from '../db.ts';
import { conflict, forbidden, invalid } from '../errors.ts';
import { countTry } from '../http/limits.ts';
import { enqueue } from '../jobs/queue.ts';
import { Account } from '../models/account.ts';
import { record } from '../transition.ts';
import type { Viewer } from '../viewer.ts';
import { provePassword } from './change-password.ts';
import { takeCode } from './give-second-factor.ts';

/**
 * Turns the second factor off, by password and a last code.
 * @throws Refusal `forbidden` for a moderator, who needs it; `invalid` for a wrong password or code; `conflict` when it is off
 */
export async function turnOffSecondFactor(by: Viewer, input: { readonly offPassword: string; readonly offCode: string }, at: Date): Promise<void> {
  await provePassword(by, input.offPassword, 'offPassword');
  await countTry('second factor', by.id);
  await inTransaction(async () => {
    const account = await Account.findByPk(by.id, { lock: true, rejectOnEmpty: true });
    if (account.isModerator) throw forbidden('Moderators need the second step.');
    if (account.totpConfirmedAt === null) throw conflict('The second step is off already.');
    if (!(await takeCode(account, input.offCode, at))) throw invalid([{ path: 'offCode', message: 'That code is not the one of this moment, or it was used. Wait for the next one.' }]);
    await account.update({ totpSecret: null, totpConfirmedAt: null, totpLastStep: null });
    await record(by, 'turnOffSecondFactor', 'account', by.id, at);
    await enqueue('send-mail', secondFactorChanged(by, false));
  });
}
