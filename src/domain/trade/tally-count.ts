import { exactBoardFeet, tallyBoards } from '~/domain/timber/tally.ts';
import { type ClockEntry, minutesOf, minutesOnClock } from './clock.ts';
import { type LogToCharge, chargedLogScale } from './log-charge.ts';
import { type BladeEvent, chargedBlades, setUpsAfterRain, tripsAfterRain } from './on-the-day.ts';
import { NO_WORK, type WorkQuantities } from './price.ts';
import type { BidTerms, TallyRule, Waste } from './rate-card.ts';

/** Boards (or slabs) of one size, as entered. Inches and feet. `secondWidthIn` is a slab's other face at mid-length. */
export interface TalliedBoard {
  readonly kind: 'board' | 'slab' | 'out-of-size';
  readonly logId: string | null;
  readonly thicknessIn: number;
  readonly widthIn: number;
  readonly secondWidthIn?: number | null;
  readonly lengthFt: number;
  readonly count: number;
}

/** A log that was opened and left. Opening is charged by time or by passes, as the card says. */
export interface CullLog {
  readonly logId: string | null;
  readonly openingMinutes: number;
  readonly passes: number;
}

export interface TallyExtras {
  readonly millMoves: number;
  readonly stickers: number;
  readonly deliveryLoads: number;
  readonly wasteDone: Waste;
  /** Logs sawn quartersawn at the landowner's wish. */
  readonly quartersawnLogIds: readonly string[];
  /** Logs added on the day and accepted by both before sawing. */
  readonly addedLogIds: readonly string[];
  /** Logs that were dragged: their dirt is the landowner's. */
  readonly draggedLogIds: readonly string[];
  /** How often rain sent the sawyer home and back. */
  readonly rainReturns: number;
  /** Further set-ups that both agreed. */
  readonly setUpsAgreedAgain: number;
}

export const NO_EXTRAS: TallyExtras = {
  millMoves: 0, stickers: 0, deliveryLoads: 0, wasteDone: 'left', quartersawnLogIds: [], addedLogIds: [], draggedLogIds: [], rainReturns: 0, setUpsAgreedAgain: 0,
};

/** Everything counted on the job, all days together, boards in the order they were entered. */
export interface JobTally {
  readonly boards: readonly TalliedBoard[];
  readonly clock: readonly ClockEntry[];
  readonly blades: readonly BladeEvent[];
  readonly culls: readonly CullLog[];
  readonly extras: TallyExtras;
}

/** The mean of a slab's two faces at mid-length, inches. */
const meanFaceIn = ({ widthIn, secondWidthIn }: TalliedBoard): number => (widthIn + (secondWidthIn ?? widthIn)) / 2;

/** Square feet of mean face of all slabs of the row. */
export const slabSquareFeet = (slab: TalliedBoard): number => (meanFaceIn(slab) / 12) * slab.lengthFt * slab.count;

/** Board feet of boards by the bid's tally rule. Boards out of size are recorded and count nothing. */
export function countBoards(rule: TallyRule, boards: readonly TalliedBoard[]): number {
  return tallyBoards(rule === 'hardwood' ? 'hardwood' : 'softwood', boards.filter(({ kind }) => kind === 'board')).totalBoardFeet;
}

/** The rule a card's boards are tallied by: its own when it charges lumber tally, else exact decimals (for the record only). */
export const tallyRuleOf = ({ card }: BidTerms): TallyRule => (card.basis.kind === 'lumber-tally' ? card.basis.rule : 'exact');

/**
 * Turns a job's tally into the quantities its frozen terms charge by.
 * Logs added on the day are counted by themselves. Under log scale a log counts when boards came from it and it was not culled.
 * @param logs every log of the job, as measured on the day.
 */
export function countTally(terms: BidTerms, tally: JobTally, logs: readonly LogToCharge[]): WorkQuantities {
  const { basis, surcharges, slabs } = terms.card;
  const { extras } = tally;
  const rule = tallyRuleOf(terms);
  const added = new Set(extras.addedLogIds);
  const isAdded = ({ logId }: { readonly logId: string | null }): boolean => logId !== null && added.has(logId);
  const culled = new Set(tally.culls.flatMap(({ logId }) => logId ?? []));
  const opened = new Set(tally.boards.flatMap(({ logId }) => logId ?? []));
  const sawn = logs.filter(({ id }) => opened.has(id) && !culled.has(id));
  const rows = tally.boards.filter(({ kind }) => kind === 'board');
  const slabRows = tally.boards.filter(({ kind }) => kind === 'slab');
  const bf = (which: (row: TalliedBoard) => boolean): number => countBoards(rule, rows.filter(which));
  const scale = (which: readonly LogToCharge[]): number => (basis.kind === 'log-scale' ? chargedLogScale(basis, which) : 0);
  const quartersawn = new Set(extras.quartersawnLogIds);
  return {
    ...NO_WORK,
    boardFeet: basis.kind === 'log-scale' ? scale(sawn.filter(({ id }) => !added.has(id))) : bf((row) => !isAdded(row)),
    addedBoardFeet: basis.kind === 'log-scale' ? scale(sawn.filter(({ id }) => added.has(id))) : bf(isAdded),
    clockMinutes: basis.kind === 'hourly' ? minutesOnClock(tally.clock, basis.from) : 0,
    waitingMinutes: minutesOf(tally.clock, 'waiting'),
    slabSquareFeet: slabs === null ? 0 : slabRows.reduce((sum, slab) => sum + slabSquareFeet(slab), 0),
    slabBoardFeet: slabs === null ? 0 : slabRows.reduce((sum, slab) => sum + exactBoardFeet(slab.thicknessIn, meanFaceIn(slab), slab.lengthFt) * slab.count, 0),
    quartersawnBf: bf(({ logId }) => logId !== null && quartersawn.has(logId)),
    underFourQuarterBf: bf(({ thicknessIn }) => thicknessIn < 1),
    overWideLogs: sawn.filter(({ largestEndObIn }) => surcharges.overWide !== null && largestEndObIn > surcharges.overWide.aboveIn).length,
    overLongLogs: sawn.filter(({ lengthFt }) => surcharges.overLong !== null && lengthFt > surcharges.overLong.aboveFt).length,
    dirtyLogs: extras.draggedLogIds.length,
    cullOpeningMinutes: tally.culls.reduce((sum, { openingMinutes }) => sum + openingMinutes, 0),
    cullPasses: tally.culls.reduce((sum, { passes }) => sum + passes, 0),
    millMoves: extras.millMoves,
    stickers: extras.stickers,
    deliveryLoads: extras.deliveryLoads,
    wasteDone: extras.wasteDone,
    setUps: setUpsAfterRain(terms, extras.setUpsAgreedAgain),
    trips: tripsAfterRain(terms, extras.rainReturns),
    ...chargedBlades(tally.blades, extras.draggedLogIds.length > 0),
  };
}
