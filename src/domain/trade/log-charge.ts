import type { ByRule } from '~/domain/timber/log-rules.ts';
import { scaleLog, type LogToScale } from '~/domain/timber/log-scale.ts';
import type { SawingBasis } from './rate-card.ts';

/** A log with what the charging needs: net scale by each rule, its largest end outside bark and its length. */
export interface LogToCharge {
  readonly id: string;
  readonly lengthFt: number;
  readonly largestEndObIn: number;
  readonly netBoardFeet: ByRule;
}

type LogScaleBasis = Extract<SawingBasis, { kind: 'log-scale' }>;

/** What the smallest log counted scales by the basis's rule; 0 when the card names none. */
export const leastBfPerLog = ({ rule, smallestLog }: LogScaleBasis): number =>
  smallestLog === null ? 0 : scaleLog({ smallEndIn: smallestLog.diameterIn, lengthFt: smallestLog.lengthFt } satisfies LogToScale).boardFeet[rule];

/** Board feet of log scale that are charged: each log's net scale by the basis's rule, none for less than the smallest log counted. */
export function chargedLogScale(basis: LogScaleBasis, logs: readonly LogToCharge[]): number {
  const least = leastBfPerLog(basis);
  return logs.reduce((sum, { netBoardFeet }) => sum + Math.max(least, netBoardFeet[basis.rule]), 0);
}
