import { boardFeetByRule, type LogRule } from '../timber/log-rules.ts';
import type { LogGroup } from '../timber/logs-in-url.ts';
import { wholeFeet, wholeInches } from '../timber/rounding.ts';
import { buck, type Bucked, type BuckingRules, type Stem } from './bucking.ts';
import type { LogShape } from './log-shape.ts';

/** What a log is worth by a log rule: its scale, as a scaler reads the table. */
const scaleBy = (rule: LogRule) => ({ smallEndIn, lengthFt }: LogShape): number => boardFeetByRule(rule, wholeInches(smallEndIn), wholeFeet(lengthFt));

export interface StemPlan {
  readonly best: Bucked;
  /** The best that logs of a single length give, for comparison; null when only one length was allowed. */
  readonly oneLength: { readonly lengthFt: number; readonly value: number } | null;
}

/** Where to cut a stem so that its logs scale most by a rule, and what cutting everything to one length would give. */
export function planStem(stem: Stem, rules: BuckingRules, rule: LogRule): StemPlan {
  const best = buck(stem, rules, scaleBy(rule));
  const alone = rules.lengthsFt.map((lengthFt) => ({ lengthFt, value: buck(stem, { ...rules, lengthsFt: [lengthFt] }, scaleBy(rule)).value }));
  return { best, oneLength: alone.length < 2 ? null : alone.reduce((most, one) => (one.value > most.value ? one : most)) };
}

/** The logs of a plan as the estimator and a listing take them: full length, trim and all. */
export const logsOfStem = ({ logs }: Bucked, species: string, trimIn: number): LogGroup[] =>
  logs.map(({ smallEndIn, largeEndIn, lengthFt }) => ({ species, smallEndIn, largeEndIn, lengthFt: lengthFt + trimIn / 12, count: 1 }));
