import { oneRow } from '../db.ts';
import type { Viewer } from '../viewer.ts';

/** What can be reported. */
export const reportableThings = ['listing', 'message', 'account'] as const;
export type ReportableThing = (typeof reportableThings)[number];
export const isReportable = (text: string | undefined): text is ReportableThing => reportableThings.some((thing) => thing === text);

/** What is about to be reported, as the form names it. */
export interface Reportable {
  readonly title: string;
  /** The person behind it, whom the reporter may also block; null when that is not told. */
  readonly person: { readonly id: string; readonly name: string } | null;
  /** Whether an earlier report of the same reader waits. */
  readonly waits: boolean;
}

const uuid = /^[0-9a-f]{8}(-[0-9a-f]{4}){3}-[0-9a-f]{12}$/i;

const findings: Readonly<Record<ReportableThing, string>> = {
  listing: `SELECT listing.title, listing.owner_id AS "personId", account.name AS "personName" FROM listing JOIN account ON account.id = owner_id
    WHERE listing.id = $1 AND listing.status <> 'draft' AND listing.hidden_at IS NULL AND owner_id IS DISTINCT FROM $2`,
  message: `SELECT body AS title, sender_id AS "personId", account.name AS "personName" FROM message JOIN account ON account.id = sender_id
    WHERE message.id = $1 AND recipient_id = $2 AND hidden_at IS NULL`,
  account: `SELECT name AS title, id AS "personId", name AS "personName" FROM account WHERE id = $1 AND status <> 'closed' AND id IS DISTINCT FROM $2`,
};

/** The thing if this reader can see and so report it; null otherwise, one's own things included. */
export async function reportable(viewer: Viewer | null, thing: ReportableThing, id: string): Promise<Reportable | null> {
  if (!uuid.test(id)) return null;
  const found = await oneRow<{ title: string | null; personId: string; personName: string }>(findings[thing], [id, viewer?.id ?? null]);
  if (!found) return null;
  const waits = viewer && (await oneRow('SELECT 1 FROM report WHERE reporter_id = $1 AND thing = $2 AND thing_id = $3 AND handled_at IS NULL', [viewer.id, thing, id]));
  return { title: found.title ?? '', person: viewer ? { id: found.personId, name: found.personName } : null, waits: Boolean(waits) };
}
