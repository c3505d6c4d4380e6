import { Op } from 'sequelize';
import { secondFactorChanged } from '~/emails/account-letters.ts';
import { inTransaction } from '../db.ts';
import { conflict, invalid } from '../errors.ts';
import { enqueue } from '../jobs/queue.ts';
import { Account, Session } from '../models/account.ts';
import { codeStep, openSecret } from '../second-factor.ts';
import { record } from '../transition.ts';
import type { Viewer } from '../viewer.ts';

/**
 * Turns the second factor on, once a code shows that the authenticator app has the secret. Sessions opened by the password alone
 * are ended, except this one, which has now shown both.
 * @param sealed the new secret, sealed for this account (`sealSecret`)
 * @throws Refusal `invalid` for a wrong code, `conflict` when it is on already or the page is too old
 */
export async function turnOnSecondFactor(by: Viewer, input: { readonly sealed: string; readonly code: string }, at: Date): Promise<void> {
  const secret = openSecret(by.id, input.sealed);
  if (secret === null) throw conflict('That picture no longer counts. Load the page again and scan the new one.');
  const step = codeStep(secret, input.code, at, null);
  if (step === null) throw invalid([{ path: 'code', message: 'That code does not fit the picture. Scan it again and write the code that shows now.' }]);
  await inTransaction(async () => {
    const account = await Account.findByPk(by.id, { lock: true, rejectOnEmpty: true });
    if (account.totpConfirmedAt !== null) throw conflict('The second step is on already.');
    await account.update({ totpSecret: input.sealed, totpConfirmedAt: at, totpLastStep: step });
    await Session.destroy({ where: { accountId: by.id, publicId: { [Op.ne]: by.sessionId } } });
    await Session.update({ secondFactorAt: at }, { where: { publicId: by.sessionId } });
    await record(by, 'turnOnSecondFactor', 'account', by.id, at);
    await enqueue('send-mail', secondFactorChanged(by, true));
  });
}
