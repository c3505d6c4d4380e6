import type { StemListPlan } from '~/domain/sawing/stem-list.ts';
import type { StemPlan } from '~/domain/sawing/stem-plan.ts';
import type { StemAsked } from '~/schemas/stem-page.ts';
import { stemListPlan, stemPlans } from '../stem-plans.ts';

/** A stem cut for what its logs are worth, or for a cut list. */
export type StemAnswer = { readonly best: StemPlan; readonly forList: null } | { readonly best: null; readonly forList: StemListPlan };

/** Where to cut a stem, for anyone. @throws Refusal `unavailable` when too many plans are being worked out */
export async function stemPlan({ stem, rules, by, pieces }: StemAsked, asker: string): Promise<StemAnswer> {
  return by === 'list' ? { best: null, forList: await stemListPlan({ stem, rules }, pieces, asker) } : { best: await stemPlans({ stem, rules, by }, asker), forList: null };
}
