import { oneRow } from './db.ts';
import { forbidden } from './errors.ts';

/** Whether one of the two people has blocked the other. Blocked people cannot write to, bid for or choose each other. */
export async function blockedBetween(oneId: string, otherId: string): Promise<boolean> {
  const found = await oneRow('SELECT 1 FROM account_block WHERE (blocker_id = $1 AND blocked_id = $2) OR (blocker_id = $2 AND blocked_id = $1) LIMIT 1', [oneId, otherId]);
  return found !== undefined;
}

/**
 * Lets the deed pass when neither has blocked the other.
 * @throws Refusal `forbidden`, in words that do not say who blocked whom.
 */
export async function refuseBlocked(oneId: string, otherId: string): Promise<void> {
  if (await blockedBetween(oneId, otherId)) throw forbidden('You and this person cannot deal with each other here.');
}
