import { type Board, totalBoardFeet, totalValue } from './board.ts';
import { areaBound, BOUND_COVERS } from './bound.ts';
import { cantPlan, QUICK, THOROUGH } from './cant.ts';
import { type Solved, withCounts } from './counted.ts';
import { type Cut, cutsOf } from './cuts.ts';
import { flatStack, livePlan } from './live.ts';
import type { LogShape } from './log-shape.ts';
import type { Stack } from './layers.ts';
import { type Mill, type Piece, roomierStock, type Stock, stockOf, withFewerLengths, workOf } from './pieces.ts';
import { quartersawnPlan } from './quartersawn.ts';
import { inches } from './units.ts';

export type Pattern = 'live' | 'cant' | 'quartersawn';
export const PATTERNS: readonly Pattern[] = ['live', 'cant', 'quartersawn'];

export interface SawPlanRequest {
  readonly log: LogShape;
  readonly mill: Mill;
  readonly pattern: Pattern | 'best';
  readonly pieces: readonly Piece[];
  /** How far a board's corner may stand out of the wood, in. */
  readonly waneAllowanceIn?: number | undefined;
  /** Bands examined for a cant: see `THOROUGH` and `QUICK` in `cant.ts`. */
  readonly effort?: number | undefined;
}

export interface SawPlan {
  /** The pattern asked for; for `best`, the one that won. */
  readonly pattern: Pattern;
  readonly boards: readonly Board[];
  readonly boardFeet: number;
  readonly value: number;
  readonly upperBoundValue: number;
  /** What the upper bound covers, in words. */
  readonly boundCovers: string;
  readonly cuts: readonly Cut[];
  /** Why there are no boards. */
  readonly reason?: string;
}

/** Plans made on one stock share the flat layers. */
export class Planner {
  private flats: Stack | undefined;

  constructor(
    private readonly stock: Stock,
    private readonly effort: number,
  ) {}

  /** The best boards of one pattern, counts left aside, and a bound for it. Quartersawn boards worth no more than `enough` are left out. */
  solve(pattern: Pattern, enough = 0): Solved {
    const { stock } = this;
    if (pattern === 'quartersawn') return quartersawnPlan(stock, enough);
    this.flats ??= flatStack(stock);
    const live = this.flats.above(-stock.reach);
    if (pattern === 'live') return { boards: livePlan(stock, this.flats), bound: live };
    const most = areaBound(stock);
    // Very many thicknesses in a very large log: the live plan stands, under a bound that covers every cant too.
    if (stock.groups.length * inches(stock.reach) > MOST_CANT_WORK) return { boards: livePlan(stock, this.flats), bound: most };
    const { boards, bound } = cantPlan(stock, this.flats, live, this.effort);
    const found = boards.length > 0 ? boards : livePlan(stock, this.flats);
    if (stock.oneLength) return { boards: found, bound: Math.min(bound, most) };
    // Of several lengths: no more than when every board had the longest one's worth and the shortest one's room.
    const roomy = roomierStock(stock);
    const roomyFlats = flatStack(roomy);
    const relaxed = cantPlan(roomy, roomyFlats, live, Math.ceil(this.effort / 2)).bound;
    return { boards: found, bound: Math.max(live, Math.min(most, Math.max(relaxed, roomyFlats.above(-roomy.reach)))) };
  }
}

const COUNT_ROUNDS = 14;
/** Logs up to this diameter are searched at the full length; each band of a larger one takes longer, and there are more of them. */
const FULL_SEARCH_IN = 21;
/** Work (see `workOf`) up to which the search is at its full length, and the most that is taken on. */
const ORDINARY_WORK = 2000;
const MOST_WORK = 30_000;
/** Thicknesses times radius in inches beyond which no cant is searched. */
const MOST_CANT_WORK = 320;

/** Why nothing can be cut, or null when it is worth planning. */
function hindrance({ log, mill, pieces }: SawPlanRequest): string | null {
  if (mill.longestFt !== undefined && log.lengthFt > mill.longestFt + 1e-9) return `This log is ${log.lengthFt} ft long and the mill takes logs up to ${mill.longestFt} ft.`;
  if (pieces.length === 0) return 'No sizes were asked for.';
  return null;
}

const empty = (pattern: Pattern | 'best', reason: string): SawPlan => ({
  pattern: pattern === 'best' ? 'live' : pattern,
  boards: [],
  boardFeet: 0,
  value: 0,
  upperBoundValue: 0,
  boundCovers: BOUND_COVERS[pattern],
  cuts: [],
  reason,
});

/**
 * The most valuable boards of one log on one mill, within a pattern, and a bound that no plan of the pattern passes.
 * Sizes, kerf and places are exact to 1/4000 in; only the faces of a cant are searched on a grid, of 1/32 in.
 * All lengths are green; diameters inside bark. Never throws: what cannot be sawn comes back without boards and with a reason.
 */
export function sawPlan(request: SawPlanRequest): SawPlan {
  const { log, mill, pieces, pattern, waneAllowanceIn = 0, effort = THOROUGH } = request;
  const hindered = hindrance(request);
  if (hindered !== null) return empty(pattern, hindered);
  const full = stockOf(log, mill, pieces, waneAllowanceIn);
  const work = workOf(full);
  const fewer = withFewerLengths(pieces, log.lengthFt, work, MOST_WORK);
  const whole = fewer === pieces ? full : stockOf(log, mill, fewer, waneAllowanceIn);
  const share = Math.max(0.05, Math.min(1, ORDINARY_WORK / workOf(whole), (FULL_SEARCH_IN / (2 * inches(whole.reach))) ** 4));
  const planners = new Map<Stock, Planner>();
  const plannerOf = (stock: Stock): Planner => {
    const planner = planners.get(stock) ?? new Planner(stock, Math.ceil((stock === whole ? effort : Math.min(effort, QUICK)) * share));
    planners.set(stock, planner);
    return planner;
  };
  const rounds = Math.max(3, Math.ceil(COUNT_ROUNDS * share));
  // Of several patterns a later one has to be worth more; counts may turn that round, so with counts every pattern is made.
  const counted = pieces.some((piece) => piece.count !== undefined);
  let had = 0;
  const tried = (pattern === 'best' ? PATTERNS : [pattern]).map((each) => {
    const solved = withCounts(whole, waneAllowanceIn, (stock) => plannerOf(stock).solve(each, counted ? 0 : had), rounds, each !== 'quartersawn');
    had = Math.max(had, totalValue(solved.boards, pieces));
    return { pattern: each, ...solved };
  });
  const won = tried.reduce((best, each) => (totalValue(each.boards, pieces) > totalValue(best.boards, pieces) + 1e-9 ? each : best));
  if (won.boards.length === 0) return { ...empty(pattern, nothingFits(request)), upperBoundValue: Math.max(0, ...tried.map((each) => each.bound)) };
  const value = totalValue(won.boards, pieces);
  // With fewer lengths the patterns' own bounds would leave plans out.
  const bound = fewer === pieces ? Math.max(...tried.map((each) => each.bound)) : areaBound(full);
  return {
    pattern: won.pattern,
    boards: won.boards,
    boardFeet: totalBoardFeet(won.boards),
    value,
    upperBoundValue: Math.max(value, bound),
    boundCovers: BOUND_COVERS[pattern],
    cuts: cutsOf(log, mill.kerfIn, won.boards, won.pattern === 'quartersawn'),
  };
}

/** Says which limit stands in the way when no board can be cut. */
function nothingFits({ log, mill, pieces, pattern }: SawPlanRequest): string {
  if (pieces.every((piece) => piece.count === 0)) return 'Every size has a count of zero.';
  if (pieces.every((piece) => piece.lengthFt !== undefined && piece.lengthFt > log.lengthFt)) return `Every size is longer than this log (${log.lengthFt} ft).`;
  const { widestBoardIn } = mill;
  if (widestBoardIn !== undefined && pieces.every((piece) => piece.widthIn !== undefined && piece.widthIn > widestBoardIn)) return `Every size is wider than the mill's widest board (${widestBoardIn} in).`;
  if (pattern === 'quartersawn' && mill.widestCutIn !== undefined) return 'No board fits: quartering needs a mill that cuts right across this log.';
  return 'No board of these sizes fits in this log on this mill.';
}
