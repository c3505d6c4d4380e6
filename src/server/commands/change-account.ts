import type { RoleName } from '~/schemas/account-forms.ts';
import { inTransaction } from '../db.ts';
import { forbidden, invalid } from '../errors.ts';
import { Account } from '../models/account.ts';
import { record } from '../transition.ts';
import type { Viewer } from '../viewer.ts';

/**
 * Changes name, ZIP and what the account works as. A job under way goes on whatever the account works as from now on.
 * @throws Refusal `invalid` when it would be nothing at all, `forbidden` for a suspended account
 */
export async function changeAccount(by: Viewer, input: { readonly name: string; readonly as: readonly RoleName[]; readonly zip: string | null }, at: Date): Promise<void> {
  if (!by.active) throw forbidden('This account is suspended.');
  await inTransaction(async () => {
    const account = await Account.findByPk(by.id, { lock: true, rejectOnEmpty: true });
    if (input.as.length === 0 && !account.isModerator) throw invalid([{ path: 'as', message: 'Say what you have: logs, a mill, or both.' }]);
    await account.update({ name: input.name, zip: input.zip, isLandowner: input.as.includes('landowner'), isSawyer: input.as.includes('sawyer') });
    await record(by, 'changeAccount', 'account', by.id, at, { data: { as: input.as } });
  });
}
