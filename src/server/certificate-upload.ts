import { randomUUID } from 'node:crypto';
import { AWAITED_HOURS, certificateKey, largestCertificateBytes, type CertificateKind } from '~/domain/certificate.ts';
import { paths } from '~/domain/paths.ts';
import { addHours } from '~/domain/time.ts';
import { rows } from './db.ts';
import { linkTo } from './parties.ts';
import { uploadForm, type UploadForm } from './services/storage.ts';

/**
 * A form for a sawyer's file that works without a script: storage sends the browser back to the certificate's page, which names the file.
 * The file is awaited from now on, one of a kind at a time, so that what is sent and never handed in is found and removed.
 */
export async function certificateUpload(accountId: string, kind: CertificateKind, at: Date): Promise<UploadForm> {
  const [awaited] = await rows<{ id: string }>(
    `INSERT INTO certificate_file (id, sawyer_id, kind, form_made_at, remove_after) VALUES ($1, $2, $3, $4, $5)
     ON CONFLICT (sawyer_id, kind) WHERE handed_in_at IS NULL AND removed_at IS NULL DO UPDATE SET form_made_at = excluded.form_made_at, remove_after = excluded.remove_after RETURNING id`,
    [randomUUID(), accountId, kind, at, addHours(at, AWAITED_HOURS)],
  );
  const file = awaited?.id ?? '';
  return uploadForm(certificateKey(accountId, file), 'application/octet-stream', largestCertificateBytes, linkTo(`${paths.certificateOf(kind)}&file=${file}`));
}
