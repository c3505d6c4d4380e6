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

/** Passes from the top down through some layers, to a face when one is wanted. The lowest layer stays on the bed at height 0. */
function passes(layers: readonly Slice[], kerf: number, turnDeg: number, face?: number): Omit<Cut, 'order'>[] {
  const cuts: Omit<Cut, 'order'>[] = [];
  let surface = Infinity;
  for (const { low, high } of layers) {
    if (surface - high > SLIVER_IN) cuts.push({ turnDeg, heightIn: high, kind: 'slab' });
    surface = low - kerf;
    if (low > NEAR) cuts.push({ turnDeg, heightIn: Math.max(0, surface), kind: 'board' });
  }
  if (face !== undefined && Math.abs(surface - face) > NEAR) cuts.push({ turnDeg, heightIn: face, kind: 'face' });
  return cuts;
}

/**
 * Flat boards that lie in the band of the turned ones, and the band's own lower and upper face. A flat board nearer than a kerf belongs
 * to the band: a pass between would take wood from the turned ones.
 */
function bandOf(flat: readonly Board[], turned: readonly Board[], kerf: number): { readonly bottom: number; readonly top: number; readonly cant: readonly Board[] } {
  let bottom = Math.min(...turned.map((board) => section(board).bottom));
  let top = Math.max(...turned.map((board) => section(board).top));
  let cant: readonly Board[] = [];
  for (;;) {
    const within = flat.filter((board) => section(board).top > bottom - kerf + NEAR && section(board).bottom < top + kerf - NEAR);
    bottom = Math.min(bottom, ...within.map((board) => section(board).bottom));
    top = Math.max(top, ...within.map((board) => section(board).top));
    if (within.length === cant.length) return { bottom, top, cant: within };
    cant = within;
  }
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

/**
 * The cuts of a plan in order, with the turns, the pith levelled. Heights are over the bed: while the log lies on its bark its pith
 * is half the large end's diameter over the bed; after that the flat already cut lies on the bed.
 */
export function cutsOf(log: LogShape, kerfIn: number, boards: readonly Board[], quartered: boolean): Cut[] {
  const pith = largeEnd(log) / 2;
  const flat = boards.filter((board) => !board.turned);
  const turned = boards.filter((board) => board.turned);
  const number = (cuts: readonly Omit<Cut, 'order'>[]): Cut[] => cuts.map((cut, index) => ({ order: index + 1, ...cut }));
  if (boards.length === 0) return [];
  if (quartered) return number(quarterCuts(log, boards, kerfIn));
  const fromBark = (board: Board): Slice => ({ low: pith + section(board).bottom, high: pith + section(board).top });
  if (turned.length === 0) return number(passes(slices(flat, fromBark), kerfIn, 0));
  const { bottom, top, cant } = bandOf(flat, turned, kerfIn);
  const aboveBand = flat.filter((board) => section(board).bottom >= top - NEAR);
  const belowBand = flat.filter((board) => section(board).top <= bottom + NEAR);
  const upsideDown = (board: Board): Slice => ({ low: top - section(board).top, high: top - section(board).bottom });
  const onSide = (board: Board): Slice => ({ low: pith + section(board).left, high: pith + section(board).right });
  const cuts = [...passes(slices(aboveBand, fromBark), kerfIn, 0, pith + top), ...passes(slices(belowBand, upsideDown), kerfIn, 180, top - bottom)];
  if (cant.length === 0) return number([...cuts, ...passes(slices(turned, onSide), kerfIn, 90)]);
  const right = Math.max(...cant.map((board) => section(board).right));
  const left = Math.min(...cant.map((board) => section(board).left));
  const onOtherSide = (board: Board): Slice => ({ low: right - section(board).right, high: right - section(board).left });
  const onFlat = (board: Board): Slice => ({ low: section(board).bottom - bottom, high: section(board).top - bottom });
  const cantLayers = slices(cant, onFlat);
  return number([
    ...cuts,
    ...passes(slices(turned.filter((board) => section(board).left >= right), onSide), kerfIn, 90, pith + right),
    ...passes(slices(turned.filter((board) => section(board).right <= left), onOtherSide), kerfIn, 270, right - left),
    ...passes(cantLayers, kerfIn, 0).filter((cut, index) => index > 0 || cut.kind !== 'slab' || Math.abs(cut.heightIn - (top - bottom)) > NEAR),
  ]);
}
