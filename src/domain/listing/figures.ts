import type { EstimateTotals } from '../timber/estimate.ts';
import { estimateLog, estimateRange } from '../timber/estimate.ts';
import type { ByRule } from '../timber/log-rules.ts';
import { speciesOf } from '../timber/species.ts';
import { greenWeightWithBark } from '../timber/weight.ts';
import { logInput } from './summary.ts';
import type { LogRead } from './rows.ts';

type Measured = Pick<LogRead, 'species' | 'smallEndIn' | 'largeEndIn' | 'lengthFt' | 'defects'>;

/** What a row of the form and of the page shows for a log. */
export interface LogFigures {
  /** Net of defects. */
  readonly boardFeet: ByRule;
  /** Green, with bark, lb. */
  readonly weightLb: number;
}

/** Board feet by the three rules and green weight with bark of one log. */
export const figuresOf = (log: Measured): LogFigures => ({ boardFeet: estimateLog(logInput(log)).netBoardFeet, weightLb: greenWeightWithBark(logInput(log), speciesOf(log.species)) });

export interface TotalFigures extends LogFigures {
  /** International ¼ with every diameter 1 in less and ½ in more: how far a landowner's tape may be off. */
  readonly low: number;
  readonly high: number;
}

/** The sums, with the range of the International ¼ scale for a landowner's measures. */
export function totalFigures(logs: readonly Measured[]): TotalFigures {
  const range = estimateRange({ logs: logs.map(logInput) }, 'landowner');
  const scale = (totals: EstimateTotals): number => totals.netBoardFeet.internationalQuarter;
  return {
    boardFeet: range.asMeasured.netBoardFeet,
    weightLb: logs.reduce((sum, log) => sum + figuresOf(log).weightLb, 0),
    low: scale(range.low),
    high: scale(range.high),
  };
}

/** `1,180` */
export const wholeNumber = (value: number): string => Math.round(value).toLocaleString('en-US');
