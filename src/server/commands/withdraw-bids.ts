import { Refusal } from '../errors.ts';
import type { Viewer } from '../viewer.ts';
import { withdrawBid } from './withdraw-bid.ts';

/** What came of withdrawing several bids. */
export interface BidsWithdrawn {
  readonly withdrawn: number;
  /** Those that had been chosen, declined or withdrawn in the meantime. */
  readonly tooLate: number;
}

/**
 * Withdraws several bids, each for itself: one that has just been chosen does not keep the others from being withdrawn.
 * @throws Refusal `notFound` or `forbidden` when one of them is not the sawyer's
 */
export async function withdrawBids(by: Viewer, bidIds: readonly string[], at: Date): Promise<BidsWithdrawn> {
  let withdrawn = 0;
  for (const id of bidIds) {
    try {
      await withdrawBid(by, id, at);
      withdrawn += 1;
    } catch (error) {
      if (!(error instanceof Refusal) || error.kind !== 'conflict') throw error;
    }
  }
  return { withdrawn, tooLate: bidIds.length - withdrawn };
}
