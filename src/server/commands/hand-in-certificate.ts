import { certificateKey, certificateKind, largestCertificateBytes } from '~/domain/certificate.ts';
import { authorize } from '../authorize.ts';
import { inTransaction } from '../db.ts';
import { conflict, invalid, Refusal, unavailable } from '../errors.ts';
import { log } from '../log.ts';
import { SawyerProfile } from '../models/sawyer.ts';
import { MissingObject, ObjectTooLarge, readObject } from '../services/storage.ts';
import { record } from '../transition.ts';
import { baseRoles, type Viewer } from '../viewer.ts';

/** Looks at the file in storage before anything is written. @throws Refusal in words for the sender */
async function checkFile(key: string): Promise<void> {
  try {
    if (certificateKind(await readObject(key, largestCertificateBytes)) === null) throw invalid([{ path: 'file', message: 'This is neither a PDF nor a JPEG or PNG picture. Choose another file.' }]);
  } catch (error) {
    if (error instanceof MissingObject) throw invalid([{ path: 'file', message: 'The file did not arrive. Send it again.' }]);
    if (error instanceof ObjectTooLarge) throw invalid([{ path: 'file', message: 'This file is larger than 10 MB. Choose a smaller one.' }]);
    if (error instanceof Refusal) throw error;
    log().error({ err: error }, 'storage did not give a certificate');
    throw unavailable('The file cannot be looked at just now. Try again in a minute.');
  }
}

/**
 * A sawyer hands in a certificate of insurance that is in storage already; a moderator looks at it. What was seen before stays until then.
 * @throws Refusal `invalid` when the file is not there or not readable, or the day has passed; `conflict` without a profile
 */
export async function handInCertificate(by: Viewer, input: { readonly file: string; readonly saysUntil: string }, at: Date): Promise<void> {
  authorize(by, 'sawyer', 'keepProfile', baseRoles(by));
  if (input.saysUntil <= at.toISOString().slice(0, 10)) throw invalid([{ path: 'saysUntil', message: 'That day has passed. Send the certificate that is valid now.' }]);
  const key = certificateKey(by.id, input.file);
  await checkFile(key);
  await inTransaction(async () => {
    const profile = await SawyerProfile.findByPk(by.id, { lock: true });
    if (!profile) throw conflict('Fill in your profile first.');
    if (profile.certificateKey === key) return;
    await profile.update({ certificateKey: key, certificateSentAt: at, certificateSaysUntil: input.saysUntil, updatedAt: at });
    await record(by, 'handInCertificate', 'account', by.id, at, { data: { until: input.saysUntil } });
  });
}
