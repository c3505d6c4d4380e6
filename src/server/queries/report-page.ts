import type { PictureView } from '~/domain/photo.ts';
import { oneRow } from '../db.ts';
import { Refusal } from '../errors.ts';
import type { Viewer } from '../viewer.ts';
import { knownName } from './known-name.ts';
import { onePhoto, photoAudience } from './photos.ts';

/** What can be reported. */
export const reportableThings = ['listing', 'photo', 'message', 'review', 'account'] as const;
export type ReportableThing = (typeof reportableThings)[number];
export const isReportable = (text: string | undefined): text is ReportableThing => reportableThings.some((thing) => thing === text);

/** What visitors see, they may report; the rest asks for an account. */
export const visitorsReport: readonly ReportableThing[] = ['listing', 'photo'];

/** What is about to be reported, as the form names it. */
export interface Reportable {
  readonly title: string;
  /** For a photograph: itself. */
  readonly picture: PictureView | null;
  /** The person behind it, whom the reporter may also block; null when that is not told. */
  readonly person: { readonly id: string; readonly name: string } | null;
  /** Whether an earlier report of the same reader waits. */
  readonly waits: boolean;
}

const uuid = /^[0-9a-f]{8}(-[0-9a-f]{4}){3}-[0-9a-f]{12}$/i;

const findings: Readonly<Record<ReportableThing, string>> = {
  listing: `SELECT listing.title, listing.owner_id AS "personId", ${knownName('$2')} AS "personName" FROM listing JOIN account ON account.id = owner_id
    WHERE listing.id = $1 AND listing.status <> 'draft' AND listing.hidden_at IS NULL AND owner_id IS DISTINCT FROM $2`,
  message: `SELECT body AS title, sender_id AS "personId", ${knownName('$2')} AS "personName" FROM message JOIN account ON account.id = sender_id
    WHERE message.id = $1 AND recipient_id = $2 AND hidden_at IS NULL`,
  review: `SELECT stars || ' of 5' || CASE WHEN body = '' THEN '' ELSE E'\\n' || body END AS title, author_id AS "personId", ${knownName('$2')} AS "personName"
    FROM review JOIN account ON account.id = author_id JOIN booking ON booking.id = booking_id
    WHERE review.id = $1 AND review.hidden_at IS NULL AND author_id <> $2
      AND ($2 IN (booking.landowner_id, booking.sawyer_id) OR EXISTS (SELECT 1 FROM sawyer_profile WHERE account_id = subject_id))`,
  photo: `SELECT caption AS title, owner_id AS "personId", ${knownName('$2')} AS "personName" FROM photo JOIN account ON account.id = owner_id
    WHERE photo.id = $1 AND owner_id IS DISTINCT FROM $2`,
  account: `SELECT ${knownName('$2')} AS title, id AS "personId", ${knownName('$2')} AS "personName" FROM account WHERE id = $1 AND status <> 'closed' AND id IS DISTINCT FROM $2`,
};

/** Whether the reader may see the photograph, which its renditions decide. */
async function seesPhoto(viewer: Viewer | null, id: string): Promise<boolean> {
  try {
    await photoAudience(viewer, id);
    return true;
  } catch (error) {
    if (error instanceof Refusal) return false;
    throw error;
  }
}

/** The thing if this reader can see and so report it; null otherwise, one's own things included. */
export async function reportable(viewer: Viewer | null, thing: ReportableThing, id: string): Promise<Reportable | null> {
  if (!uuid.test(id)) return null;
  const found = await oneRow<{ title: string | null; personId: string; personName: string }>(findings[thing], [id, viewer?.id ?? null]);
  if (!found || (thing === 'photo' && !(await seesPhoto(viewer, id)))) return null;
  const waits = viewer && (await oneRow('SELECT 1 FROM report WHERE reporter_id = $1 AND thing = $2 AND thing_id = $3 AND handled_at IS NULL', [viewer.id, thing, id]));
  return { title: found.title ?? '', picture: thing === 'photo' ? (await onePhoto(id)).picture : null, person: viewer ? { id: found.personId, name: found.personName } : null, waits: Boolean(waits) };
}
