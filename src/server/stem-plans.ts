import { planStem, type StemPlan, type StemRequest } from '~/domain/sawing/stem-plan.ts';
import { planStemBoards } from './services/planning.ts';

/** Where to cut a stem; by boards it is worked out in a thread. @throws Refusal `unavailable` when too many plans are being worked out */
export const stemPlans = async (request: StemRequest, asker: string): Promise<StemPlan> => (request.by === 'boards' ? planStemBoards(request, asker) : planStem(request));
