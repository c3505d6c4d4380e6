import { Op } from 'sequelize';
import { passwordChanged } from '~/emails/account-letters.ts';
import { inTransaction } from '../db.ts';
import { endTakeoverLinks } from '../email-tokens.ts';
import { invalid } from '../errors.ts';
import { countTry, forgetTries } from '../http/limits.ts';
import { enqueue } from '../jobs/queue.ts';
import { Account, Session } from '../models/account.ts';
import { hashPassword, passwordMatches } from '../passwords.ts';
import { record } from '../transition.ts';
import type { Viewer } from '../viewer.ts';

/**
 * Makes sure that it is the account's own holder who asks, by the password.
 * @param path the field that the refusal belongs to
 * @throws Refusal `invalid`, `tooMany`
 */
export async function provePassword(by: Viewer, typed: string, path: string): Promise<void> {
  await countTry('own password', by.id);
  const account = await Account.findByPk(by.id, { rejectOnEmpty: true });
  if (!(await passwordMatches(account.passwordHash, typed))) throw invalid([{ path, message: 'That is not your password.' }]);
  await forgetTries('own password', by.id);
}

/** Changes the password and ends the other sessions, and the links of earlier letters. @throws Refusal `invalid` when the present one is wrong, `tooMany` */
export async function changePassword(by: Viewer, input: { readonly currentPassword: string; readonly newPassword: string }, at: Date): Promise<void> {
  await provePassword(by, input.currentPassword, 'currentPassword');
  const passwordHash = await hashPassword(input.newPassword);
  await inTransaction(async () => {
    await Account.update({ passwordHash }, { where: { id: by.id } });
    await Session.destroy({ where: { accountId: by.id, publicId: { [Op.ne]: by.sessionId } } });
    await endTakeoverLinks(by.id, at);
    await record(by, 'changePassword', 'account', by.id, at);
    await enqueue('send-mail', passwordChanged(by));
  });
}
