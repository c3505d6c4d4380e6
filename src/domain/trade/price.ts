import { type Cents, share, times } from '~/domain/money.ts';
import { logRuleNames } from '~/domain/timber/log-rules.ts';
import { quarterHours } from './clock.ts';
import { basisPrice, type BidTerms, offBearerCents, type RateCard } from './rate-card.ts';

export type LineKind = 'sawing' | 'surcharge' | 'extra' | 'set-up' | 'travel' | 'minimum' | 'metal' | 'tax';
export type LineUnit = 'bf' | 'hour' | 'sq ft' | 'log' | 'pass' | 'each' | 'landing' | 'mile' | 'load' | 'blade' | 'job' | 'trip' | '%';

const WITHOUT_PLURAL: readonly LineUnit[] = ['bf', 'sq ft', 'each', '%'];

/** `12 miles`, `1 landing`, `3 passes`: a line's quantity (already said as text) with its unit. */
export const withUnit = (said: string, quantity: number, unit: LineUnit): string => `${said} ${unit}${quantity === 1 || WITHOUT_PLURAL.includes(unit) ? '' : unit === 'pass' ? 'es' : 's'}`;

/** One line of a bill. `amountCents` is rounded once, half up, from quantity × price; the lines of a job sum to its cost. */
export interface Line {
  readonly kind: LineKind;
  readonly label: string;
  readonly quantity: number;
  readonly unit: LineUnit;
  readonly unitCents: Cents;
  readonly amountCents: Cents;
}

/** What was done, or is expected to be done, in the units the card charges by. */
export interface WorkQuantities {
  /** Counted by the card's own basis: lumber tally by its rule, or log scale with its smallest log. Ignored by the hour. */
  readonly boardFeet: number;
  /** The same for logs added after the bid: a line of their own. */
  readonly addedBoardFeet: number;
  readonly clockMinutes: number;
  readonly slabSquareFeet: number;
  readonly slabBoardFeet: number;
  readonly quartersawnBf: number;
  readonly underFourQuarterBf: number;
  readonly overWideLogs: number;
  readonly overLongLogs: number;
  readonly dirtyLogs: number;
  /** Waiting for the landowner. Under an hourly basis it is on the clock instead. */
  readonly waitingMinutes: number;
  readonly cullOpeningMinutes: number;
  readonly cullPasses: number;
  readonly millMoves: number;
  readonly stickers: number;
  readonly deliveryLoads: number;
  /** What was really done with slabs and sawdust: charged only when it is what the bid says. */
  readonly wasteDone: BidTerms['waste'];
  readonly setUps: number;
  /** Journeys there and back. */
  readonly trips: number;
  readonly bladesResharpened: number;
  readonly bladesDestroyed: number;
}

export const NO_WORK: WorkQuantities = {
  boardFeet: 0, addedBoardFeet: 0, clockMinutes: 0, slabSquareFeet: 0, slabBoardFeet: 0, quartersawnBf: 0, underFourQuarterBf: 0,
  overWideLogs: 0, overLongLogs: 0, dirtyLogs: 0, waitingMinutes: 0, cullOpeningMinutes: 0, cullPasses: 0, millMoves: 0, stickers: 0,
  deliveryLoads: 0, wasteDone: 'left', setUps: 0, trips: 0, bladesResharpened: 0, bladesDestroyed: 0,
};

export interface PricedJob {
  readonly lines: readonly Line[];
  readonly sawingCents: Cents;
  readonly setUpCents: Cents;
  readonly travelCents: Cents;
  /** max(minimum, sawing + surcharges + extras + set-up + travel), or the card's sawing-only minimum. */
  readonly workCents: Cents;
  /** At most the cap. */
  readonly metalCents: Cents;
  readonly taxCents: Cents;
  readonly costCents: Cents;
}

/** Road miles charged for one journey there and back: the miles beyond the free ones, both ways. */
export const chargedMiles = (card: RateCard, roadMiles: number): number => Math.max(0, roadMiles - card.travel.freeMiles) * 2;

/** Set-up and travel of one coming: what a late cancellation owes. */
export function comingLines(terms: BidTerms, setUps: number, trips: number): readonly Line[] {
  const { card, shared } = terms;
  if (shared) {
    return [
      line('set-up', shared.setUpCents === card.setUpPerLanding ? 'Set-up' : 'Set-up, your part', setUps, 'landing', shared.setUpCents),
      line('travel', 'Travel, your part of a shared trip', trips, 'trip', shared.travelCents),
    ].filter(isCharged);
  }
  return [
    line('set-up', 'Set-up', setUps, 'landing', card.setUpPerLanding),
    line('travel', 'Travel beyond the free miles, both ways', chargedMiles(card, terms.roadMiles) * trips, 'mile', card.travel.perMileCents),
  ].filter(isCharged);
}

/**
 * Prices work by a bid's frozen terms. Tax is the sawyer's stated rate on work and metal hits together.
 * `withMinimum: false` leaves the minimum out (the sawyer left early: only the tally counts).
 */
export function priceWork(terms: BidTerms, work: WorkQuantities, { withMinimum = true } = {}): PricedJob {
  const { card } = terms;
  const sawing = sawingLines(terms, work);
  const coming = comingLines(terms, work.setUps, work.trips);
  const beside = [...surchargeLines(card, work), ...extraLines(terms, work)];
  const sawingCents = sum(sawing);
  const charged = [...sawing, ...beside, ...coming];
  const measured = card.minimum.covers === 'whole-job' ? sum(charged) : sawingCents;
  const lacking = withMinimum ? Math.max(0, card.minimum.cents - measured) : 0;
  const topUp = lacking === 0 ? [] : [line('minimum', `Up to the minimum for ${card.minimum.covers === 'whole-job' ? 'the job' : 'the sawing'}`, 1, 'job', lacking)];
  const metal = metalLines(terms, work);
  const workCents = sum(charged) + lacking;
  const metalCents = sum(metal);
  const tax = taxLines(card, workCents + metalCents);
  const lines = [...charged, ...topUp, ...metal, ...tax];
  const travelCents = sum(coming.filter(({ kind }) => kind === 'travel'));
  return { lines, sawingCents, setUpCents: sum(coming) - travelCents, travelCents, workCents, metalCents, taxCents: sum(tax), costCents: sum(lines) };
}

function sawingLines({ card, offBearer }: BidTerms, work: WorkQuantities): Line[] {
  const { basis, slabs } = card;
  const rate = offBearerCents(basisPrice(basis), offBearer);
  const boards =
    basis.kind === 'hourly'
      ? [line('sawing', 'Sawing, by the hour', quarterHours(work.clockMinutes), 'hour', rate)]
      : [
          line('sawing', `Sawing, ${basis.kind === 'lumber-tally' ? 'lumber tally' : logRuleNames[basis.rule]}`, work.boardFeet, 'bf', rate),
          line('sawing', 'Sawing, logs added', work.addedBoardFeet, 'bf', rate),
        ];
  const slabLines =
    slabs === null
      ? []
      : slabs.kind === 'square-foot'
        ? [line('sawing', 'Slabs, mean face', work.slabSquareFeet, 'sq ft', slabs.cents)]
        : [line('sawing', 'Slabs', work.slabBoardFeet, 'bf', slabs.cents)];
  return [...boards, ...slabLines].filter(isCharged);
}

function surchargeLines({ surcharges }: RateCard, work: WorkQuantities): Line[] {
  return [
    line('surcharge', 'Quartersawn', work.quartersawnBf, 'bf', surcharges.quartersawnPerBf),
    line('surcharge', 'Under 4/4', work.underFourQuarterBf, 'bf', surcharges.underFourQuarterPerBf),
    line('surcharge', `Logs over ${surcharges.overWide?.aboveIn ?? 0} in`, work.overWideLogs, 'log', surcharges.overWide?.perLogCents ?? 0),
    line('surcharge', `Logs over ${surcharges.overLong?.aboveFt ?? 0} ft`, work.overLongLogs, 'log', surcharges.overLong?.perLogCents ?? 0),
    line('surcharge', 'Dirty logs', work.dirtyLogs, 'log', surcharges.dirtyPerLog),
  ].filter(isCharged);
}

function extraLines({ card, waste }: BidTerms, work: WorkQuantities): Line[] {
  const { extras, basis, cullOpening } = card;
  const wasteAgreed = waste === work.wasteDone;
  const opening =
    cullOpening === null
      ? []
      : cullOpening.kind === 'pass'
        ? [line('extra', 'Cull logs, passes', work.cullPasses, 'pass', cullOpening.cents)]
        : // By the hour the opening is already on the clock.
          [line('extra', 'Cull logs, opening time', basis.kind === 'hourly' ? 0 : quarterHours(work.cullOpeningMinutes), 'hour', cullOpening.cents)];
  return [
    line('extra', 'Waiting', basis.kind === 'hourly' ? 0 : quarterHours(work.waitingMinutes), 'hour', extras.waitingPerHour),
    ...opening,
    line('extra', 'Moving the mill', work.millMoves, 'each', extras.movingMill ?? 0),
    line('extra', 'Slabs and sawdust hauled away', wasteAgreed && waste === 'hauled' ? 1 : 0, 'job', extras.wasteHauled ?? 0),
    line('extra', 'Slabs bundled', wasteAgreed && waste === 'bundled' ? 1 : 0, 'job', extras.wasteBundled ?? 0),
    line('extra', 'Stickers', work.stickers, 'each', extras.stickerEach ?? 0),
    line('extra', 'Delivery', work.deliveryLoads, 'load', extras.deliveryPerLoad ?? 0),
  ].filter(isCharged);
}

function metalLines({ card, metalCapCents }: BidTerms, work: WorkQuantities): Line[] {
  const hits = [
    line('metal', 'Blades re-sharpened', work.bladesResharpened, 'blade', card.metal.resharpenedCents),
    line('metal', 'Blades destroyed', work.bladesDestroyed, 'blade', card.metal.destroyedCents),
  ].filter(isCharged);
  const over = sum(hits) - metalCapCents;
  return over > 0 ? [...hits, line('metal', 'Over the cap, not charged', 1, 'job', -over)] : hits;
}

/** The tax line a card states on an amount, if it states one. */
export function taxLines(card: RateCard, baseCents: Cents): readonly Line[] {
  if (card.tax === null) return [];
  const { pct, label } = card.tax;
  return [{ kind: 'tax' as const, label, quantity: pct, unit: '%' as const, unitCents: baseCents, amountCents: share(baseCents, pct * 100) }].filter(isCharged);
}

const line = (kind: LineKind, label: string, quantity: number, unit: LineUnit, unitCents: Cents): Line => ({
  kind, label, quantity, unit, unitCents, amountCents: times(quantity, unitCents),
});
const isCharged = ({ amountCents }: Line): boolean => amountCents !== 0;
const sum = (lines: readonly Line[]): Cents => lines.reduce((total, { amountCents }) => total + amountCents, 0);
