import type { StemPlan } from '~/domain/sawing/stem-plan.ts';
import type { StemAsked } from '~/schemas/stem-page.ts';
import { stemPlans } from '../stem-plans.ts';

/** Where to cut a stem, for anyone. @throws Refusal `unavailable` when too many plans are being worked out */
export const stemPlan = ({ stem, rules, by }: StemAsked, asker: string): Promise<StemPlan> => stemPlans({ stem, rules, by }, asker);
