import type { AirDryingDays } from './drying.ts';

/** Air-dried: what the published days lead to, per cent. */
const AIR_DRIED_PCT = 20;

/** Between which moisture contents boards are expected so many days after a reading, per cent. */
export interface ExpectedMoisture {
  readonly days: number;
  readonly fastPct: number;
  readonly slowPct: number;
}

/**
 * The expected band of a drying curve. Water leaves in proportion to how much there still is above where the boards end (the usual first
 * approximation, no single source), at the pace that meets 20 % after the shortest and the longest published days.
 * Null when the boards are at 20 % already, or never come to it in this air.
 */
export function expectedCourse(startPct: number, equilibriumPct: number, range: AirDryingDays, lastDay: number, steps = 24): readonly ExpectedMoisture[] | null {
  if (startPct <= AIR_DRIED_PCT || equilibriumPct >= AIR_DRIED_PCT) return null;
  const share = Math.log((startPct - equilibriumPct) / (AIR_DRIED_PCT - equilibriumPct));
  const at = (days: number, toAirDried: number): number => equilibriumPct + (startPct - equilibriumPct) * Math.exp((-share * days) / toAirDried);
  return Array.from({ length: steps + 1 }, (_, step) => (step / steps) * lastDay).map((days) => ({ days, fastPct: at(days, range.from), slowPct: at(days, range.to) }));
}

/**
 * Which end of the published days to expect, by the month in which the boards are stacked: the short end in spring and early summer, the
 * long end from autumn on (as the table's source words it; the months are our own division).
 * @param month 1 for January
 */
export const endOfRange = (month: number): 'short' | 'middle' | 'long' => (month >= 4 && month <= 6 ? 'short' : month >= 9 || month <= 2 ? 'long' : 'middle');
