import { type Board, totalBoardFeet } from './board.ts';
import { cutList, type CutListAnswer, type CutListRequest, type Patience, type WantedPiece } from './cut-list.ts';
import { cutsOf } from './cuts.ts';
import { fillRound } from './fill-round.ts';
import { GREEN_FOUR_QUARTER_IN } from './expected.ts';
import { type FlawedLog, soundCore } from './sound-core.ts';
import { type LogShape } from './log-shape.ts';
import type { Mill, Piece } from './pieces.ts';
import { sawPlan, type SawPlan } from './saw-plan.ts';
import { type Shortfall, shortfalls } from './shortfall.ts';
import type { Solver } from './solver.ts';

export interface ListingPlanRequest {
  readonly logs: readonly (FlawedLog & { readonly id: string })[];
  readonly mill: Mill;
  /** Green sizes. */
  readonly pieces: readonly WantedPiece[];
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

/** Jacket boards only, the log sawn through and through. */
const jacket = (core: LogShape, mill: Mill): SawPlan => sawPlan({ log: core, mill, pattern: 'live', pieces: [jacketPiece(core.lengthFt)], effort: JACKET_EFFORT });

/** A plan of the cut list with jacket boards from the wood that the list leaves; their piece is the one after the list's. */
function withJackets(core: LogShape, mill: Mill, plan: SawPlan, pieces: readonly WantedPiece[]): SawPlan {
  if (plan.pattern === 'quartersawn') return plan;
  const piece = jacketPiece(core.lengthFt);
  const more = fillRound(core, mill, plan.boards, piece).map((board) => ({ ...board, piece: pieces.length }));
  if (more.length === 0) return plan;
  const boards = [...plan.boards, ...more];
  return { ...plan, pattern: boards.some((board) => board.turned) ? 'cant' : 'live', boards, boardFeet: totalBoardFeet(boards), value: plan.value + totalBoardFeet(more) * (piece.value ?? 1), cuts: cutsOf(core, mill.kerfIn, boards, false) };
}

/** The boards of a whole listing on one mill: the cut list first, 4/4 jacket boards from the logs it does not need. */
export function listingPlan({ logs, mill, pieces }: ListingPlanRequest, solve: Solver, patience: Patience): ListingPlan {
  const cores = logs.map((log) => ({ id: log.id, core: soundCore(log) }));
  const sound = cores.flatMap(({ id, core }) => (core ? [{ id, ...core }] : []));
  const request: CutListRequest = { logs: sound, mill, pieces };
  const answer = pieces.length > 0 && sound.length > 0 ? cutList(request, solve, patience) : null;
  const jackets = new Map<string, SawPlan>();
  const planned = cores.map(({ id, core }): PlannedLog => {
    if (!core) return { id, core, plan: none('The sweep or the rot leaves no sound wood to plan in.'), use: 'none' };
    const wanted = answer?.plans.find(({ logId }) => logId === id);
    if (wanted && wanted.boards.length > 0) return { id, core, plan: withJackets(core, mill, wanted, pieces), use: 'cut-list' };
    const key = JSON.stringify(core);
    const plan = jackets.get(key) ?? jacket(core, mill);
    jackets.set(key, plan);
    return { id, core, plan, use: plan.boards.length > 0 ? 'jacket' : 'none' };
  });
  const short = answer?.covered.filter((each) => each.short > 0) ?? [];
  const thin = answer && short.length > 0 && mill.kerfIn > THIN_KERF_IN + 0.02 ? cutList({ ...request, mill: { ...mill, kerfIn: THIN_KERF_IN } }, solve, patience) : null;
  return {
    logs: planned,
    list: answer,
    shortfalls: shortfalls(request, short),
    thinner: answer && thin && thin.boardFeetShort < answer.boardFeetShort - 1e-6 ? { kerfIn: THIN_KERF_IN, boardFeetShort: thin.boardFeetShort } : null,
  };
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
