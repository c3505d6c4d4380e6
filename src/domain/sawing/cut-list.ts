import { leastShort, leastCost } from './cut-list-bound.ts';
import { Pool } from './cut-list-patterns.ts';
import { boardFeetShort, choose } from './cut-list-choice.ts';
import { assembled, type LogPlan } from './cut-list-plans.ts';
import { type Demand, demandOf } from './demand.ts';
import { cubicFeet, type LogShape } from './log-shape.ts';
import type { PieceKind } from './piece-kind.ts';
import type { Mill } from './pieces.ts';
import type { Pattern } from './saw-plan.ts';
import type { Solver } from './solver.ts';

export interface ListedShape extends LogShape {
  readonly id: string;
  /** What its use counts beside the others', for the same pieces made; its cubic feet when left out. */
  readonly cost?: number | undefined;
}

/** A wanted size, green, and how many. */
export interface WantedPiece {
  readonly id: string;
  readonly thicknessIn: number;
  readonly widthIn: number;
  readonly lengthFt: number;
  readonly count: number;
  /** How it must lie in its log; a board when left out. A slab's width is the least that both of its faces have. */
  readonly kind?: PieceKind | undefined;
}

/** Logs of which only so many may be used together: ways to cut one stem that overlap. */
export interface Together {
  readonly ids: readonly string[];
  readonly most: number;
}

export interface CutListRequest {
  readonly logs: readonly ListedShape[];
  readonly mill: Mill;
  /** `best` when left out. */
  readonly pattern?: Pattern | 'best' | undefined;
  readonly waneAllowanceIn?: number | undefined;
  readonly pieces: readonly WantedPiece[];
  readonly together?: readonly Together[] | undefined;
}

export interface Covered {
  readonly id: string;
  readonly made: number;
  readonly short: number;
}

export interface CutListAnswer {
  readonly covered: readonly Covered[];
  /** A plan for every log, in the order given; without boards where the log is not needed or gives nothing, with the reason. */
  readonly plans: readonly LogPlan[];
  /** Board feet in the plans beyond what was asked for. Plans hold asked-for boards only, so that more of a size than is wanted never stands in the place of other lumber: this is 0. */
  readonly surplusBoardFeet: number;
  readonly boardFeetShort: number;
  /** No plans of these patterns leave less board feet short. */
  readonly boundBoardFeetShort: number;
  readonly gapBoardFeet: number;
  /** Neither fewer board feet short nor, with as few, less log volume is possible. */
  readonly provenBest: boolean;
}

/** How long to look: each answers whether there is still time to begin one more thing. */
export interface Patience {
  /** For planning logs at new prices. */
  readonly toPlan: () => boolean;
  /** Seconds that one solving may take. */
  readonly solverSeconds: number;
  /** As much time again for a second question; without it, what is left of the first. */
  readonly anew?: () => Patience;
}

/** Rounds of planning every log at the prices of the round before. */
const MOST_ROUNDS = 8;
const FEW_SHAPES = 6;
const NEAR = 1e-6;

/**
 * Chooses a plan for each log so that the wanted pieces are covered: least board feet short first, then least cubic feet of logs
 * used. Timbers round the heart, timbers free of it and slabs are planned with the boards that the same log gives beside them. Plans are made at prices that the solver puts on the pieces (column generation); which plan each log takes is then solved in
 * whole numbers over all plans made. The bound holds for every plan of the pattern, made or not.
 * @param solve a solver of linear models in whole numbers. @param patience how long to look; with no time at all, still an answer.
 */
export function cutList(request: CutListRequest, solve: Solver, patience: Patience): CutListAnswer {
  const demand = demandOf(request.pieces);
  const pool = new Pool(request, demand);
  pool.sharpen(patience.toPlan);
  pool.planAt(demand.map(({ boardFeet }) => boardFeet), patience.toPlan);
  pool.planOneByOne(patience.toPlan);
  // Of few logs, how many of each size they hold alone makes the bound sharp.
  if (pool.shapes.length <= FEW_SHAPES) for (let size = 0; size < demand.length && patience.toPlan(); size++) pool.planAt(demand.map(({ boardFeet }, index) => (index === size ? boardFeet : 0)), patience.toPlan);
  for (let round = 0; round < MOST_ROUNDS && patience.toPlan(); round++) {
    const prices = pool.pricesBy(solve, patience.solverSeconds);
    if (!prices || !pool.planAt(prices, patience.toPlan)) break;
  }
  const choice = choose(pool, solve, patience.solverSeconds);
  const short = boardFeetShort(demand, choice);
  const least = leastShort(pool, demand, solve, patience.solverSeconds);
  const bound = short - least < NEAR ? short : least;
  const plans = assembled(request, pool, choice, demand);
  const proven = short <= bound + NEAR && usedCost(request.logs, plans) <= leastCost(pool, demand, choice.short, solve, patience.solverSeconds) + NEAR;
  const covered = coveredBy(request.pieces, demand, choice.short);
  const made = covered.reduce((sum, each, index) => sum + each.made * feetOf(request.pieces[index]), 0);
  const surplus = plans.reduce((sum, { boards }) => sum + boards.reduce((all, { piece }) => all + (demand[piece]?.boardFeet ?? 0), 0), 0) - made;
  return {
    covered,
    plans,
    surplusBoardFeet: Math.abs(surplus) < NEAR ? 0 : surplus,
    boardFeetShort: short,
    boundBoardFeetShort: bound,
    gapBoardFeet: short - bound,
    provenBest: proven,
  };
}

const feetOf = (piece: WantedPiece | undefined): number => (piece ? (piece.thicknessIn * piece.widthIn * piece.lengthFt) / 12 : 0);

const usedCost = (logs: readonly ListedShape[], plans: readonly LogPlan[]): number =>
  logs.reduce((sum, log, index) => sum + ((plans[index]?.boards.length ?? 0) > 0 ? (log.cost ?? cubicFeet(log)) : 0), 0);

/** Shares what is short of a size among the pieces that ask for it, the last in the list first. */
function coveredBy(pieces: readonly WantedPiece[], demand: readonly Demand[], short: readonly number[]): Covered[] {
  const left = [...short];
  const covered = [...pieces].reverse().map((piece): Covered => {
    const size = demand.findIndex(({ ids }) => ids.includes(piece.id));
    const missing = Math.min(piece.count, left[size] ?? 0);
    left[size] = (left[size] ?? 0) - missing;
    return { id: piece.id, made: piece.count - missing, short: missing };
  });
  return covered.reverse();
}
