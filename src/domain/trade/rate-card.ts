import { type Cents, formatCents } from '~/domain/money.ts';
import { type LogRule, logRuleNames } from '~/domain/timber/log-rules.ts';

/** How a lumber tally counts: whole surface measure, or exact decimals on the nominal size. */
export type TallyRule = 'hardwood' | 'exact';
/** Who takes boards off the mill: a helper of the landowner's, or one the sawyer brings. */
export type OffBearer = 'landowner-provides' | 'sawyer-brings';
/** What becomes of slabs and sawdust. */
export type Waste = 'left' | 'hauled' | 'bundled';

/** A price with the sawyer's own off-bearer, and the price without one, when the landowner provides the help. */
export interface OffBearerPrice {
  readonly withCents: Cents;
  readonly withoutCents: Cents;
}

/** What boards are charged by. Log scale never counts a log for less than `smallestLog` would scale. */
export type SawingBasis =
  | { readonly kind: 'lumber-tally'; readonly rule: TallyRule; readonly perBf: OffBearerPrice }
  | {
      readonly kind: 'log-scale';
      readonly rule: LogRule;
      readonly smallestLog: { readonly diameterIn: number; readonly lengthFt: number } | null;
      readonly perBf: OffBearerPrice;
    }
  | { readonly kind: 'hourly'; readonly from: 'first-cut' | 'arrival'; readonly perHour: OffBearerPrice };

/** What slabs are charged by; under an hourly basis with no slab price they are simply on the clock. */
export type SlabPrice =
  | { readonly kind: 'square-foot'; readonly cents: Cents }
  | { readonly kind: 'board-foot'; readonly cents: Cents };

/** What opening a rotten log costs: time to the quarter hour, or each pass of the saw. */
export type CullOpening = { readonly kind: 'hour'; readonly cents: Cents } | { readonly kind: 'pass'; readonly cents: Cents };

export interface Surcharges {
  readonly quartersawnPerBf: Cents;
  readonly underFourQuarterPerBf: Cents;
  /** Per log whose largest end outside bark is over `aboveIn`. */
  readonly overWide: { readonly aboveIn: number; readonly perLogCents: Cents } | null;
  /** Per log longer than `aboveFt`. */
  readonly overLong: { readonly aboveFt: number; readonly perLogCents: Cents } | null;
  readonly dirtyPerLog: Cents;
}

/** Prices of what may be asked for beside the sawing. `null`: not offered. */
export interface Extras {
  readonly movingMill: Cents | null;
  readonly waitingPerHour: Cents;
  readonly wasteHauled: Cents | null;
  readonly wasteBundled: Cents | null;
  readonly stickerEach: Cents | null;
  readonly deliveryPerLoad: Cents | null;
}

/** A sawyer's prices. All amounts are whole cents; the card is frozen on the bid. */
export interface RateCard {
  readonly basis: SawingBasis;
  readonly slabs: SlabPrice | null;
  readonly surcharges: Surcharges;
  readonly extras: Extras;
  readonly cullOpening: CullOpening | null;
  readonly setUpPerLanding: Cents;
  readonly travel: { readonly freeMiles: number; readonly perMileCents: Cents; readonly owedAgainAfterRain: boolean };
  readonly minimum: { readonly cents: Cents; readonly covers: 'whole-job' | 'sawing-only' };
  readonly metal: { readonly resharpenedCents: Cents; readonly destroyedCents: Cents; readonly capCents: Cents };
  /** As the sawyer states it, never computed by Skidway. `pct` 5.5 means 5.5 %. */
  readonly tax: { readonly pct: number; readonly label: string } | null;
}

/** What a shared trip fixes in the place of the card's own set-up and travel. */
export interface SharedTerms {
  /** The trip's public number. */
  readonly trip: number;
  /** This landowner's part of the whole trip's travel. */
  readonly travelCents: Cents;
  /** A whole set-up, or a part of one where logs are decked together. */
  readonly setUpCents: Cents;
}

/** What a chosen bid fixes. The work agreement shows it and the settlement obeys it. */
export interface BidTerms {
  readonly card: RateCard;
  /** One way, whole miles, as the sawyer confirmed them. */
  readonly roadMiles: number;
  readonly metalCapCents: Cents;
  readonly offBearer: OffBearer;
  readonly waste: Waste;
  readonly landings: number;
  readonly shared?: SharedTerms;
}

export const TALLY_RULE_NAMES: Readonly<Record<TallyRule, string>> = {
  hardwood: 'hardwood rule (surface measure)',
  exact: 'exact decimals on nominal size',
};

/** The price of the pair that the bid's off-bearer choice picks. */
export const offBearerCents = (price: OffBearerPrice, offBearer: OffBearer): Cents =>
  offBearer === 'sawyer-brings' ? price.withCents : price.withoutCents;

/** The basis's price: per bf, or per hour. */
export const basisPrice = (basis: SawingBasis): OffBearerPrice => (basis.kind === 'hourly' ? basis.perHour : basis.perBf);

/** What may become of slabs and sawdust under this card: leaving them is always possible, the rest needs a price. */
export const wastesOffered = ({ extras }: RateCard): readonly Waste[] => [
  'left',
  ...(extras.wasteHauled === null ? [] : (['hauled'] as const)),
  ...(extras.wasteBundled === null ? [] : (['bundled'] as const)),
];

/** `$0.55 / bf` or `$95.00 / hour`: the rate in its shortest honest form, for a column of a comparison. */
export function describeRate(card: RateCard, offBearer: OffBearer): string {
  const amount = formatCents(offBearerCents(basisPrice(card.basis), offBearer));
  return card.basis.kind === 'hourly' ? `${amount} / hour` : `${amount} / bf`;
}

/** What the rate counts, in the trade's words: `lumber tally, hardwood rule (surface measure)`. */
export function describeBasis(card: RateCard): string {
  const slabs = card.slabs === null ? '' : `; slabs by the ${card.slabs.kind === 'square-foot' ? 'square foot of mean face' : 'board foot'}`;
  return `${describeCount(card.basis)}${slabs}`;
}

function describeCount(basis: SawingBasis): string {
  switch (basis.kind) {
    case 'lumber-tally':
      return `lumber tally, ${TALLY_RULE_NAMES[basis.rule]}`;
    case 'log-scale': {
      const smallest = basis.smallestLog;
      const least = smallest === null ? '' : `, no log counted for less than ${smallest.diameterIn} in × ${smallest.lengthFt} ft`;
      return `log scale, ${logRuleNames[basis.rule]}${least}`;
    }
    case 'hourly':
      return `by the hour from ${basis.from === 'first-cut' ? 'the first cut' : 'arrival'}, to a quarter hour`;
  }
}

/** `$25.00 minimum for the whole job`, or `no minimum`. */
export function describeMinimum(card: RateCard): string {
  if (card.minimum.cents === 0) return 'no minimum';
  return `${formatCents(card.minimum.cents)} minimum for ${card.minimum.covers === 'whole-job' ? 'the whole job' : 'the sawing only'}`;
}
