import { type Cents, roundCents } from '~/domain/money.ts';
import { NO_WORK, priceWork, type PricedJob, type WorkQuantities } from './price.ts';
import type { BidTerms } from './rate-card.ts';

/** A figure with the range its measuring error gives it: low ≤ expected ≤ high. */
export interface Range {
  readonly low: number;
  readonly expected: number;
  readonly high: number;
}

/** What these logs are expected to come to on this sawyer's mill. */
export interface WorkVolume {
  /** Counted by the card's basis: lumber tally by its rule, or log scale with its smallest log. */
  readonly boardFeet: Range;
  /** On the clock; needed when the card is hourly. */
  readonly hours: Range;
  readonly slabSquareFeet?: Range;
  readonly slabBoardFeet?: Range;
  /** Lumber that leaves the mill, whatever the basis: divides the cost per bf sawn. */
  readonly lumberTallyBf: Range;
  readonly overWideLogs?: number;
  readonly overLongLogs?: number;
  readonly dirtyLogs?: number;
}

/** What the landowner asks for beside the sawing. Board feet are shares of the expected tally. */
export interface QuoteOptions {
  readonly quartersawnShare?: number;
  readonly underFourQuarterShare?: number;
  readonly millMoves?: number;
  readonly stickers?: number;
  readonly deliveryLoads?: number;
}

export interface Quote {
  readonly low: PricedJob;
  readonly expected: PricedJob;
  readonly high: PricedJob;
  /** The cost at the high end, with the whole metal cap and tax. */
  readonly holdCents: Cents;
  /** Expected cost ÷ expected lumber tally; null when no lumber is expected. */
  readonly costPerBfCents: Cents | null;
}

const NONE: Range = { low: 0, expected: 0, high: 0 };

/** Works out a bid: its lines at the low, expected and high end, and the hold it leads to. */
export function quote(terms: BidTerms, volume: WorkVolume, options: QuoteOptions = {}): Quote {
  const [low, expected, high] = (['low', 'expected', 'high'] as const).map((end) => quantitiesAt(end, terms, volume, options)) as [WorkQuantities, WorkQuantities, WorkQuantities];
  const priced = priceWork(terms, expected);
  const bf = volume.lumberTallyBf.expected;
  return {
    low: priceWork(terms, low),
    expected: priced,
    high: priceWork(terms, high),
    holdCents: holdFor(terms, high),
    costPerBfCents: bf > 0 ? roundCents(priced.costCents / bf) : null,
  };
}

/** The hold for work at the high end: its cost with the whole metal cap, taxed as the card states. */
export function holdFor(terms: BidTerms, high: WorkQuantities): Cents {
  // One blade priced at the whole cap stands for any mixture of hits that reaches it.
  const atCap = { ...terms, card: { ...terms.card, metal: { ...terms.card.metal, destroyedCents: terms.metalCapCents } } };
  return priceWork(atCap, { ...high, bladesResharpened: 0, bladesDestroyed: 1 }).costCents;
}

function quantitiesAt(end: keyof Range, terms: BidTerms, volume: WorkVolume, options: QuoteOptions): WorkQuantities {
  const tally = volume.lumberTallyBf[end];
  return {
    ...NO_WORK,
    boardFeet: volume.boardFeet[end],
    clockMinutes: volume.hours[end] * 60,
    slabSquareFeet: (volume.slabSquareFeet ?? NONE)[end],
    slabBoardFeet: (volume.slabBoardFeet ?? NONE)[end],
    quartersawnBf: tally * (options.quartersawnShare ?? 0),
    underFourQuarterBf: tally * (options.underFourQuarterShare ?? 0),
    overWideLogs: volume.overWideLogs ?? 0,
    overLongLogs: volume.overLongLogs ?? 0,
    dirtyLogs: volume.dirtyLogs ?? 0,
    millMoves: options.millMoves ?? 0,
    stickers: options.stickers ?? 0,
    deliveryLoads: options.deliveryLoads ?? 0,
    wasteDone: terms.waste,
    setUps: terms.landings,
    trips: 1,
  };
}
