import { randomUUID } from 'node:crypto';
import { certificateKey, largestCertificateBytes } from '~/domain/certificate.ts';
import { paths } from '~/domain/paths.ts';
import { linkTo } from './parties.ts';
import { uploadForm, type UploadForm } from './services/storage.ts';

/** A form for a sawyer's file that works without a script: storage sends the browser back to the certificate's page, which names the file. */
export async function certificateUpload(accountId: string): Promise<UploadForm> {
  const file = randomUUID();
  return uploadForm(certificateKey(accountId, file), 'application/octet-stream', largestCertificateBytes, linkTo(`${paths.certificate}?file=${file}`));
}
