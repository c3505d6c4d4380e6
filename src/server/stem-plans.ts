import type { SawnPiece } from '~/domain/sawing/sawn-piece.ts';
import type { StemListPlan } from '~/domain/sawing/stem-list.ts';
import { planStem, type StemPlan, type StemRequest } from '~/domain/sawing/stem-plan.ts';
import { TYPICAL_BAND_MILL } from '~/domain/sawing/typical-mill.ts';
import { planStemBoards, planStemList } from './services/planning.ts';

/** Where to cut a stem; by boards it is worked out in a thread. @throws Refusal `unavailable` when too many plans are being worked out */
export const stemPlans = async (request: StemRequest, asker: string): Promise<StemPlan> => (request.by === 'boards' ? planStemBoards(request, asker) : planStem(request));

/** Where to cut a stem for a cut list on a typical band mill, worked out in a thread. @throws Refusal `unavailable` as above */
export function stemListPlan({ stem, rules }: Pick<StemRequest, 'stem' | 'rules'>, pieces: readonly SawnPiece[], asker: string): Promise<StemListPlan> {
  const { kerfIn, widestCutIn, widestBoardIn, longestFt } = TYPICAL_BAND_MILL;
  return planStemList({ stem, rules, mill: { kerfIn, widestCutIn, widestBoardIn, longestFt }, pieces: pieces.map(({ id, green, lengthFt, count, kind }) => ({ id, ...green, lengthFt, count, kind })) }, asker);
}
