import { type ByRule, logRuleNames } from '~/domain/timber/log-rules.ts';
import { estimateLog, type LogInput, measuringErrorIn, type MeasuredBy, withDiametersChanged } from '~/domain/timber/estimate.ts';
import { speciesOf } from '~/domain/timber/species.ts';
import { largestEndOutsideBark } from '~/domain/timber/taper-and-bark.ts';
import type { Expected } from '../sawing/expected.ts';
import { chargedLogScale, type LogToCharge } from './log-charge.ts';
import { type Fit, fitLogs, type MillKind, type MillLimits } from './mill-fit.ts';
import { quote, type Quote, type QuoteOptions, type Range, type WorkVolume } from './quote.ts';
import type { BidTerms } from './rate-card.ts';

/** A log of a listing as a bid is worked on. */
export interface ListedLog extends LogInput {
  readonly id: string;
}

/** The mill as a bid freezes it. */
export interface BidMill extends MillLimits {
  readonly id: string;
  readonly name: string;
  readonly kind: MillKind;
  readonly kerfIn: number;
  readonly paceBfPerHour: number;
  /** Lumber really sawn over the plans' best, 0.85 to begin with. */
  readonly realisedYield: number;
}

/** Board feet of lumber the mill is expected to saw, with its range and how it was found. */
export interface ExpectedLumber {
  readonly bf: Range;
  /** Best possible lumber by the sawing plan of this mill; absent where no plan was made. Shown apart from what is expected. */
  readonly best?: Range;
  /** `log scale, International ¼`, `plan × 0.85`, or the sawyer's own figure. Shown wherever the figure is. */
  readonly by: string;
}

export interface BidEstimate {
  readonly lumber: ExpectedLumber;
  readonly hours: Range;
  /** The scale by each rule that the bid was worked on. */
  readonly scaleBf: ByRule;
  readonly volume: WorkVolume;
  readonly quote: Quote;
  readonly fit: Fit;
}

/** From arrival to the first cut, hours: common practice, no source. Only a clock that runs from arrival counts it. */
export const PREPARING_HOURS = 0.5;

/** A listed log's net scale and largest end, as log-scale charging and surcharges need them. */
export function logToCharge(log: ListedLog): LogToCharge {
  return { id: log.id, lengthFt: log.lengthFt, largestEndObIn: largestEndOutsideBark(log, speciesOf(log.species)), netBoardFeet: estimateLog(log).netBoardFeet };
}

/** The logs with every diameter at the low end, as measured, and at the high end of the measuring error. */
function logsAtEnds(logs: readonly ListedLog[], measuredBy: MeasuredBy): Record<keyof Range, readonly ListedLog[]> {
  const { less, more } = measuringErrorIn[measuredBy];
  return { low: logs.map((log) => withDiametersChanged(log, -less)), expected: logs, high: logs.map((log) => withDiametersChanged(log, more)) };
}

const overEnds = (figure: (end: keyof Range) => number): Range => ({ low: figure('low'), expected: figure('expected'), high: figure('high') });
const total = (logs: readonly LogToCharge[], rule: keyof ByRule): number => logs.reduce((sum, { netBoardFeet }) => sum + netBoardFeet[rule], 0);

/** Without a sawing plan the lumber expected is the log scale by International ¼, and says so: never called a mill's yield. */
export function lumberByLogScale(logs: readonly ListedLog[], measuredBy: MeasuredBy = 'landowner'): ExpectedLumber {
  const ends = logsAtEnds(logs, measuredBy);
  return { bf: overEnds((end) => total(ends[end].map(logToCharge), 'internationalQuarter')), by: `log scale, ${logRuleNames.internationalQuarter}` };
}

/** Lumber by the sawing plans of a mill: best possible, and apart from it the expected share of it. */
export const lumberByPlan = ({ best, bf, by }: Expected): ExpectedLumber => ({ best, bf, by });

/** The sawyer's own expected figure, the range kept in proportion to the one worked out. */
export function withOwnFigure(lumber: ExpectedLumber, ownBf: number): ExpectedLumber {
  const scale = lumber.bf.expected > 0 ? ownBf / lumber.bf.expected : 1;
  return { ...lumber, bf: { low: lumber.bf.low * scale, expected: ownBf, high: lumber.bf.high * scale }, by: 'the sawyer’s own figure' };
}

export interface BidInput {
  readonly logs: readonly ListedLog[];
  readonly mill: BidMill;
  readonly terms: BidTerms;
  readonly lumber: ExpectedLumber;
  readonly options?: QuoteOptions;
  readonly measuredBy?: MeasuredBy;
}

/** Works a bid out on the listing's logs: fit, hours, quantities at both ends of the range, lines and hold. */
export function estimateBid({ logs, mill, terms, lumber, options = {}, measuredBy = 'landowner' }: BidInput): BidEstimate {
  const ends = logsAtEnds(logs, measuredBy);
  const charged: Record<keyof Range, readonly LogToCharge[]> = { low: ends.low.map(logToCharge), expected: ends.expected.map(logToCharge), high: ends.high.map(logToCharge) };
  const { basis, surcharges } = terms.card;
  const preparing = basis.kind === 'hourly' && basis.from === 'arrival' ? PREPARING_HOURS : 0;
  const hours = overEnds((end) => preparing + lumber.bf[end] / mill.paceBfPerHour);
  const volume: WorkVolume = {
    boardFeet: basis.kind === 'log-scale' ? overEnds((end) => chargedLogScale(basis, charged[end])) : lumber.bf,
    hours,
    lumberTallyBf: lumber.bf,
    overWideLogs: charged.expected.filter(({ largestEndObIn }) => surcharges.overWide !== null && largestEndObIn > surcharges.overWide.aboveIn).length,
    overLongLogs: charged.expected.filter(({ lengthFt }) => surcharges.overLong !== null && lengthFt > surcharges.overLong.aboveFt).length,
  };
  return {
    lumber,
    hours,
    scaleBf: { doyle: total(charged.expected, 'doyle'), scribnerDecimalC: total(charged.expected, 'scribnerDecimalC'), internationalQuarter: total(charged.expected, 'internationalQuarter') },
    volume,
    quote: quote(terms, volume, options),
    fit: fitLogs(mill, logs.map((log) => ({ ...log, barkPct: speciesOf(log.species).barkPct }))),
  };
}
