import { type Board, section } from './board.ts';
import { largeEnd, type LogShape } from './log-shape.ts';

/** slab: what is opened or wasted falls off · board: a layer of boards comes off · face: a face of the cant · quarter: the log is halved or quartered. */
export type CutKind = 'slab' | 'board' | 'face' | 'quarter';

/** One pass of the saw. Edging a layer to its boards is not counted: it is done after, from the table of boards. */
export interface Cut {
  readonly order: number;
  /** How far the log is turned from how it first lay, degrees. */
  readonly turnDeg: number;
  /** From the bed to the surface that the cut leaves, inside bark (add the bark where the log lies on bark). */
  readonly heightIn: number;
  readonly kind: CutKind;
}

interface Slice {
  readonly low: number;
  readonly high: number;
}

const NEAR = 1e-6;
/** Less wood than this between two boards is not sawn off: it stays on the board. */
const SLIVER_IN = 1 / 16;

/** Distinct layers of some boards, highest first, in heights over the bed. */
function slices(boards: readonly Board[], heightOf: (board: Board) => Slice): Slice[] {
  const found: Slice[] = [];
  for (const board of boards) {
    const slice = heightOf(board);
    if (!found.some((each) => Math.abs(each.low - slice.low) < NEAR && Math.abs(each.high - slice.high) < NEAR)) found.push(slice);
  }
  return found.sort((a, b) => b.high - a.high);
}

/** Passes from the top down through some layers. The lowest layer stays on the bed. */
function passes(layers: readonly Slice[], kerf: number, turnDeg: number): Omit<Cut, 'order'>[] {
  const cuts: Omit<Cut, 'order'>[] = [];
  let surface = Infinity;
  for (const { low, high } of layers) {
    if (surface - high > SLIVER_IN) cuts.push({ turnDeg, heightIn: high, kind: 'slab' });
    surface = low - kerf;
    if (surface > SLIVER_IN) cuts.push({ turnDeg, heightIn: surface, kind: 'board' });
  }
  return cuts;
}

function quarterCuts(log: LogShape, boards: readonly Board[], kerf: number): Omit<Cut, 'order'>[] {
  const pith = largeEnd(log) / 2;
  const halves = [45, 135].map((turnDeg): Omit<Cut, 'order'> => ({ turnDeg, heightIn: pith - kerf / 2, kind: 'quarter' }));
  const sides: readonly (readonly [number, (board: Board) => boolean])[] = [
    [0, (board) => !board.turned && board.xIn > 0],
    [90, (board) => board.turned && board.yIn > 0],
    [180, (board) => !board.turned && board.xIn < 0],
    [270, (board) => board.turned && board.yIn < 0],
  ];
  const over = (board: Board): Slice => {
    const { left, right, bottom, top } = section(board);
    return board.turned ? { low: pith + left, high: pith + right } : { low: pith + bottom, high: pith + top };
  };
  return [...halves, ...sides.flatMap(([turnDeg, has]) => passes(slices(boards.filter(has), over), kerf, turnDeg))];
}

/** How a log lies: 0 as it first lay, then turned; each turn brings another side up. */
type Turn = 0 | 90 | 180 | 270;
const opposite = (turn: Turn): Turn => ((turn + 180) % 360) as Turn;

/** A log on the mill, sawn layer by layer from whichever side is up. Places are from the pith, towards the side that is up. */
class OnTheMill {
  readonly cuts: Omit<Cut, 'order'>[] = [];
  private readonly surface = new Map<Turn, number>();

  constructor(
    radiusIn: number,
    private readonly kerfIn: number,
    private left: readonly Board[],
  ) {
    for (const turn of [0, 90, 180, 270] as const) this.surface.set(turn, radiusIn);
  }

  get isDone(): boolean {
    return this.left.length === 0;
  }

  get count(): number {
    return this.left.length;
  }

  private along(board: Board, turn: Turn): Slice {
    const { left, right, bottom, top } = section(board);
    return { 0: { low: bottom, high: top }, 90: { low: left, high: right }, 180: { low: -top, high: -bottom }, 270: { low: -right, high: -left } }[turn];
  }

  private cut(turn: Turn, at: number, kind: CutKind): void {
    this.cuts.push({ turnDeg: turn, heightIn: at + (this.surface.get(opposite(turn)) ?? 0), kind });
    this.surface.set(turn, at);
  }

  /** The uppermost boards, when one pass takes them all off and nothing else. */
  private layer(turn: Turn, left: readonly Board[]): readonly Board[] {
    const top = left.reduce<Slice | null>((highest, board) => {
      const slice = this.along(board, turn);
      return highest && highest.high >= slice.high ? highest : slice;
    }, null);
    if (!top) return [];
    const upper = left.filter((board) => this.along(board, turn).high > top.low - this.kerfIn + NEAR);
    const lies = (board: Board): boolean => {
      const { low, high } = this.along(board, turn);
      return board.turned === (turn % 180 === 90) && Math.abs(low - top.low) < NEAR && Math.abs(high - top.high) < NEAR;
    };
    return upper.every(lies) ? upper : [];
  }

  /** Whether layer after layer can be taken off from this side until nothing is left. */
  opensWholly(turn: Turn): boolean {
    let left = this.left;
    while (left.length > 0) {
      const layer = this.layer(turn, left);
      if (layer.length === 0) return false;
      left = left.filter((board) => !layer.includes(board));
    }
    return true;
  }

  /** Takes off what comes in whole layers. The last one stays on the bed. */
  peel(turn: Turn): void {
    for (let layer = this.layer(turn, this.left); layer.length > 0; layer = this.layer(turn, this.left)) {
      const { low, high } = this.along(layer[0] as Board, turn);
      if ((this.surface.get(turn) ?? 0) - high > SLIVER_IN) this.cut(turn, high, 'slab');
      const under = low - this.kerfIn;
      if (under + (this.surface.get(opposite(turn)) ?? 0) > SLIVER_IN) this.cut(turn, under, 'board');
      this.left = this.left.filter((board) => !layer.includes(board));
    }
  }

  /** Leaves a face over what is left, where there is wood worth sawing off. */
  face(turn: Turn): void {
    const wanted = Math.max(...this.left.map((board) => this.along(board, turn).high));
    if (this.left.length > 0 && (this.surface.get(turn) ?? 0) - wanted > SLIVER_IN) this.cut(turn, wanted, 'face');
  }
}

/**
 * The cuts of a plan in order, with the turns, the pith levelled. Heights are over the bed: while the log lies on its bark its pith
 * is half the large end's diameter over the bed; after that the flat already cut lies on the bed. The side that is up is sawn as far
 * as its boards come off in whole layers, then the one opposite, then the two beside them, until what is left opens from one side.
 */
export function cutsOf(log: LogShape, kerfIn: number, boards: readonly Board[], quartered: boolean): Cut[] {
  const number = (cuts: readonly Omit<Cut, 'order'>[]): Cut[] => cuts.map((cut, index) => ({ order: index + 1, ...cut }));
  if (boards.length === 0) return [];
  if (quartered) return number(quarterCuts(log, boards, kerfIn));
  const mill = new OnTheMill(largeEnd(log) / 2, kerfIn, boards);
  if (mill.opensWholly(0)) {
    mill.peel(0);
    return number(mill.cuts);
  }
  let before: number;
  do {
    before = mill.count;
    for (const turn of [0, 180, 90, 270] as const) {
      if (mill.isDone) break;
      const wholly = turn !== 180 && mill.opensWholly(turn);
      mill.peel(turn);
      if (!wholly) mill.face(turn);
    }
  } while (!mill.isDone && mill.count < before);
  return number(mill.cuts);
}
