import type { ListingPlan } from '~/domain/sawing/listing-plan.ts';
import type { LogRead } from '~/domain/listing/rows.ts';
import type { MillAtWork } from '~/domain/sawing/expected.ts';
import type { Pattern } from '~/domain/sawing/saw-plan.ts';
import type { SawnPiece } from '~/domain/sawing/sawn-piece.ts';
import { planListing } from './services/planning.ts';

/**
 * The boards of a listing's logs on one mill, for its cut list.
 * @param asker who asks, so that nobody keeps the planner from the others; nobody for our own jobs
 * @throws Refusal `unavailable` when too many plans are being worked out, `tooMany` when the asker has enough in hand
 */
export function boardPlans(logs: readonly LogRead[], pieces: readonly SawnPiece[], mill: MillAtWork, pattern: Pattern | 'best' = 'best', asker?: string): Promise<ListingPlan> {
  const { kerfIn, widestCutIn, widestBoardIn, longestFt } = mill;
  return planListing({
    logs: logs.map(({ id, smallEndIn, largeEndIn, lengthFt, heartDefectIn, defects }) => ({ id, smallEndIn, largeEndIn, lengthFt, heartDefectIn, defects })),
    mill: { kerfIn, widestCutIn, widestBoardIn, longestFt },
    pieces: pieces.map(({ id, green, lengthFt, count, kind }) => ({ id, ...green, lengthFt, count, kind })),
    pattern,
  }, asker);
}
