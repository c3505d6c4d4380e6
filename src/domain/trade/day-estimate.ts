import { formatCents, type Cents } from '~/domain/money.ts';
import { estimateBid } from './bid-estimate.ts';
import { asLogInput, type DayLog, type Measures } from './day-logs.ts';
import type { MillLimits } from './mill-fit.ts';
import type { QuoteOptions, Range } from './quote.ts';
import type { BidTerms } from './rate-card.ts';

/** What a bid froze of its estimate, as far as the day needs it. */
export interface BidOfDay {
  readonly lumberBf: Range;
  readonly options: QuoteOptions;
  readonly paceBfPerHour: number;
}

/** A job's estimate on the logs as they lie, beside the listing. */
export interface DayEstimate {
  /** International ¼, board feet. */
  readonly listedScaleBf: number;
  readonly scaleBf: number;
  /** Positive when more than listed. */
  readonly changePct: number;
  readonly lumberBf: Range;
  readonly costCents: Range;
}

/**
 * The estimate anew, on the logs as they were measured on the day and with those that were added, agreed or not. The lumber follows the
 * scale in proportion: a log of a tenth more scale is taken to give a tenth more lumber. Null while everything lies as listed.
 */
export function dayEstimate(logs: readonly DayLog[], mill: MillLimits, bid: BidOfDay, terms: BidTerms): DayEstimate | null {
  if (logs.every(({ measured, added }) => measured === null && !added)) return null;
  const named = { ...mill, id: '', name: '', kind: 'band' as const, kerfIn: 0, realisedYield: 1, paceBfPerHour: bid.paceBfPerHour };
  const estimate = (of: readonly DayLog[], measures: (log: DayLog) => Measures, share: number) => {
    const bf = { low: bid.lumberBf.low * share, expected: bid.lumberBf.expected * share, high: bid.lumberBf.high * share };
    return estimateBid({ logs: of.map((log) => ({ id: log.id, ...asLogInput(log, measures(log)) })), mill: named, terms, lumber: { bf, by: '' }, options: bid.options, measuredBy: 'sawyer' });
  };
  const listedScaleBf = estimate(logs.filter(({ added }) => !added), ({ listed }) => listed, 1).scaleBf.internationalQuarter;
  const now = (share: number) => estimate(logs, ({ measured, listed }) => measured ?? listed, share);
  const scaleBf = now(1).scaleBf.internationalQuarter;
  const share = listedScaleBf > 0 ? scaleBf / listedScaleBf : 1;
  const { lumber, quote } = now(share);
  return { listedScaleBf, scaleBf, changePct: listedScaleBf > 0 ? ((scaleBf - listedScaleBf) * 100) / listedScaleBf : 0, lumberBf: lumber.bf, costCents: { low: quote.low.costCents, expected: quote.expected.costCents, high: quote.high.costCents } };
}

const bf = (value: number): string => `${Math.round(value).toLocaleString('en-US')} bf`;

/** The changed estimate in figures, the same on a phone and in a letter. @param heldCents what is held, beside which the cost stands */
export const estimateFacts = ({ listedScaleBf, scaleBf, changePct, lumberBf, costCents }: DayEstimate, heldCents: Cents): readonly (readonly [label: string, figure: string])[] => [
  ['All logs by International ¼', `${bf(scaleBf)}; listed ${bf(listedScaleBf)}, ${changePct < 0 ? '−' : '+'}${Math.abs(changePct).toFixed(1)} %`],
  ['Lumber expected now', `${bf(lumberBf.expected)} (${bf(lumberBf.low)} to ${bf(lumberBf.high)})`],
  ['Estimate now', `${formatCents(costCents.expected)} (${formatCents(costCents.low)} to ${formatCents(costCents.high)})`],
  ['Held', formatCents(heldCents)],
];
