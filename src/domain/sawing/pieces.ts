import { largeEnd, type LogShape, radiusAt } from './log-shape.ts';
import { halfChord, type Units, unitsDown, unitsUp, UNITS_PER_IN } from './units.ts';

/** A size the plan may cut: green inches and feet. */
export interface Piece {
  readonly thicknessIn: number;
  /** Left out: any whole inch from 3. */
  readonly widthIn?: number | undefined;
  /** Left out: any whole foot from 4 to the log's length. */
  readonly lengthFt?: number | undefined;
  /** Worth of a board foot; 1 when left out. */
  readonly value?: number | undefined;
  /** At most so many; no limit when left out. */
  readonly count?: number | undefined;
  /** For a piece without a length: only these lengths (ft) instead of every whole foot. */
  readonly lengthsFt?: readonly number[] | undefined;
}

/** What the mill can do. */
export interface Mill {
  readonly kerfIn: number;
  /** Longest chord of any cut through the log or cant, in. */
  readonly widestCutIn?: number | undefined;
  readonly widestBoardIn?: number | undefined;
  readonly longestFt?: number | undefined;
}

/** One board that a strip may take: `length` is an index into `Stock.lengthsFt`. */
export interface Choice {
  readonly width: Units;
  readonly length: number;
  readonly value: number;
  readonly piece: number;
  readonly widthIn: number;
}

/** The boards of one width, longest first; a shorter one is always worth less (or it would be the only one). */
export interface WidthChoices {
  readonly width: Units;
  readonly choices: readonly Choice[];
}

export interface ThicknessGroup {
  readonly thickness: Units;
  readonly thicknessIn: number;
  readonly widths: readonly WidthChoices[];
  readonly narrowest: Units;
  /** The most that a unit of row (a board with its kerf) can be worth. */
  readonly density: number;
}

/** A log, a mill and the sizes, in the planner's units. */
export interface Stock {
  readonly log: LogShape;
  readonly mill: Mill;
  readonly pieces: readonly Piece[];
  readonly kerf: Units;
  /** Distinct board lengths, longest first. */
  readonly lengthsFt: readonly number[];
  /** Squared radius (with the wane allowance) where a board of each length begins: every board reaches the large end. */
  readonly radiusSquared: readonly number[];
  /** Largest of those radii, whole units. */
  readonly reach: Units;
  /** Radius of the wood at the large end, for the chords of cuts. */
  readonly woodRadius: number;
  /** Radius of the heart that no board meets; 0 for none. */
  readonly heart: number;
  readonly groups: readonly ThicknessGroup[];
  /** True when every thickness has boards of one length only: then rows are exact everywhere. */
  readonly oneLength: boolean;
}

const NARROWEST_FREE_WIDTH_IN = 3;
const SHORTEST_FREE_LENGTH_FT = 4;

/** t × w × L / 12, unrounded. */
export const boardFeet = (thicknessIn: number, widthIn: number, lengthFt: number): number => (thicknessIn * widthIn * lengthFt) / 12;

function lengthsOf(piece: Piece, logFt: number): number[] {
  if (piece.lengthFt !== undefined) return piece.lengthFt <= logFt + 1e-9 ? [piece.lengthFt] : [];
  if (piece.lengthsFt) return piece.lengthsFt.filter((feet) => feet <= logFt + 1e-9);
  const lengths: number[] = [];
  for (let feet = Math.floor(logFt + 1e-9); feet >= SHORTEST_FREE_LENGTH_FT; feet--) lengths.push(feet);
  return lengths;
}

function widthsOf(piece: Piece, widestIn: number): number[] {
  if (piece.widthIn !== undefined) return piece.widthIn <= widestIn + 1e-9 ? [piece.widthIn] : [];
  const widths: number[] = [];
  for (let width = NARROWEST_FREE_WIDTH_IN; width <= widestIn + 1e-9; width++) widths.push(width);
  return widths;
}

/** Keeps, among boards of one width, those that no board of an equal or larger circle beats. */
function worthwhile(choices: readonly Choice[], radiusSquared: readonly number[]): Choice[] {
  const room = (choice: Choice): number => radiusSquared[choice.length] ?? 0;
  const widestRoomFirst = [...choices].sort((a, b) => room(b) - room(a) || b.value - a.value);
  const kept: Choice[] = [];
  let best = 0;
  for (const choice of widestRoomFirst) {
    if (choice.value > best + 1e-12) {
      kept.push(choice);
      best = choice.value;
    }
  }
  return kept.reverse();
}

/**
 * Puts a log, a mill and the sizes into the planner's units.
 * @param penalties taken off the value of one board of each piece (used to price counts); none when left out.
 */
export function stockOf(log: LogShape, mill: Mill, pieces: readonly Piece[], waneAllowanceIn = 0, penalties?: readonly number[]): Stock {
  const logFt = log.lengthFt;
  const lengthsFt = [...new Set(pieces.flatMap((piece) => lengthsOf(piece, logFt)))].sort((a, b) => b - a);
  const radiusSquared = lengthsFt.map((feet) => ((radiusAt(log, Math.max(0, logFt - feet)) + waneAllowanceIn) * UNITS_PER_IN) ** 2 * (1 + 1e-13));
  const widest = Math.sqrt(radiusSquared.reduce((most, each) => Math.max(most, each), 0));
  const widestIn = Math.min(mill.widestBoardIn ?? Infinity, (2 * widest) / UNITS_PER_IN);
  const byThickness = new Map<Units, { thicknessIn: number; byWidth: Map<Units, Choice[]> }>();
  pieces.forEach((piece, index) => {
    const thickness = unitsUp(piece.thicknessIn);
    const group = byThickness.get(thickness) ?? { thicknessIn: piece.thicknessIn, byWidth: new Map<Units, Choice[]>() };
    byThickness.set(thickness, group);
    for (const widthIn of widthsOf(piece, widestIn)) {
      for (const feet of lengthsOf(piece, logFt)) {
        const length = lengthsFt.indexOf(feet);
        const width = unitsUp(widthIn);
        const value = (piece.value ?? 1) * boardFeet(piece.thicknessIn, widthIn, feet) - (penalties?.[index] ?? 0);
        const fits = 2 * halfChord(radiusSquared[length] ?? 0, Math.ceil(thickness / 2)) >= width;
        if (piece.count === 0 || value <= 1e-9 || !fits) continue;
        const same = group.byWidth.get(width) ?? [];
        same.push({ width, length, value, piece: index, widthIn });
        group.byWidth.set(width, same);
      }
    }
  });
  const groups: ThicknessGroup[] = [];
  for (const [thickness, { thicknessIn, byWidth }] of byThickness) {
    const widths = [...byWidth].map(([width, choices]) => ({ width, choices: worthwhile(choices, radiusSquared) })).sort((a, b) => a.width - b.width);
    const narrowest = widths[0]?.width;
    const density = widths.reduce((most, { width, choices }) => Math.max(most, (choices[0]?.value ?? 0) / (width + unitsUp(mill.kerfIn))), 0);
    if (narrowest !== undefined) groups.push({ thickness, thicknessIn, widths, narrowest, density });
  }
  return {
    log,
    mill,
    pieces,
    kerf: unitsUp(mill.kerfIn),
    lengthsFt,
    radiusSquared,
    reach: Math.floor(widest),
    woodRadius: (largeEnd(log) / 2) * UNITS_PER_IN,
    heart: ((log.heartDefectIn ?? 0) / 2) * UNITS_PER_IN,
    groups: groups.sort((a, b) => a.thickness - b.thickness),
    oneLength: groups.every((group) => new Set(group.widths.flatMap((width) => width.choices.map((choice) => radiusSquared[choice.length]))).size <= 1),
  };
}

/** A stock that holds no less: every board has the worth of its longest choice and the room of the shortest board. */
export const roomierStock = (stock: Stock): Stock => ({
  ...stock,
  radiusSquared: [stock.radiusSquared.reduce((most, each) => Math.max(most, each), 0)],
  groups: stock.groups.map((group) => ({ ...group, widths: group.widths.map(({ width, choices }) => ({ width, choices: choices.slice(0, 1).map((choice) => ({ ...choice, length: 0 })) })) })),
  oneLength: true,
});

/** How much work a stock is: boards to choose from times the log's radius in inches. Six fixed sizes in a 30-inch log are about 100. */
export const workOf = (stock: Stock): number =>
  stock.groups.reduce((sum, group) => sum + group.widths.reduce((count, width) => count + width.choices.length, 0), 0) * (stock.reach / UNITS_PER_IN);

/**
 * The same pieces with fewer of the free lengths: every second, third … foot down from the longest, so that the work stays within
 * `most`. Pieces with a length of their own stay as they are.
 */
export function withFewerLengths(pieces: readonly Piece[], logFt: number, work: number, most: number): readonly Piece[] {
  const step = Math.ceil(work / most);
  if (step <= 1) return pieces;
  return pieces.map((piece) => (piece.lengthFt === undefined ? { ...piece, lengthsFt: lengthsOf(piece, logFt).filter((_, index) => index % step === 0) } : piece));
}

/** Distance from the pith within which a cut's chord would be wider than the mill's widest cut; 0 when any cut passes. */
export function blockedHalfWidth(stock: Stock): Units {
  const widest = stock.mill.widestCutIn;
  if (widest === undefined) return 0;
  const half = unitsDown(widest) / 2;
  return half >= stock.woodRadius ? 0 : Math.ceil(Math.sqrt(stock.woodRadius ** 2 - half ** 2));
}
