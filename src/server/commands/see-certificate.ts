import { certificateFileType, certificateKey, largestCertificateBytes, type CertificateKind } from '~/domain/certificate.ts';
import { authorize } from '../authorize.ts';
import { inTransaction } from '../db.ts';
import { notFound, Refusal, unavailable } from '../errors.ts';
import { log } from '../log.ts';
import { Account } from '../models/index.ts';
import { Certificate } from '../models/sawyer.ts';
import { MissingObject, readObject } from '../services/storage.ts';
import { record } from '../transition.ts';
import { baseRoles, type Viewer } from '../viewer.ts';

export interface OpenCertificate {
  readonly bytes: Buffer;
  readonly type: string;
  readonly extension: string;
}

/**
 * Opens a sawyer's certificate for a moderator, the one that waits before the one that was seen, and writes down that it was opened.
 * @throws Refusal `notFound`, `forbidden`, `unavailable`
 */
export async function seeCertificate(by: Viewer, accountId: string, kind: CertificateKind, at: Date): Promise<OpenCertificate> {
  const account = /^[0-9a-f-]{36}$/i.test(accountId) ? await Account.findByPk(accountId) : null;
  if (!account) throw notFound('account');
  authorize(by, 'account', 'seeCertificate', baseRoles(by), account.status);
  const certificate = await Certificate.findOne({ where: { sawyerId: accountId, kind } });
  const file = certificate?.waitingFile ?? certificate?.seenFile;
  if (!file) throw notFound('certificate');
  await inTransaction(() => record(by, 'seeCertificate', 'account', accountId, at, { data: { kind } }));
  try {
    const bytes = await readObject(certificateKey(accountId, file), largestCertificateBytes);
    const type = certificateFileType(bytes);
    if (!type) throw notFound('certificate');
    return { bytes, ...type };
  } catch (error) {
    if (error instanceof Refusal) throw error;
    if (error instanceof MissingObject) throw notFound('certificate');
    log().error({ err: error, accountId }, 'storage did not give a certificate');
    throw unavailable('The certificate cannot be shown just now. Try again in a minute.');
  }
}
