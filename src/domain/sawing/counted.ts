import { type Board, section, totalValue } from './board.ts';
import { acrossLog } from './layers.ts';
import { boardsOfLayers } from './live.ts';
import { type Piece, type Stock, stockOf } from './pieces.ts';
import { unitsUp } from './units.ts';

/** Boards of each piece. */
export function counts(boards: readonly Board[], pieces: readonly Piece[]): number[] {
  const found = pieces.map(() => 0);
  for (const board of boards) found[board.piece] = (found[board.piece] ?? 0) + 1;
  return found;
}

const isOver = (used: readonly number[], pieces: readonly Piece[]): boolean => pieces.some((piece, index) => piece.count !== undefined && (used[index] as number) > piece.count);

/** Takes boards beyond their count away, the least valuable first, and fills their strips with sizes that have no count. */
function withinCounts(boards: readonly Board[], pieces: readonly Piece[], free: Stock): Board[] {
  const left = pieces.map((piece) => piece.count ?? Infinity);
  return [...boards]
    .sort((a, b) => b.boardFeet - a.boardFeet)
    .flatMap((board) => {
      const rest = left[board.piece] ?? 0;
      left[board.piece] = rest - 1;
      return rest > 0 ? [board] : refill(board, free);
    });
}

function refill(board: Board, free: Stock): Board[] {
  const { left, right, bottom, top } = section(board);
  const [from, to, at] = board.turned ? [bottom, top, left] : [left, right, bottom];
  const group = free.groups.find((each) => each.thickness === unitsUp(board.thicknessIn));
  if (!group) return [];
  const rule = acrossLog(free, unitsUp(from), unitsUp(from) + unitsUp(to - from));
  return boardsOfLayers(free, rule, [{ group, at: unitsUp(at) }], board.turned);
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
 */
export function withCounts(stock: Stock, waneIn: number, solve: (stock: Stock) => Solved, rounds: number): Solved {
  const { log, mill, pieces } = stock;
  const prices = pieces.map(() => 0);
  const first = solve(stock);
  if (!isOver(counts(first.boards, pieces), pieces)) return first;
  const free = stockOf(log, mill, pieces.map((piece) => (piece.count === undefined ? piece : { ...piece, count: 0 })), waneIn);
  const unlimited = solve(free);
  let best: readonly Board[] = unlimited.boards;
  let bound = Infinity;
  let round: Solved = first;
  for (let turn = 1; ; turn++) {
    const used = counts(round.boards, pieces);
    const offered = round.bound + pieces.reduce((sum, piece, index) => sum + (prices[index] as number) * (piece.count ?? 0), 0);
    bound = Math.min(bound, offered);
    const kept = withinCounts(round.boards, pieces, free);
    if (totalValue(kept, pieces) > totalValue(best, pieces) + 1e-9) best = kept;
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
