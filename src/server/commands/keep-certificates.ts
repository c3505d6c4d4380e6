import { certificateKey, REMINDED_DAYS, remindersDue, type CertificateKind } from '~/domain/certificate.ts';
import { paths } from '~/domain/paths.ts';
import { addDays, type Day } from '~/domain/time.ts';
import { certificateRunsOut } from '~/emails/desk-letters.ts';
import { execute, inTransaction, rows } from '../db.ts';
import { enqueue } from '../jobs/queue.ts';
import { linkTo } from '../parties.ts';
import { removeObjects } from '../services/storage.ts';

/**
 * Reminds sawyers whose certificate runs out and who have not sent the next one. Whoever missed letters, because nothing ran, gets one.
 * Leans on certificate_runs_out.
 */
export async function remindOfCertificates(at: Date): Promise<void> {
  const today = at.toISOString().slice(0, 10);
  const soon = await rows<{ id: string; kind: CertificateKind; expiresOn: Day; reminders: number; name: string; email: string }>(
    `SELECT sawyer_id AS id, kind, expires_on::text AS "expiresOn", reminders, account.name, account.email
     FROM certificate JOIN account ON account.id = sawyer_id
     WHERE expires_on <= $1 AND reminders < $2 AND sent_at IS NULL AND account.status = 'active'`,
    [addDays(today, REMINDED_DAYS[0]), REMINDED_DAYS.length],
  );
  for (const { id, kind, expiresOn, reminders, ...to } of soon) {
    const due = remindersDue(expiresOn, today);
    if (due <= reminders) continue;
    await inTransaction(async () => {
      // Of two workers that sweep at once, one changes the row.
      const changed = await execute('UPDATE certificate SET reminders = $3 WHERE sawyer_id = $1 AND kind = $2 AND expires_on = $4 AND reminders < $3', [id, kind, due, expiresOn]);
      if (changed > 0) await enqueue('send-mail', certificateRunsOut(to, kind, expiresOn, expiresOn < today, linkTo(paths.certificateOf(kind))));
    });
  }
}

/** So many files are removed in one sweep. */
const AT_ONCE = 100;

/** Files of certificates that nobody needs any more leave storage (`domain/certificate` says when). Leans on certificate_file_to_remove. */
export async function removeCertificateFiles(at: Date): Promise<void> {
  const due = await rows<{ id: string; sawyerId: string }>(`SELECT id, sawyer_id AS "sawyerId" FROM certificate_file WHERE removed_at IS NULL AND remove_after <= $1 ORDER BY remove_after LIMIT ${AT_ONCE}`, [at]);
  if (due.length === 0) return;
  await removeObjects(due.map(({ id, sawyerId }) => certificateKey(sawyerId, id)));
  const ids = due.map(({ id }) => id);
  await inTransaction(async () => {
    await execute('UPDATE certificate_file SET removed_at = $2 WHERE id = ANY ($1::uuid[])', [ids, at]);
    await execute('UPDATE certificate SET seen_file = NULL WHERE seen_file = ANY ($1::uuid[])', [ids]);
  });
}
