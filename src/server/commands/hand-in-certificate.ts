import { certificateFileType, certificateKey, FORM_HOURS, largestCertificateBytes, type CertificateKind } from '~/domain/certificate.ts';
import { addHours } from '~/domain/time.ts';
import { authorize } from '../authorize.ts';
import { inTransaction, lockFor } from '../db.ts';
import { conflict, invalid, Refusal, unavailable } from '../errors.ts';
import { log } from '../log.ts';
import { Certificate, CertificateFile, SawyerProfile } from '../models/sawyer.ts';
import { MissingObject, ObjectTooLarge, readObject } from '../services/storage.ts';
import { record } from '../transition.ts';
import { baseRoles, type Viewer } from '../viewer.ts';

const notThere = () => invalid([{ path: 'file', message: 'The file did not arrive. Send it again.' }]);

/** Looks at the file in storage before anything is written. @throws Refusal in words for the sender */
async function checkFile(key: string): Promise<void> {
  try {
    if (certificateFileType(await readObject(key, largestCertificateBytes)) === null) throw invalid([{ path: 'file', message: 'This is neither a PDF nor a JPEG or PNG picture. Choose another file.' }]);
  } catch (error) {
    if (error instanceof MissingObject) throw notThere();
    if (error instanceof ObjectTooLarge) throw invalid([{ path: 'file', message: 'This file is larger than 10 MB. Choose a smaller one.' }]);
    if (error instanceof Refusal) throw error;
    log().error({ err: error }, 'storage did not give a certificate');
    throw unavailable('The file cannot be looked at just now. Try again in a minute.');
  }
}

/**
 * A sawyer hands in a certificate that is in storage already; a moderator looks at it. What was seen before stays until then; one that
 * still waited is replaced.
 * @throws Refusal `invalid` when the file is not there or not readable, or the day has passed; `conflict` without a profile
 */
export async function handInCertificate(by: Viewer, input: { readonly kind: CertificateKind; readonly file: string; readonly saysUntil: string }, at: Date): Promise<void> {
  authorize(by, 'sawyer', 'keepProfile', baseRoles(by));
  const { kind, file, saysUntil } = input;
  if (saysUntil <= at.toISOString().slice(0, 10)) throw invalid([{ path: 'saysUntil', message: 'That day has passed. Send the certificate that is valid now.' }]);
  await checkFile(certificateKey(by.id, file));
  await inTransaction(async () => {
    await lockFor('certificate', by.id);
    if ((await SawyerProfile.count({ where: { accountId: by.id } })) === 0) throw conflict('Fill in your profile first.');
    const sent = await CertificateFile.findOne({ where: { id: file, sawyerId: by.id, kind, removedAt: null } });
    if (!sent) throw notThere();
    // Pressed twice.
    if (sent.handedInAt) return;
    await sent.update({ handedInAt: at, removeAfter: null });
    const [certificate] = await Certificate.findOrCreate({ where: { sawyerId: by.id, kind } });
    if (certificate.waitingFile) await CertificateFile.update({ removeAfter: addHours(at, FORM_HOURS) }, { where: { id: certificate.waitingFile } });
    await certificate.update({ waitingFile: file, sentAt: at, saysUntil });
    await record(by, 'handInCertificate', 'account', by.id, at, { data: { kind, until: saysUntil } });
  });
}
