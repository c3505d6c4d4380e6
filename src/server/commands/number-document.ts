import { createHash } from 'node:crypto';
import { inTransaction, oneRow } from '../db.ts';

export type DocumentKind = 'receipt' | 'earnings' | 'payments';

const LETTER: Readonly<Record<DocumentKind, string>> = { receipt: 'R', earnings: 'E', payments: 'P' };

/**
 * The number of a receipt or statement: one that no other document ever has. The same content asked for again keeps its number; when
 * the content has changed (a month that is not over, a refund that came back) it is another document.
 * @param subject the booking's number or the period
 * @param content everything that stands in it
 * @returns for instance `R-10023`
 */
export async function numberDocument(of: { readonly accountId: string; readonly kind: DocumentKind; readonly subject: string; readonly content: unknown }, at: Date): Promise<string> {
  const sha256 = createHash('sha256').update(JSON.stringify(of.content)).digest('hex');
  const key = [of.accountId, of.kind, of.subject, sha256];
  const known = 'SELECT number FROM money_document WHERE account_id = $1 AND kind = $2 AND subject = $3 AND sha256 = $4';
  const found = await inTransaction(async () =>
    (await oneRow<{ number: number }>(known, key)) ??
    (await oneRow<{ number: number }>('INSERT INTO money_document (account_id, kind, subject, sha256, made_at) VALUES ($1, $2, $3, $4, $5) ON CONFLICT DO NOTHING RETURNING number', [...key, at])) ??
    (await oneRow<{ number: number }>(known, key)));
  if (!found) throw new Error('The document got no number.');
  return `${LETTER[of.kind]}-${found.number}`;
}
