import { certificateKind, largestCertificateBytes } from '~/domain/certificate.ts';
import { authorize } from '../authorize.ts';
import { inTransaction } from '../db.ts';
import { notFound, Refusal, unavailable } from '../errors.ts';
import { log } from '../log.ts';
import { Account, SawyerProfile } from '../models/index.ts';
import { MissingObject, readObject } from '../services/storage.ts';
import { record } from '../transition.ts';
import { baseRoles, type Viewer } from '../viewer.ts';

export interface CertificateFile {
  readonly bytes: Buffer;
  readonly type: string;
  readonly extension: string;
}

/** Opens a sawyer's certificate for a moderator, and writes down that it was opened. @throws Refusal `notFound`, `forbidden`, `unavailable` */
export async function seeCertificate(by: Viewer, accountId: string, at: Date): Promise<CertificateFile> {
  const account = /^[0-9a-f-]{36}$/i.test(accountId) ? await Account.findByPk(accountId) : null;
  if (!account) throw notFound('account');
  authorize(by, 'account', 'seeCertificate', baseRoles(by), account.status);
  const profile = await SawyerProfile.findByPk(accountId, { attributes: ['certificateKey'] });
  if (!profile?.certificateKey) throw notFound('certificate');
  await inTransaction(() => record(by, 'seeCertificate', 'account', accountId, at));
  try {
    const bytes = await readObject(profile.certificateKey, largestCertificateBytes);
    const kind = certificateKind(bytes);
    if (!kind) throw notFound('certificate');
    return { bytes, ...kind };
  } catch (error) {
    if (error instanceof Refusal) throw error;
    if (error instanceof MissingObject) throw notFound('certificate');
    log().error({ err: error, accountId }, 'storage did not give a certificate');
    throw unavailable('The certificate cannot be shown just now. Try again in a minute.');
  }
}
