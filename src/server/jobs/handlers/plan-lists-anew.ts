import { LIST_PLAN_VERSION } from '~/domain/trade/list-cover.ts';
import { rows } from '../../db.ts';
import { enqueue } from '../queue.ts';
import type { Sweep } from './sweep.ts';

/** Planned at a time: a list takes the worker some seconds, and new bids come first. */
const BATCH = 10;
/** A bid's own job comes at once; one that gave up is tried again after this. */
const AGAIN_AFTER_SECONDS = 3600;
const LEAVE_ALONE_SECONDS = 120;

/**
 * Live bids whose cut list was never planned, or as plans were made before, are planned in small batches: those without any first. Bids
 * of an older revision wait for their sawyer. Leans on `bid_list_version`; the queue's own table says what is under way.
 */
export const planListsAnew: Sweep = async (at) => {
  const before = (seconds: number): Date => new Date(at.getTime() - seconds * 1000);
  const waiting = await rows<{ under: number }>(`SELECT count(*)::int AS under FROM pgboss.job WHERE name = 'plan-bid-list' AND state < 'completed'`, []);
  const free = BATCH - (waiting[0]?.under ?? 0);
  if (free <= 0) return;
  const stale = await rows<{ id: string }>(
    `SELECT b.id FROM bid b JOIN listing l ON l.id = b.listing_id
     WHERE b.status IN ('open', 'chosen') AND coalesce((b.cut_list ->> 'version')::int, 0) < $1 AND b.listing_revision = l.revision AND b.updated_at <= $2
       AND EXISTS (SELECT 1 FROM piece WHERE piece.listing_id = l.id)
       AND NOT EXISTS (SELECT 1 FROM pgboss.job j WHERE j.name = 'plan-bid-list' AND j.data ->> 'bidId' = b.id::text AND (j.state < 'completed' OR j.created_on > $3))
     ORDER BY (b.cut_list IS NOT NULL), b.updated_at, b.id LIMIT $4`,
    [LIST_PLAN_VERSION, before(LEAVE_ALONE_SECONDS), before(AGAIN_AFTER_SECONDS), free],
  );
  for (const { id } of stale) await enqueue('plan-bid-list', { bidId: id });
};
