import { type Cents, formatDollars } from '~/domain/money.ts';
import type { PricedJob } from './price.ts';
import type { Quote } from './quote.ts';
import type { RateCard } from './rate-card.ts';

/** How a comparison can be ordered, as its address says it. */
export const BID_SORTS = ['estimate', 'perBf', 'day', 'distance'] as const;
export type BidSort = (typeof BID_SORTS)[number];

/** A bid as it is held against others on the same logs. */
export interface Comparable {
  readonly sawyer: string;
  readonly quote: Quote;
  readonly basis: RateCard['basis'];
  readonly expectedBf: number;
}

/** What makes up an estimate, in the parts a comparison names. They sum to the cost. */
export interface CostParts {
  readonly sawing: Cents;
  readonly surchargesAndExtras: Cents;
  readonly setUpAndTravel: Cents;
  readonly minimum: Cents;
  readonly tax: Cents;
}

const PART_NAMES: Readonly<Record<keyof CostParts, string>> = {
  sawing: 'sawing', surchargesAndExtras: 'surcharges and extras', setUpAndTravel: 'set-up and travel', minimum: 'the minimum', tax: 'tax',
};

/** An estimate's cost by part. No metal hit is expected, so none is among them. */
export function costParts({ lines }: PricedJob): CostParts {
  const sum = (...kinds: readonly string[]): Cents => lines.filter(({ kind }) => kinds.includes(kind)).reduce((total, { amountCents }) => total + amountCents, 0);
  return { sawing: sum('sawing'), surchargesAndExtras: sum('surcharge', 'extra'), setUpAndTravel: sum('set-up', 'travel'), minimum: sum('minimum'), tax: sum('tax') };
}

/**
 * Which bid is the lowest and why, in sentences: against the next by its parts, whether the ranges overlap, what the bases do to
 * the risk, and which is lowest per board foot sawn. Empty for fewer than two bids.
 */
export function lowestInWords(bids: readonly Comparable[]): readonly string[] {
  const [lowest, next] = [...bids].sort((a, b) => cost(a) - cost(b));
  if (!lowest || !next) return [];
  const level = cost(lowest) === cost(next);
  return [
    level ? `${lowest.sawyer} and ${next.sawyer} have the same estimate, ${formatDollars(cost(lowest))}.` : `${lowest.sawyer} has the lowest estimate, ${formatDollars(cost(lowest))}: ${formatDollars(cost(next) - cost(lowest))} less than the next, ${next.sawyer}.`,
    ...(level ? [] : whyLower(lowest, next)),
    ...(!level && lowest.quote.high.costCents > next.quote.low.costCents ? ['Their ranges overlap: the logs may measure so that the order turns round.'] : []),
    ...basesDiffer(lowest, next),
    ...lowestPerBf(bids, lowest),
  ];
}

const cost = ({ quote }: Comparable): Cents => quote.expected.costCents;

function whyLower(lowest: Comparable, next: Comparable): readonly string[] {
  const [a, b] = [costParts(lowest.quote.expected), costParts(next.quote.expected)];
  const parts = (Object.keys(PART_NAMES) as (keyof CostParts)[]).map((part) => ({ name: PART_NAMES[part], less: b[part] - a[part] })).filter(({ less }) => less !== 0);
  const say = (list: typeof parts): string => joined([...list].sort((x, y) => Math.abs(y.less) - Math.abs(x.less)).map(({ name, less }) => `${name} (${formatDollars(Math.abs(less))})`));
  const dearer = say(parts.filter(({ less }) => less < 0));
  return [`Less for ${say(parts.filter(({ less }) => less > 0))}${dearer === '' ? '' : `, though more for ${dearer}`}.`];
}

/** Clock against count: who carries the risk of slow sawing. */
function basesDiffer(lowest: Comparable, next: Comparable): readonly string[] {
  const hourly = [lowest, next].filter(({ basis }) => basis.kind === 'hourly');
  const one = hourly[0];
  return hourly.length === 1 && one ? [`${one.sawyer} charges by the hour, the other by what is sawn: slow logs cost you more with ${one.sawyer}, quick ones less.`] : [];
}

function lowestPerBf(bids: readonly Comparable[], lowest: Comparable): readonly string[] {
  const perBf = ({ quote }: Comparable): number => quote.costPerBfCents ?? Number.POSITIVE_INFINITY;
  const best = [...bids].sort((a, b) => perBf(a) - perBf(b) || cost(a) - cost(b))[0];
  if (!best || best.quote.costPerBfCents === null) return [];
  const price = formatDollars(best.quote.costPerBfCents);
  if (perBf(best) === perBf(lowest)) return [`It is also the lowest per bf sawn, ${price}.`];
  return [`Per bf sawn ${best.sawyer} is lowest, ${price}, with ${bf(best)} expected against ${bf(lowest)}.`];
}

const bf = ({ expectedBf }: Comparable): string => `${Math.round(expectedBf).toLocaleString('en-US')} bf`;

const joined = (parts: readonly string[]): string => (parts.length < 2 ? (parts[0] ?? '') : `${parts.slice(0, -1).join(', ')} and ${parts.at(-1)}`);
