import { addHours } from '~/domain/time.ts';
import { oneRow } from './db.ts';
import { record } from './transition.ts';
import type { Viewer } from './viewer.ts';

/**
 * Writes down that somebody other than the owner was shown a listing's exact place: a moderator each time, the chosen sawyer (whose
 * pages and phone ask again and again) once an hour.
 */
export async function notePlaceSeen(viewer: Viewer, listing: { readonly id: string; readonly ownerId: string }, at: Date, data: Readonly<Record<string, unknown>> = {}): Promise<void> {
  if (viewer.id === listing.ownerId) return;
  if (!viewer.isModerator) {
    const lately = await oneRow(`SELECT 1 FROM event WHERE thing = 'listing' AND thing_id = $1 AND action = 'seePlace' AND actor_id = $2 AND at > $3 AND at <= $4 LIMIT 1`, [listing.id, viewer.id, addHours(at, -1), at]);
    if (lately) return;
  }
  await record(viewer, 'seePlace', 'listing', listing.id, at, { data });
}
