import { type Cents, roundCents, share } from '~/domain/money.ts';
import { type BidMill, estimateBid, type ListedLog, lumberByLogScale, PREPARING_HOURS } from './bid-estimate.ts';
import { type Fit, fitLogs } from './mill-fit.ts';
import type { OffBearer, RateCard } from './rate-card.ts';
import { speciesOf } from '~/domain/timber/species.ts';

/** Miles an hour with a mill in tow on country roads: common practice, no source. */
export const ROAD_MPH = 40;

/** What a job would bring a sawyer, from the rate card as it is now. */
export interface JobWorth {
  /** What the landowner would pay at the expected figure, tax left out. */
  readonly estimateCents: Cents;
  readonly lowCents: Cents;
  readonly highCents: Cents;
  /** The estimate less Skidway's fee. */
  readonly netCents: Cents;
  /** One way, road miles. */
  readonly roadMiles: number;
  /** There and back. */
  readonly roadHours: number;
  /** At the landing: getting ready and sawing. */
  readonly workHours: number;
  /** Net cents for each hour on the road and at work. */
  readonly perHourCents: Cents;
}

/** How a listing's logs suit a sawyer: on which mill, whether they fit and why not, and what the job would bring. */
export interface JobForMill {
  readonly mill: { readonly id: string; readonly name: string };
  readonly fit: Fit;
  /** Null without a rate card or a base: then only the fit is known. */
  readonly worth: JobWorth | null;
}

/** What a sawyer brings to every listing. */
export interface SawyerMeans {
  readonly mills: readonly BidMill[];
  readonly card: RateCard | null;
  readonly feeBasisPoints: number;
}

/**
 * What the job would bring: log scale by International ¼ at the mill's pace, the card's own lines with set-up and travel, nothing
 * for metal. Hours count getting ready once ({@link PREPARING_HOURS}) and the road at {@link ROAD_MPH}.
 */
export function jobWorth(logs: readonly ListedLog[], mill: BidMill, card: RateCard, roadMiles: number, offBearer: OffBearer, feeBasisPoints: number): JobWorth {
  const lumber = lumberByLogScale(logs);
  const { quote } = estimateBid({ logs, mill, lumber, terms: { card, roadMiles, metalCapCents: 0, offBearer, waste: 'left', landings: 1 } });
  const beforeTax = (end: 'low' | 'expected' | 'high'): Cents => quote[end].costCents - quote[end].taxCents;
  const estimateCents = beforeTax('expected');
  const netCents = estimateCents - share(estimateCents, feeBasisPoints);
  const roadHours = (2 * roadMiles) / ROAD_MPH;
  const workHours = PREPARING_HOURS + lumber.bf.expected / mill.paceBfPerHour;
  return { estimateCents, lowCents: beforeTax('low'), highCents: beforeTax('high'), netCents, roadMiles, roadHours, workHours, perHourCents: roundCents(netCents / (roadHours + workHours)) };
}

/**
 * Holds the logs against every mill of the sawyer and answers for the best: of those that take every log the one with most money an
 * hour, otherwise the one with fewest reasons against it. Null without a mill.
 * @param roadMiles one way; null when the sawyer has no base
 */
export function jobForMills(logs: readonly ListedLog[], { mills, card, feeBasisPoints }: SawyerMeans, roadMiles: number | null, offBearer: OffBearer): JobForMill | null {
  const measured = logs.map((log) => ({ ...log, barkPct: speciesOf(log.species).barkPct }));
  const each = mills.map((mill): JobForMill => {
    const fit = fitLogs(mill, measured);
    return { mill: { id: mill.id, name: mill.name }, fit, worth: card && roadMiles !== null ? jobWorth(logs, mill, card, roadMiles, offBearer, feeBasisPoints) : null };
  });
  return each.reduce<JobForMill | null>((best, one) => (best === null || better(one, best) ? one : best), null);
}

function better(one: JobForMill, other: JobForMill): boolean {
  if (one.fit.fits !== other.fit.fits) return one.fit.fits;
  if (!one.fit.fits && one.fit.reasons.length !== other.fit.reasons.length) return one.fit.reasons.length < other.fit.reasons.length;
  return (one.worth?.perHourCents ?? 0) > (other.worth?.perHourCents ?? 0);
}

/** `4 1/2 h`: hours to the nearest half, at least a half. */
export function hourWords(hours: number): string {
  const halves = Math.max(1, Math.round(hours * 2));
  const whole = Math.floor(halves / 2);
  return halves % 2 === 0 ? `${whole} h` : whole === 0 ? '1/2 h' : `${whole} 1/2 h`;
}
