import { estimateLog, type LogInput, measuringErrorIn, type MeasuredBy, withDiametersChanged } from '~/domain/timber/estimate.ts';
import type { Piece } from './pieces.ts';
import { sawPlan } from './saw-plan.ts';

/** What a bid's expected lumber needs to know of a mill. */
export interface MillAtWork {
  readonly kerfIn: number;
  readonly widestCutIn?: number | undefined;
  readonly widestBoardIn?: number | undefined;
  readonly longestFt?: number | undefined;
  readonly paceBfPerHour: number;
  /** Lumber really sawn over the plans' best; `FIRST_YIELD` until the mill has a record. */
  readonly realisedYield: number;
}

/** A size the landowner wants, green, and as it was written: a tally counts the written size. */
export interface WantedSize {
  readonly thicknessIn: number;
  readonly widthIn: number;
  readonly writtenThicknessIn?: number | undefined;
  readonly writtenWidthIn?: number | undefined;
}

/** What `expectedLumber` is asked. */
export interface LumberRequest {
  readonly logs: readonly LogInput[];
  readonly mill: MillAtWork;
  readonly wanted: readonly WantedSize[];
  readonly measuredBy: MeasuredBy;
}

/** So few logs without timbers are planned in some tens of milliseconds. */
const QUICK_LOGS = 6;
export const isQuick = ({ logs, wanted }: LumberRequest): boolean => logs.length <= QUICK_LOGS && wanted.every((size) => size.thicknessIn < TIMBER_IN);

export interface OverRange {
  readonly low: number;
  readonly expected: number;
  readonly high: number;
}

export interface Expected {
  /** Best possible lumber by the sawing plan, board feet of lumber tally, over the measuring error. */
  readonly best: OverRange;
  /** Best × the mill's realised yield. */
  readonly bf: OverRange;
  /** Hours of sawing at the mill's pace. */
  readonly hours: OverRange;
  /** How `bf` was found, for beside the figure: `plan × 0.85`. */
  readonly by: string;
}

/** Share of the plan that a mill is taken to yield before it has a record (common practice, no source). */
export const FIRST_YIELD = 0.85;
/** 4/4 boards sawn 1⅛ in green, so that they dress to thickness after drying (common practice, no source). */
export const GREEN_FOUR_QUARTER_IN = 1.125;
/** From here on a size counts as a timber, sawn to its own width. */
const TIMBER_IN = 3;
const MOST_SIZES = 4;
/** Bands looked at for a timber's cant: enough for an estimate, and a page with ten logs stays quick. */
const TIMBER_EFFORT = 12;

/**
 * Sizes to plan a log by: the wanted thicknesses in any width (timbers in their own), with 4/4 for what is left at the sides. A
 * board's worth is its board feet at nominal thickness, which is what a tally counts.
 */
export function sizesToPlan(logFt: number, wanted: readonly WantedSize[]): Piece[] {
  const whole = Math.floor(logFt);
  const lengthsFt = [whole, whole - 2, whole - 4].filter((feet, index) => feet >= 4 || index === 0);
  const jacket: Piece = { thicknessIn: GREEN_FOUR_QUARTER_IN, value: 1 / GREEN_FOUR_QUARTER_IN, lengthsFt };
  const keys = new Set<string>();
  const sizes = wanted.flatMap((size): Piece[] => {
    const timber = size.thicknessIn >= TIMBER_IN;
    const key = timber ? `${size.thicknessIn} ${size.widthIn}` : String(size.thicknessIn);
    if (keys.has(key) || keys.size >= MOST_SIZES || size.thicknessIn === GREEN_FOUR_QUARTER_IN) return [];
    keys.add(key);
    const { writtenThicknessIn = size.thicknessIn, writtenWidthIn = size.widthIn } = size;
    const value = (writtenThicknessIn / size.thicknessIn) * (timber ? writtenWidthIn / size.widthIn : 1);
    return [{ thicknessIn: size.thicknessIn, lengthsFt, value, ...(timber ? { widthIn: size.widthIn } : {}) }];
  });
  return [...sizes, jacket];
}

/**
 * Lumber that a mill is expected to saw from some logs, and the hours it takes: the best plan of each log on this mill (a live plan,
 * or round a cant when timbers are wanted), less what its defects take from its scale, times the mill's realised yield. The range
 * runs over the measuring error. Logs longer than the mill takes yield nothing.
 */
export function expectedLumber(logs: readonly LogInput[], mill: MillAtWork, wanted: readonly WantedSize[] = [], measuredBy: MeasuredBy = 'landowner'): Expected {
  const known = new Map<string, number>();
  const pattern = wanted.some((size) => size.thicknessIn >= TIMBER_IN) ? 'cant' : 'live';
  const planned = (log: LogInput): number => {
    const { smallEndIn, largeEndIn, lengthFt } = log;
    const key = `${smallEndIn} ${largeEndIn ?? ''} ${lengthFt}`;
    const found = known.get(key) ?? sawPlan({ log: { smallEndIn, largeEndIn, lengthFt }, mill, pattern, pieces: sizesToPlan(lengthFt, wanted), effort: TIMBER_EFFORT }).value;
    known.set(key, found);
    return found;
  };
  const soundShare = (log: LogInput): number => {
    const { boardFeet, netBoardFeet } = estimateLog(log);
    return boardFeet.internationalQuarter > 0 ? netBoardFeet.internationalQuarter / boardFeet.internationalQuarter : 1;
  };
  const bestAt = (byIn: number): number => logs.reduce((sum, log) => sum + planned(withDiametersChanged(log, byIn)) * soundShare(log), 0);
  const { less, more } = measuringErrorIn[measuredBy];
  const expected = bestAt(0);
  const best = { low: Math.min(expected, bestAt(-less)), expected, high: Math.max(expected, bestAt(more)) };
  const scaled = (range: OverRange, by: number): OverRange => ({ low: range.low * by, expected: range.expected * by, high: range.high * by });
  const bf = scaled(best, mill.realisedYield);
  return { best, bf, hours: scaled(bf, 1 / mill.paceBfPerHour), by: `plan × ${Math.round(mill.realisedYield * 100) / 100}` };
}
