import { type Board, boardOf, section, totalValue } from './board.ts';
import { fillRun, greedyLayers } from './greedy.ts';
import { distances } from './layers.ts';
import { type Piece, type Stock, stockOf } from './pieces.ts';
import { unitsUp } from './units.ts';

/** Boards of each piece. */
export function counts(boards: readonly Board[], pieces: readonly Piece[]): number[] {
  const found = pieces.map(() => 0);
  for (const board of boards) found[board.piece] = (found[board.piece] ?? 0) + 1;
  return found;
}

const isOver = (used: readonly number[], pieces: readonly Piece[]): boolean => pieces.some((piece, index) => piece.count !== undefined && (used[index] as number) > piece.count);

/** Takes boards beyond their count away, the least valuable first, and fills their strips with what may still be cut. */
function withinCounts(boards: readonly Board[], stock: Stock): Board[] {
  const left = stock.pieces.map((piece) => piece.count ?? Infinity);
  const over: Board[] = [];
  const kept = [...boards]
    .sort((a, b) => b.boardFeet - a.boardFeet)
    .filter((board) => {
      const rest = left[board.piece] ?? 0;
      if (rest <= 0) over.push(board);
      else left[board.piece] = rest - 1;
      return rest > 0;
    });
  return [...kept, ...over.flatMap((board) => refill(board, stock, left))];
}

function refill(board: Board, stock: Stock, left: number[]): Board[] {
  const { left: near, right, bottom, top } = section(board);
  const [from, to, at] = board.turned ? [bottom, top, near] : [near, right, bottom];
  const group = stock.groups.find((each) => each.thickness === unitsUp(board.thicknessIn));
  if (!group) return [];
  const start = unitsUp(from);
  const layer = { group, at: unitsUp(at) };
  return fillRun(stock, group, distances(layer).far, start, start + unitsUp(to - from), left).map((each) => boardOf(stock, each, layer.at, board.turned));
}

export interface Solved {
  readonly boards: readonly Board[];
  readonly bound: number;
}

/**
 * Keeps to the counts of pieces. Boards of a piece that is used too often are charged a price and the log planned again, until the
 * counts hold; each round gives a bound (plan at those prices + prices × counts) and, with the boards over count replaced, a plan.
 * @param stock the log and the sizes, without prices.
 * @param solve plans one stock without counts.
 * @param inLayers whether plain flat layers are a plan of the pattern.
 */
export function withCounts(stock: Stock, waneIn: number, solve: (stock: Stock) => Solved, rounds: number, inLayers: boolean): Solved {
  const { log, mill, pieces } = stock;
  const prices = pieces.map(() => 0);
  // All that the counts allow: where that fits in plain layers there is nothing to look for.
  const ofOne = (piece: number): number => stock.groups.reduce((most, group) => group.widths.reduce((more, { choices }) => choices.reduce((value, choice) => (choice.piece === piece ? Math.max(value, choice.value) : value), more), most), 0);
  const allowed = pieces.reduce((sum, piece, index) => sum + (piece.count === undefined ? 0 : piece.count * ofOne(index)), 0);
  const counted = pieces.every((piece) => piece.count !== undefined);
  const inPlainLayers = inLayers && !pieces.every((piece) => piece.count === undefined) ? greedyLayers(stock) : [];
  if (counted && inPlainLayers.length > 0 && totalValue(inPlainLayers, pieces) >= allowed - 1e-9) return { boards: inPlainLayers, bound: allowed };
  const first = solve(stock);
  if (!isOver(counts(first.boards, pieces), pieces)) return first;
  const free = stockOf(log, mill, pieces.map((piece) => (piece.count === undefined ? piece : { ...piece, count: 0 })), waneIn);
  const unlimited = solve(free);
  let best: readonly Board[] = unlimited.boards;
  const better = (boards: readonly Board[]): void => {
    if (totalValue(boards, pieces) > totalValue(best, pieces) + 1e-9) best = boards;
  };
  better(inPlainLayers);
  let bound = unlimited.bound + allowed;
  let round: Solved = first;
  for (let turn = 1; ; turn++) {
    const used = counts(round.boards, pieces);
    const offered = round.bound + pieces.reduce((sum, piece, index) => sum + (prices[index] as number) * (piece.count ?? 0), 0);
    bound = Math.min(bound, offered);
    better(withinCounts(round.boards, stock));
    const value = totalValue(best, pieces);
    if (turn > rounds || bound <= value + 1e-9) break;
    const misses = pieces.map((piece, index) => (piece.count === undefined ? 0 : (used[index] as number) - piece.count)).map((miss, index) => (miss < 0 && prices[index] === 0 ? 0 : miss));
    const norm = misses.reduce((sum, miss) => sum + miss ** 2, 0);
    if (norm === 0) break;
    const step = ((offered - value) / norm) * (turn <= 4 ? 1 : 0.6);
    misses.forEach((miss, index) => (prices[index] = Math.max(0, (prices[index] as number) + step * miss)));
    round = solve(stockOf(log, mill, pieces, waneIn, prices));
  }
  // What may be cut within the counts at all bounds the value as well.
  return { boards: best, bound: Math.max(bound, totalValue(best, pieces)) };
}
