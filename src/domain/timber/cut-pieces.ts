import { tidy } from './rounding.ts';

/** Boards of one length at hand, after drying and planing. */
export interface BoardAtHand {
  readonly id: string;
  readonly lengthIn: number;
  readonly count: number;
}

/** A piece of the project: a finished length, and how many. */
export interface PieceToCut {
  readonly id: string;
  readonly lengthIn: number;
  readonly count: number;
}

/** One board with what is cut from it, in order, and what is left. */
export interface CutBoard {
  readonly boardId: string;
  readonly lengthIn: number;
  readonly pieces: readonly string[];
  readonly offcutIn: number;
}

export interface CutPlan {
  readonly boards: readonly CutBoard[];
  /** Pieces that no board is left for. */
  readonly short: readonly { readonly id: string; readonly count: number }[];
  /** Length of pieces made, inches. */
  readonly madeIn: number;
  /** Length of the boards that are cut into, inches. */
  readonly usedIn: number;
  /** Whether the search was finished: no plan makes more, or as much from less board. */
  readonly provenBest: boolean;
}

/** More steps than this are not searched: the best plan found so far is given and says so. */
const MOST_STEPS = 30_000;

interface Search {
  readonly lengths: readonly number[];
  readonly kerfIn: number;
  best: { readonly madeIn: number; readonly usedIn: number; readonly cuts: readonly (readonly number[])[] };
  steps: number;
  readonly seen: Map<string, { madeIn: number; usedIn: number }>;
}

/** Every fullest way to fill one board: no further piece fits beside. Pieces by index, longest first. */
function fillings(roomIn: number, lengths: readonly number[], left: readonly number[], kerfIn: number): number[][] {
  const found: number[][] = [];
  const taken = left.map(() => 0);
  const fits = (length: number, room: number): boolean => length <= room + 1e-9;
  const go = (from: number, room: number): void => {
    if (from === lengths.length) {
      const open = lengths.some((length, index) => (taken[index] ?? 0) < (left[index] ?? 0) && fits(length, room));
      if (!open && taken.some((count) => count > 0)) found.push([...taken]);
      return;
    }
    const length = lengths[from] ?? 0;
    // A board of exact length needs no last cut: the saw's kerf falls beyond its end.
    let most = 0;
    while (most < (left[from] ?? 0) && fits(length * (most + 1) + kerfIn * most, room)) most += 1;
    for (let count = most; count >= 0; count -= 1) {
      taken[from] = count;
      go(from + 1, tidy(room - (length + kerfIn) * count));
    }
    taken[from] = 0;
  };
  go(0, roomIn);
  return found;
}

function search(state: Search, boards: readonly number[], at: number, left: readonly number[], madeIn: number, usedIn: number, cuts: readonly (readonly number[])[]): void {
  const { best } = state;
  if (madeIn > best.madeIn + 1e-9 || (madeIn > best.madeIn - 1e-9 && usedIn < best.usedIn - 1e-9)) state.best = { madeIn, usedIn, cuts: [...cuts] };
  if (at === boards.length || state.steps >= MOST_STEPS) return;
  state.steps += 1;
  const wanted = left.reduce((sum, count, index) => sum + count * (state.lengths[index] ?? 0), 0);
  const room = boards.slice(at).reduce((sum, length) => sum + length, 0);
  const reach = madeIn + Math.min(wanted, room);
  // Nothing below can make more; or as much, but only from at least as much board.
  if (reach < state.best.madeIn - 1e-9 || (reach < state.best.madeIn + 1e-9 && usedIn + Math.max(0, state.best.madeIn - madeIn) >= state.best.usedIn - 1e-9)) return;
  const key = `${at}|${left.join(',')}`;
  const before = state.seen.get(key);
  if (before && before.madeIn >= madeIn - 1e-9 && before.usedIn <= usedIn + 1e-9) return;
  state.seen.set(key, { madeIn, usedIn });
  const length = boards[at] ?? 0;
  for (const filling of fillings(length, state.lengths, left, state.kerfIn)) {
    const made = filling.reduce((sum, count, index) => sum + count * (state.lengths[index] ?? 0), 0);
    search(state, boards, at + 1, left.map((count, index) => count - (filling[index] ?? 0)), madeIn + made, usedIn + length, [...cuts, filling]);
  }
  search(state, boards, at + 1, left, madeIn, usedIn, [...cuts, left.map(() => 0)]);
}

/**
 * Cuts boards to pieces along their length: the greatest length of pieces first, then the least length of boards cut into. Exact, by
 * branch and bound over every fullest filling of each board, shortest board first; a long list that is not searched to its end says so.
 * @param kerfIn width of the saw's cut between two pieces, inches
 */
export function cutPieces(boards: readonly BoardAtHand[], pieces: readonly PieceToCut[], kerfIn: number): CutPlan {
  const each = boards.flatMap(({ id, lengthIn, count }) => Array.from({ length: count }, () => ({ id, lengthIn }))).sort((a, b) => a.lengthIn - b.lengthIn);
  const wanted = [...pieces].sort((a, b) => b.lengthIn - a.lengthIn);
  const state: Search = { lengths: wanted.map(({ lengthIn }) => lengthIn), kerfIn, best: { madeIn: 0, usedIn: 0, cuts: [] }, steps: 0, seen: new Map() };
  search(state, each.map(({ lengthIn }) => lengthIn), 0, wanted.map(({ count }) => count), 0, 0, []);
  const made = wanted.map((_, index) => state.best.cuts.reduce((sum, filling) => sum + (filling[index] ?? 0), 0));
  const cut = state.best.cuts.flatMap((filling, at): CutBoard[] => {
    const board = each[at];
    const names = filling.flatMap((count, index) => Array.from({ length: count }, () => wanted[index]?.id ?? ''));
    if (!board || names.length === 0) return [];
    const taken = filling.reduce((sum, count, index) => sum + count * (wanted[index]?.lengthIn ?? 0), 0);
    return [{ boardId: board.id, lengthIn: board.lengthIn, pieces: names, offcutIn: Math.max(0, tidy(board.lengthIn - taken - kerfIn * names.length)) }];
  });
  return {
    boards: cut,
    short: wanted.flatMap(({ id, count }, index) => (count > (made[index] ?? 0) ? [{ id, count: count - (made[index] ?? 0) }] : [])),
    madeIn: state.best.madeIn,
    usedIn: state.best.usedIn,
    provenBest: state.steps < MOST_STEPS,
  };
}
