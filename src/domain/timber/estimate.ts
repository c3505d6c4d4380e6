import { cubicFeetOf, type CubicFeet } from './cubic.ts';
import { scaleLog, type LogToScale, type ScaleSettings } from './log-scale.ts';
import { byRule, type ByRule } from './log-rules.ts';
import { speciesOf } from './species.ts';
import { largeEndOrTaper } from './taper-and-bark.ts';
import { greenWoodWeightLb } from './weight.ts';

/** A log of a known species. Diameters inside bark, inches; the full length, feet. */
export interface LogInput extends LogToScale {
  /** A species code. */
  readonly species: string;
}

export interface EstimateInput extends ScaleSettings {
  readonly logs: readonly LogInput[];
}

export interface LogEstimate {
  readonly scalingDiameterIn: number;
  readonly scalingLengthFt: number;
  readonly boardFeet: ByRule;
  readonly netBoardFeet: ByRule;
  readonly cubicFeet: CubicFeet;
  /** Wood without bark. */
  readonly greenWeightLb: number;
}

export type EstimateTotals = Pick<LogEstimate, 'boardFeet' | 'netBoardFeet' | 'cubicFeet' | 'greenWeightLb'>;

export interface Estimate {
  readonly logs: readonly LogEstimate[];
  readonly totals: EstimateTotals;
}

/**
 * Scale, cubic content and green weight of one log. Scale uses the rounded diameter and the whole feet; cubic content and
 * weight use the measured diameters and the full length.
 * @throws RangeError for an unknown species code.
 */
export function estimateLog(log: LogInput, settings: ScaleSettings = {}): LogEstimate {
  const { scalingDiameterIn, scalingLengthFt, boardFeet, netBoardFeet } = scaleLog(log, settings);
  const largeEndIn = largeEndOrTaper(log);
  return {
    scalingDiameterIn,
    scalingLengthFt,
    boardFeet,
    netBoardFeet,
    cubicFeet: cubicFeetOf(log.smallEndIn, largeEndIn, log.lengthFt),
    greenWeightLb: greenWoodWeightLb(log, speciesOf(log.species)),
  };
}

const totalOf = (logs: readonly LogEstimate[]): EstimateTotals => {
  const sum = (figure: (log: LogEstimate) => number): number => logs.reduce((total, log) => total + figure(log), 0);
  return {
    boardFeet: byRule((rule) => sum((log) => log.boardFeet[rule])),
    netBoardFeet: byRule((rule) => sum((log) => log.netBoardFeet[rule])),
    cubicFeet: { smalian: sum((log) => log.cubicFeet.smalian), huber: sum((log) => log.cubicFeet.huber), newton: sum((log) => log.cubicFeet.newton) },
    greenWeightLb: sum((log) => log.greenWeightLb),
  };
};

/** Estimates every log and the totals: the answer of `POST /api/estimate`. */
export function estimateLogs(input: EstimateInput): Estimate {
  const settings = { halfInchRounding: input.halfInchRounding, longestScalingLengthFt: input.longestScalingLengthFt };
  const logs = input.logs.map((log) => estimateLog(log, settings));
  return { logs, totals: totalOf(logs) };
}

/** Who held the tape: it decides how wide the range is. */
export type MeasuredBy = 'landowner' | 'sawyer';

/** How far each diameter may be off, inches: beginners measure high, so their range reaches further down than up. */
export const measuringErrorIn: Readonly<Record<MeasuredBy, { readonly less: number; readonly more: number }>> = {
  landowner: { less: 1, more: 0.5 },
  sawyer: { less: 0.5, more: 0.5 },
};

/** The log with every measured diameter changed by some inches, kept within the tables (4 in and up). */
export function withDiametersChanged<L extends LogToScale>(log: L, byIn: number): L {
  const smallEndIn = Math.max(4, log.smallEndIn + byIn);
  return log.largeEndIn === undefined
    ? { ...log, smallEndIn }
    : { ...log, smallEndIn, largeEndIn: Math.max(smallEndIn, log.largeEndIn + byIn) };
}

export interface EstimateRange {
  readonly low: EstimateTotals;
  readonly asMeasured: EstimateTotals;
  readonly high: EstimateTotals;
}

/**
 * The range of an estimate: every diameter 1 in less to ½ in more for a landowner's measures, ± ½ in once the sawyer has
 * measured. The same shift is applied to all logs at once.
 */
export function estimateRange(input: EstimateInput, measuredBy: MeasuredBy): EstimateRange {
  const { less, more } = measuringErrorIn[measuredBy];
  const shifted = (byIn: number): EstimateTotals => estimateLogs({ ...input, logs: input.logs.map((log) => withDiametersChanged(log, byIn)) }).totals;
  return { low: shifted(-less), asMeasured: estimateLogs(input).totals, high: shifted(more) };
}
