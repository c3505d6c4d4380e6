import { culledShare, squaredDeduction, type Defect } from './defects.ts';
import { boardFeetByRule, byRule, ruleStep, type ByRule } from './log-rules.ts';
import { roundToMultiple, wholeFeet, wholeInches, type HalfInchRounding } from './rounding.ts';
import { largeEndOrTaper } from './taper-and-bark.ts';

/** A log as it is scaled. Diameters inside bark, inches; the full length, feet. */
export interface LogToScale {
  readonly smallEndIn: number;
  /** Left out: half an inch of taper per 4 ft. */
  readonly largeEndIn?: number | undefined;
  readonly lengthFt: number;
  readonly defects?: readonly Defect[] | undefined;
}

export type LongestScalingLengthFt = 16 | 20 | 32 | 40;

export interface ScaleSettings {
  /** Where an exact half inch of diameter goes; left out: up. */
  readonly halfInchRounding?: HalfInchRounding | undefined;
  /** Longer logs are scaled in pieces; left out: 20 ft. */
  readonly longestScalingLengthFt?: LongestScalingLengthFt | undefined;
}

/** A piece of a log that is looked up in the table by itself, from the small end. */
export interface ScaleSegment {
  readonly startFt: number;
  readonly lengthFt: number;
  readonly diameterIn: number;
}

export interface ScaledLog {
  readonly scalingDiameterIn: number;
  readonly scalingLengthFt: number;
  readonly segments: readonly ScaleSegment[];
  readonly boardFeet: ByRule;
  readonly netBoardFeet: ByRule;
  /** Share of the gross scale that the percentage rules take off, 0 to 1. */
  readonly culledShare: number;
  /** Board feet that squared defects take off each rule. */
  readonly squaredBoardFeet: number;
}

/**
 * Lengths of the pieces of a long log in whole feet, small end first: ceil(length / longest) pieces, as equal as possible in
 * even feet, the longer ones and any odd foot at the butt. The odd foot stays at the butt even where it takes that piece one
 * foot over the longest (39 ft by 20s: 18 + 21).
 * Source: US Forest Service, National Volume Estimator Library, notes of `segmnt.f` (options 11 to 14).
 */
export function splitLength(lengthFt: number, longestFt: number): readonly number[] {
  const pieces = Math.max(1, Math.ceil(lengthFt / longestFt));
  if (pieces === 1) return [lengthFt];
  const odd = lengthFt % 2;
  const pairs = (lengthFt - odd) / 2;
  const each = Math.floor(pairs / pieces);
  const longer = pairs - each * pieces;
  return Array.from({ length: pieces }, (_, index) => {
    const fromButt = pieces - 1 - index;
    return 2 * (each + (fromButt < longer ? 1 : 0)) + (fromButt === 0 ? odd : 0);
  });
}

const segmentsOf = (log: LogToScale, scalingLengthFt: number, settings: ScaleSettings): readonly ScaleSegment[] => {
  const largeEndIn = largeEndOrTaper(log);
  let startFt = 0;
  return splitLength(scalingLengthFt, settings.longestScalingLengthFt ?? 20).map((lengthFt) => {
    const measured = log.smallEndIn + ((largeEndIn - log.smallEndIn) * startFt) / log.lengthFt;
    const segment = { startFt, lengthFt, diameterIn: wholeInches(measured, settings.halfInchRounding) };
    startFt += lengthFt;
    return segment;
  });
};

/**
 * Scales one log by the three rules, gross and net.
 * Gross is the sum of the pieces' cells; net takes the defects off the gross and rounds as the rule's table does, never below
 * zero and never above the gross.
 * @throws RangeError when a diameter is beyond the tables (120 in).
 */
export function scaleLog(log: LogToScale, settings: ScaleSettings = {}): ScaledLog {
  const scalingDiameterIn = wholeInches(log.smallEndIn, settings.halfInchRounding);
  const scalingLengthFt = wholeFeet(log.lengthFt);
  const segments = segmentsOf(log, scalingLengthFt, settings);
  const defects = log.defects ?? [];
  const culled = culledShare(defects, { diameterIn: scalingDiameterIn, lengthFt: scalingLengthFt });
  const squared = squaredDeduction(defects);
  const boardFeet = byRule((rule) => segments.reduce((sum, piece) => sum + boardFeetByRule(rule, piece.diameterIn, piece.lengthFt), 0));
  const netBoardFeet = byRule((rule) => {
    const gross = boardFeet[rule];
    if (culled === 0 && squared === 0) return gross;
    return Math.min(gross, Math.max(0, roundToMultiple(gross * (1 - culled) - squared, ruleStep[rule])));
  });
  return { scalingDiameterIn, scalingLengthFt, segments, boardFeet, netBoardFeet, culledShare: culled, squaredBoardFeet: squared };
}
