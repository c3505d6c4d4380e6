import { formatFeet, formatInches } from '../measure.ts';
import { type Board, totalBoardFeet } from './board.ts';
import { cutList, type CutListAnswer, type CutListRequest, type Patience, type WantedPiece } from './cut-list.ts';
import type { LogPlan } from './cut-list-plans.ts';
import { cutsOf } from './cuts.ts';
import { demandOf } from './demand.ts';
import { fillRound } from './fill-round.ts';
import { GREEN_FOUR_QUARTER_IN } from './expected.ts';
import { type FlawedLog, soundCore } from './sound-core.ts';
import { type LogShape } from './log-shape.ts';
import type { Mill, Piece } from './pieces.ts';
import { type Pattern, sawPlan, type SawPlan } from './saw-plan.ts';
import { type Shortfall, shortfalls } from './shortfall.ts';
import { leastLogOf } from './special-pieces.ts';
import type { Solver } from './solver.ts';

export interface ListingPlanRequest {
  readonly logs: readonly (FlawedLog & { readonly id: string })[];
  readonly mill: Mill;
  /** Green sizes. */
  readonly pieces: readonly WantedPiece[];
  /** How boards are sawn; `best` when left out. Timbers and slabs have their own ways. */
  readonly pattern?: Pattern | 'best' | undefined;
}

/** What one log of a listing gives. */
export interface PlannedLog {
  readonly id: string;
  /** The straight, sound wood the plan lies in; null when there is none. */
  readonly core: LogShape | null;
  readonly plan: SawPlan;
  /** For the cut list, or jacket boards where the list does not need the log. */
  readonly use: 'cut-list' | 'jacket' | 'none';
}

/** Board feet that a tally would count: pieces at the size as written, jacket boards at 4/4. */
export function tallyBoardFeet({ logs, list }: ListingPlan, pieces: readonly (WrittenSize & { readonly id: string })[]): number {
  const made = new Map(list?.covered.map((each) => [each.id, each.made]));
  const wanted = pieces.reduce((sum, { id, thicknessIn, widthIn, lengthFt }) => sum + ((made.get(id) ?? 0) * thicknessIn * widthIn * lengthFt) / 12, 0);
  const jackets = logs.flatMap(({ plan, use }) => plan.boards.filter((board) => use === 'jacket' || board.piece >= pieces.length));
  return wanted + totalBoardFeet(jackets) / GREEN_FOUR_QUARTER_IN;
}

interface WrittenSize {
  readonly thicknessIn: number;
  readonly widthIn: number;
  readonly lengthFt: number;
}

export interface ListingPlan {
  readonly logs: readonly PlannedLog[];
  /** Null when nothing is wanted. */
  readonly list: Omit<CutListAnswer, 'plans'> | null;
  readonly shortfalls: readonly Shortfall[];
  /** A thin band that leaves fewer board feet short; null when it would not, or nothing is short. */
  readonly thinner: { readonly kerfIn: number; readonly boardFeetShort: number } | null;
}

/** A thin band, measured over the set (product rule: about 3/32 in). */
const THIN_KERF_IN = 3 / 32;
const JACKET_EFFORT = 8;

const none = (reason: string): SawPlan => ({ pattern: 'live', boards: [], boardFeet: 0, value: 0, upperBoundValue: 0, boundCovers: '', cuts: [], reason });

/** 4/4 boards of any width; their worth is their board feet at 4/4, which is what a tally counts. */
function jacketPiece(logFt: number): Piece {
  const whole = Math.floor(logFt);
  const lengthsFt = [whole, whole - 2, whole - 4].filter((feet, index) => feet >= 4 || index === 0);
  return { thicknessIn: GREEN_FOUR_QUARTER_IN, value: 1 / GREEN_FOUR_QUARTER_IN, lengthsFt };
}

/** Jacket boards only, sawn through and through unless another pattern is asked for. */
const jacket = (core: LogShape, mill: Mill, pattern: Pattern): SawPlan => sawPlan({ log: core, mill, pattern, pieces: [jacketPiece(core.lengthFt)], effort: JACKET_EFFORT });

/** A plan of the cut list with jacket boards from the wood that the list leaves; their piece is the one after the list's. */
function withJackets(core: LogShape, mill: Mill, plan: SawPlan, pieces: readonly WantedPiece[]): SawPlan {
  if (plan.pattern === 'quartersawn') return plan;
  const piece = jacketPiece(core.lengthFt);
  const more = fillRound(core, mill, plan.boards, piece).map((board) => ({ ...board, piece: pieces.length }));
  if (more.length === 0) return plan;
  const boards = [...plan.boards, ...more];
  return { ...plan, pattern: boards.some((board) => board.turned) ? 'cant' : 'live', boards, boardFeet: totalBoardFeet(boards), value: plan.value + totalBoardFeet(more) * (piece.value ?? 1), cuts: cutsOf(core, mill.kerfIn, boards, false) };
}

const isSpecial = ({ kind }: WantedPiece): boolean => kind !== undefined && kind !== 'board';

/** What would mend a timber or slab that is short. */
function mendOfKind(piece: WantedPiece, short: number, mill: Mill): Shortfall {
  const least = leastLogOf(piece, mill);
  const mend = least === null ? 'A smaller section: no log up to 60 in gives this one on this mill.' : `${short === 1 ? 'One more log' : 'More logs, each'} at least ${formatInches(least)} at the small end and ${formatFeet(Math.max(4, piece.lengthFt))} long.`;
  return { id: piece.id, short, mend: [mend] };
}

/** The boards of the cut list's plans by piece: those of one size and kind go to the pieces that ask for them in their order. */
export function namedByPiece(plans: readonly LogPlan[], pieces: readonly WantedPiece[]): Map<string, Board[]> {
  const left = pieces.map(({ count }) => count);
  const sizes = demandOf(pieces).map(({ ids }) => ids.map((id) => pieces.findIndex((piece) => piece.id === id)));
  return new Map(plans.map(({ logId, boards }) => [logId, boards.map((board): Board => {
    const places = sizes[board.piece] ?? [];
    const piece = places.find((place) => (left[place] ?? 0) > 0) ?? places[0] ?? 0;
    left[piece] = (left[piece] ?? 0) - 1;
    return { ...board, piece };
  })]));
}

/** The boards of a whole listing on one mill: the pieces of the cut list, then 4/4 jacket boards from what is left. */
export function listingPlan({ logs, mill, pieces, pattern = 'best' }: ListingPlanRequest, solve: Solver, patience: Patience): ListingPlan {
  const cores = logs.map((log) => ({ id: log.id, core: soundCore(log) }));
  const sound = cores.flatMap(({ id, core }) => (core ? [{ id, ...core }] : []));
  const request: CutListRequest = { logs: sound, mill, pieces, pattern };
  const answer = pieces.length > 0 ? cutList(request, solve, patience) : null;
  const named = namedByPiece(answer?.plans ?? [], pieces);
  const jackets = new Map<string, SawPlan>();
  const planned = cores.map(({ id, core }): PlannedLog => {
    if (!core) return { id, core, plan: none('The sweep or the rot leaves no sound wood to plan in.'), use: 'none' };
    const wanted = answer?.plans.find(({ logId }) => logId === id);
    const boards = named.get(id) ?? [];
    if (wanted && boards.length > 0) return { id, core, plan: withJackets(core, mill, { ...wanted, boards }, pieces), use: 'cut-list' };
    const key = JSON.stringify(core);
    const plan = jackets.get(key) ?? jacket(core, mill, pattern === 'best' ? 'live' : pattern);
    jackets.set(key, plan);
    return { id, core, plan, use: plan.boards.length > 0 ? 'jacket' : 'none' };
  });
  if (!answer) return { logs: planned, list: null, shortfalls: [], thinner: null };
  const short = answer.covered.filter((each) => each.short > 0);
  const thin = short.length > 0 && mill.kerfIn > THIN_KERF_IN + 0.02 ? cutList({ ...request, mill: { ...mill, kerfIn: THIN_KERF_IN } }, solve, patience.anew?.() ?? patience) : null;
  const { plans: _, ...list } = answer;
  return {
    logs: planned,
    list,
    shortfalls: mends(request, short),
    thinner: thin && thin.boardFeetShort < answer.boardFeetShort - 1e-6 ? { kerfIn: THIN_KERF_IN, boardFeetShort: thin.boardFeetShort } : null,
  };
}

/** For every piece that is short, in the order of the list, what would mend it. */
export function mends(request: CutListRequest, short: readonly { readonly id: string; readonly short: number }[]): Shortfall[] {
  return short.flatMap((each) => {
    const piece = request.pieces.find(({ id }) => id === each.id);
    if (!piece) return [];
    return isSpecial(piece) ? [mendOfKind(piece, each.short, request.mill)] : shortfalls(request, [each]);
  });
}

/** Boards of one plan by size, the largest first: for tables and cut sheets. */
export function boardsBySize(boards: readonly Board[]): { readonly thicknessIn: number; readonly widthIn: number; readonly lengthFt: number; readonly count: number; readonly boardFeet: number }[] {
  const found = new Map<string, { thicknessIn: number; widthIn: number; lengthFt: number; count: number; boardFeet: number }>();
  for (const { thicknessIn, widthIn, lengthFt, boardFeet } of boards) {
    const key = `${thicknessIn} ${widthIn} ${lengthFt}`;
    const same = found.get(key) ?? { thicknessIn, widthIn, lengthFt, count: 0, boardFeet: 0 };
    same.count += 1;
    same.boardFeet += boardFeet;
    found.set(key, same);
  }
  return [...found.values()].sort((a, b) => b.thicknessIn - a.thicknessIn || b.widthIn - a.widthIn || b.lengthFt - a.lengthFt);
}
