import { boardFeetByRule, type LogRule } from '../timber/log-rules.ts';
import type { LogGroup } from '../timber/logs-in-url.ts';
import { wholeFeet, wholeInches } from '../timber/rounding.ts';
import { buck, type Bucked, type BuckingRules, type Stem } from './bucking.ts';
import { GREEN_FOUR_QUARTER_IN } from './expected.ts';
import type { LogShape } from './log-shape.ts';
import { sawPlan } from './saw-plan.ts';
import { TYPICAL_BAND_MILL } from './typical-mill.ts';

/** What a log is worth: its scale by a rule, or the 4/4 boards that a typical band mill saws from it. */
export type StemWorth = LogRule | 'boards';

export interface StemRequest {
  readonly stem: Stem;
  readonly rules: BuckingRules;
  readonly by: StemWorth;
}

export interface StemPlan {
  readonly best: Bucked;
  /** The best that logs of a single length give, for comparison; null when only one length was allowed. */
  readonly oneLength: { readonly lengthFt: number; readonly value: number } | null;
}

/** A log's scale, as a scaler reads the table. */
const scaleBy = (rule: LogRule) => ({ smallEndIn, lengthFt }: LogShape): number => boardFeetByRule(rule, wholeInches(smallEndIn), wholeFeet(lengthFt));

/** Board feet of 4/4 boards, sawn through and through; diameters down to the inch, so that a stem asks for few plans. */
function boardsOfLog(): (log: LogShape) => number {
  const known = new Map<string, number>();
  const down = (inches: number): number => Math.floor(inches + 1e-9);
  return ({ smallEndIn, largeEndIn = smallEndIn, lengthFt }) => {
    const log = { smallEndIn: down(smallEndIn), largeEndIn: down(largeEndIn), lengthFt };
    const key = `${log.smallEndIn} ${log.largeEndIn} ${lengthFt}`;
    const lengthsFt = [lengthFt, lengthFt - 2].filter((feet, index) => feet >= 4 || index === 0);
    const found = known.get(key) ?? sawPlan({ log, mill: TYPICAL_BAND_MILL, pattern: 'live', pieces: [{ thicknessIn: GREEN_FOUR_QUARTER_IN, value: 1 / GREEN_FOUR_QUARTER_IN, lengthsFt }] }).value;
    known.set(key, found);
    return found;
  };
}

/** Where to cut a stem so that its logs are worth most, and what cutting everything to one length would give. By boards it takes some seconds for a long stem. */
export function planStem({ stem, rules, by }: StemRequest): StemPlan {
  const worth = by === 'boards' ? boardsOfLog() : scaleBy(by);
  const best = buck(stem, rules, worth);
  const alone = rules.lengthsFt.map((lengthFt) => ({ lengthFt, value: buck(stem, { ...rules, lengthsFt: [lengthFt] }, worth).value }));
  return { best, oneLength: alone.length < 2 ? null : alone.reduce((most, one) => (one.value > most.value ? one : most)) };
}

/** The logs of a plan as the estimator and a listing take them: full length, trim and all. */
export const logsOfStem = ({ logs }: Pick<Bucked, 'logs'>, species: string, trimIn: number): LogGroup[] =>
  logs.map(({ smallEndIn, largeEndIn, lengthFt }) => ({ species, smallEndIn, largeEndIn, lengthFt: lengthFt + trimIn / 12, count: 1 }));
