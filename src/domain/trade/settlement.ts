import { type Cents, roundCents, share } from '~/domain/money.ts';
import { comingLines, type Line, priceWork, type WorkQuantities } from './price.ts';
import type { BidTerms } from './rate-card.ts';

/** The platform's fee unless its configuration says otherwise: 5 %. */
export const DEFAULT_FEE_BASIS_POINTS = 500;

/** Where the held money goes. payable = fee + transfer; held = payable + refund. */
export interface Split {
  readonly payableCents: Cents;
  /** The part of `payableCents` that is tax: no fee is taken on it. */
  readonly taxCents: Cents;
  readonly feeCents: Cents;
  readonly transferCents: Cents;
  readonly refundCents: Cents;
}

export interface Settlement extends Split {
  readonly lines: readonly Line[];
  readonly costCents: Cents;
  /** Null when the hold covers the cost. Otherwise what is lacking, and what either way out would come to. */
  readonly overHold: { readonly lackingCents: Cents; readonly ifToppedUp: Split; readonly ifHeldIsAccepted: Split } | null;
}

export interface SettlementMoney {
  readonly heldCents: Cents;
  readonly feeBasisPoints: number;
}

/**
 * Splits a cost against what is held: payable = min(cost, held), fee on payable without tax, the rest to the sawyer, what remains back.
 * When less than the cost is payable, its tax is the same part of it as of the cost.
 */
export function split(costCents: Cents, taxCents: Cents, { heldCents, feeBasisPoints }: SettlementMoney): Split {
  const payableCents = Math.min(costCents, heldCents);
  const payableTax = costCents === 0 ? 0 : roundCents((taxCents * payableCents) / costCents);
  const feeCents = share(payableCents - payableTax, feeBasisPoints);
  return { payableCents, taxCents: payableTax, feeCents, transferCents: payableCents - feeCents, refundCents: heldCents - payableCents };
}

/**
 * Settles a tally by the frozen terms.
 * `endedBySawyer`: the sawyer left early or broke down, so only the tally and one journey are charged: no minimum and no set-up.
 */
export function settle(terms: BidTerms, work: WorkQuantities, money: SettlementMoney, { endedBySawyer = false } = {}): Settlement {
  const counted = endedBySawyer ? { ...work, setUps: 0, trips: Math.min(1, work.trips) } : work;
  const job = priceWork(terms, counted, { withMinimum: !endedBySawyer });
  return settlementOf(job.lines, job.costCents, job.taxCents, money);
}

export type CancelledBy = 'landowner' | 'sawyer' | 'both';

/**
 * Settles a booking that ends before sawing. Free for everyone until the cut-off (48 hours before the first day's start), the cut-off
 * included; later the landowner owes one set-up per landing and the travel, with the fee on it and no tax; the sawyer never takes any.
 * Somebody who does not come is treated as cancelling late.
 */
export function settleCancellation(
  terms: BidTerms,
  { by, at, cutOffAt }: { readonly by: CancelledBy; readonly at: Date; readonly cutOffAt: Date },
  money: SettlementMoney,
): Settlement {
  const owes = by === 'landowner' && at.getTime() > cutOffAt.getTime();
  const lines = owes ? comingLines(terms, terms.landings, 1) : [];
  return settlementOf(lines, lines.reduce((sum, { amountCents }) => sum + amountCents, 0), 0, money);
}

function settlementOf(lines: readonly Line[], costCents: Cents, taxCents: Cents, money: SettlementMoney): Settlement {
  const lackingCents = Math.max(0, costCents - money.heldCents);
  const asHeld = split(costCents, taxCents, money);
  const overHold = lackingCents === 0 ? null : { lackingCents, ifToppedUp: split(costCents, taxCents, { ...money, heldCents: costCents }), ifHeldIsAccepted: asHeld };
  return { lines, costCents, ...asHeld, overHold };
}
