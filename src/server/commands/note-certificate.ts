import { KEPT_DAYS, remindersDue, type CertificateKind } from '~/domain/certificate.ts';
import { paths } from '~/domain/paths.ts';
import { addDays, addHours } from '~/domain/time.ts';
import { certificateRefused, certificateSeen } from '~/emails/desk-letters.ts';
import { authorize } from '../authorize.ts';
import { readerOf } from '../bidders.ts';
import { inTransaction, lockFor } from '../db.ts';
import { conflict, invalid, notFound } from '../errors.ts';
import { enqueue } from '../jobs/queue.ts';
import { Account } from '../models/index.ts';
import { Certificate, CertificateFile } from '../models/sawyer.ts';
import { linkTo } from '../parties.ts';
import { record } from '../transition.ts';
import { baseRoles, type Viewer } from '../viewer.ts';

interface LookedAt {
  readonly account: string;
  readonly kind: CertificateKind;
  /** Names the one that was looked at. */
  readonly sentAt: string;
}

/** A sawyer's waiting certificate, for a moderator to decide, with the file that waits. */
async function lockCertificate(by: Viewer, { account: accountId, kind, sentAt }: LookedAt): Promise<{ readonly certificate: Certificate; readonly file: string }> {
  const account = await Account.findByPk(accountId);
  if (!account) throw notFound('account');
  authorize(by, 'account', 'seeCertificate', baseRoles(by), account.status);
  await lockFor('certificate', accountId);
  const certificate = await Certificate.findOne({ where: { sawyerId: accountId, kind } });
  if (!certificate?.sentAt || !certificate.waitingFile) throw conflict('No certificate of this sawyer waits.');
  if (certificate.sentAt.toISOString() !== sentAt) throw conflict('The sawyer has sent another certificate since. Look at that one.');
  return { certificate, file: certificate.waitingFile };
}

const keepUntil = (file: string, removeAfter: Date) => CertificateFile.update({ removeAfter }, { where: { id: file } });
const decided = { waitingFile: null, sentAt: null, saysUntil: null } as const;

/**
 * A moderator has seen the certificate: landowners read "certificate seen, expires on".
 * @throws Refusal `invalid` for a day that has passed, `conflict` when it is decided or another one was sent
 */
export async function noteCertificate(by: Viewer, input: LookedAt & { readonly expiresOn: string }, at: Date): Promise<void> {
  const { account, kind, expiresOn } = input;
  const today = at.toISOString().slice(0, 10);
  if (expiresOn <= today) throw invalid([{ path: 'expiresOn', message: 'That day has passed: refuse the certificate instead.' }]);
  await inTransaction(async () => {
    const { certificate, file } = await lockCertificate(by, input);
    if (certificate.seenFile) await keepUntil(certificate.seenFile, addHours(at, KEPT_DAYS * 24));
    await keepUntil(file, new Date(`${addDays(expiresOn, KEPT_DAYS)}T00:00:00Z`));
    // Whoever hands in one that runs out next week knows it.
    await certificate.update({ ...decided, seenFile: file, seenAt: at, expiresOn, reminders: remindersDue(expiresOn, today) });
    await record(by, 'noteCertificate', 'account', account, at, { data: { kind, expiresOn } });
    await enqueue('send-mail', certificateSeen(await readerOf(account), kind, expiresOn, linkTo(paths.sawyer(account))));
  });
}

/** The certificate cannot be taken; what was seen before stays. The sawyer reads why. */
export async function refuseCertificate(by: Viewer, input: LookedAt & { readonly reason: string }, at: Date): Promise<void> {
  const { account, kind, reason } = input;
  await inTransaction(async () => {
    const { certificate, file } = await lockCertificate(by, input);
    await keepUntil(file, addHours(at, KEPT_DAYS * 24));
    await certificate.update(decided);
    await record(by, 'refuseCertificate', 'account', account, at, { data: { kind, reason } });
    await enqueue('send-mail', certificateRefused(await readerOf(account), kind, reason, linkTo(paths.certificateOf(kind))));
  });
}
