import { termsVersion } from '~/domain/terms.ts';
import { inTransaction } from '../db.ts';
import { Account, TermsAcceptance } from '../models/account.ts';
import { record } from '../transition.ts';
import type { Viewer } from '../viewer.ts';

/** Accepts the terms in their present version; once is enough. */
export async function acceptTerms(by: Viewer, at: Date): Promise<void> {
  await inTransaction(async () => {
    const [, made] = await TermsAcceptance.findOrCreate({ where: { accountId: by.id, version: termsVersion }, defaults: { accountId: by.id, version: termsVersion, acceptedAt: at } });
    if (!made) return;
    await Account.update({ termsVersion, termsAcceptedAt: at }, { where: { id: by.id } });
    await record(by, 'acceptTerms', 'account', by.id, at, { data: { terms: termsVersion } });
  });
}
