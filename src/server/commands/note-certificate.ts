import { paths } from '~/domain/paths.ts';
import { certificateRefused, certificateSeen } from '~/emails/desk-letters.ts';
import { authorize } from '../authorize.ts';
import { readerOf } from '../bidders.ts';
import { inTransaction } from '../db.ts';
import { conflict, invalid, notFound } from '../errors.ts';
import { enqueue } from '../jobs/queue.ts';
import { Account, SawyerProfile } from '../models/index.ts';
import { linkTo } from '../parties.ts';
import { record } from '../transition.ts';
import { baseRoles, type Viewer } from '../viewer.ts';

/** The profile of a sawyer whose waiting certificate a moderator decides. `sentAt` names the one that was looked at. */
async function lockCertificate(by: Viewer, accountId: string, sentAt: string): Promise<SawyerProfile> {
  const account = await Account.findByPk(accountId);
  if (!account) throw notFound('account');
  authorize(by, 'account', 'seeCertificate', baseRoles(by), account.status);
  const profile = await SawyerProfile.findByPk(accountId, { lock: true });
  if (!profile?.certificateSentAt) throw conflict('No certificate of this sawyer waits.');
  if (profile.certificateSentAt.toISOString() !== sentAt) throw conflict('The sawyer has sent another certificate since. Look at that one.');
  return profile;
}

/**
 * A moderator has seen the certificate: landowners read "certificate seen, expires on".
 * @throws Refusal `invalid` for a day that has passed, `conflict` when it is decided or another one was sent
 */
export async function noteCertificate(by: Viewer, input: { readonly account: string; readonly expiresOn: string; readonly sentAt: string }, at: Date): Promise<void> {
  if (input.expiresOn <= at.toISOString().slice(0, 10)) throw invalid([{ path: 'expiresOn', message: 'That day has passed: refuse the certificate instead.' }]);
  await inTransaction(async () => {
    const profile = await lockCertificate(by, input.account, input.sentAt);
    await profile.update({ certificateSeenAt: at, certificateExpiresOn: input.expiresOn, certificateSentAt: null, certificateSaysUntil: null, updatedAt: at });
    await record(by, 'noteCertificate', 'account', input.account, at, { data: { expiresOn: input.expiresOn } });
    await enqueue('send-mail', certificateSeen(await readerOf(input.account), input.expiresOn, linkTo(paths.sawyer(input.account))));
  });
}

/** The certificate cannot be taken; what was seen before stays. The sawyer reads why. */
export async function refuseCertificate(by: Viewer, input: { readonly account: string; readonly reason: string; readonly sentAt: string }, at: Date): Promise<void> {
  await inTransaction(async () => {
    const profile = await lockCertificate(by, input.account, input.sentAt);
    await profile.update({ certificateSentAt: null, certificateSaysUntil: null, updatedAt: at });
    await record(by, 'refuseCertificate', 'account', input.account, at, { data: { reason: input.reason } });
    await enqueue('send-mail', certificateRefused(await readerOf(input.account), input.reason, linkTo(paths.certificate)));
  });
}
