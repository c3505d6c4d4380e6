import type { Board } from './board.ts';
import { areaBound } from './bound.ts';
import { QUICK } from './cant.ts';
import { greedyLayers } from './greedy.ts';
import type { CutListRequest, ListedShape } from './cut-list.ts';
import type { Demand } from './demand.ts';
import { cubicFeet, largeEnd, type LogShape, radiusAt } from './log-shape.ts';
import { type Piece, stockOf } from './pieces.ts';
import { type KindPlan, kindPlans, type PricedSize } from './kind-plans.ts';
import { type Pattern, sawPlan } from './saw-plan.ts';
import { hindrance, planFor, slabsIn } from './special-pieces.ts';
import type { Model, Solver } from './solver.ts';

/** Logs of one shape. */
export interface Shape {
  readonly log: LogShape;
  readonly ids: readonly string[];
  readonly cubicFeet: number;
  /** What the use of one counts: its cubic feet, unless the logs say otherwise. */
  readonly cost: number;
}

/** Shapes of which only so many logs may be used together. */
export interface Limit {
  readonly shapes: readonly number[];
  readonly most: number;
}

/** A plan for logs of one shape: how many of each size it gives. */
export interface Made {
  readonly shape: number;
  readonly pattern: Pattern;
  readonly boards: readonly Board[];
  readonly counts: readonly number[];
}

/** At some prices of the sizes, what a log of each shape is worth at most, whatever its plan. */
export interface Worth {
  readonly prices: readonly number[];
  readonly most: readonly number[];
}

/** Bands looked at for a cant while pricing: the list is made by many plans, no single one has to be the best there is. */
const PRICING_EFFORT = 24;
/** Shapes whose larger neighbours may take over their plans. */
const NEIGHBOURS = 6;
const TINY = 1e-7;

/** All plans made so far for the logs of a cut list, and what bounds them. */
export class Pool {
  readonly shapes: readonly Shape[];
  /** Beside each shape's own number of logs. */
  readonly limits: readonly Limit[];
  readonly made: Made[] = [];
  readonly worths: Worth[] = [];
  /** Most of each size that one log of each shape gives. */
  readonly mostOf: number[][];
  private readonly known = new Set<string>();
  private readonly special: boolean;
  /** What one log was planned to, for logs of one stem that have the same shape. */
  private readonly plannedAt = new Map<string, { readonly plans: readonly KindPlan[]; readonly bound: number }>();

  constructor(
    private readonly request: CutListRequest,
    readonly demand: readonly Demand[],
  ) {
    const { mill } = request;
    const { together = [] } = request;
    const byShape = new Map<string, { log: ListedShape; ids: string[] }>();
    for (const log of request.logs) {
      if (mill.longestFt !== undefined && log.lengthFt > mill.longestFt + 1e-9) continue;
      const key = together.length > 0 ? log.id : `${log.smallEndIn} ${largeEnd(log)} ${log.lengthFt} ${log.heartDefectIn ?? 0} ${log.cost ?? ''}`;
      const same = byShape.get(key) ?? { log, ids: [] };
      same.ids.push(log.id);
      byShape.set(key, same);
    }
    this.shapes = [...byShape.values()]
      .map(({ log: { smallEndIn, largeEndIn, lengthFt, heartDefectIn, cost }, ids }) => {
        const log = { smallEndIn, largeEndIn, lengthFt, heartDefectIn };
        return { log, ids, cubicFeet: cubicFeet(log), cost: cost ?? cubicFeet(log) };
      })
      .sort((a, b) => b.cubicFeet - a.cubicFeet);
    const places = new Map(this.shapes.flatMap(({ ids }, shape) => ids.map((id) => [id, shape] as const)));
    this.limits = together.map(({ ids, most }) => ({ shapes: ids.flatMap((id) => places.get(id) ?? []), most }));
    this.special = demand.some(({ kind }) => kind !== 'board');
    this.mostOf = this.shapes.map(({ log }) => demand.map((size, index) => Math.min(size.count, this.mostIn(log, size, index))));
  }

  /** The most of one size that a log gives: timbers round the heart and slabs are counted, of others no more than their area allows. */
  private mostIn(log: LogShape, size: Demand, index: number): number {
    const { mill, waneAllowanceIn } = this.request;
    if (size.kind === 'slab') return slabsIn(log, mill, size).length;
    if (size.kind === 'boxed-heart') return planFor(log, mill, size, 1).boards.length;
    if (size.kind === 'free-of-heart' && hindrance(log, mill, size) !== null) return 0;
    return Math.floor(areaBound(stockOf(log, mill, this.pieces().slice(index, index + 1), waneAllowanceIn)) / size.boardFeet + TINY);
  }

  /** Counts the timbers free of heart centre that a log gives by a plan of them alone, while there is time. */
  sharpen(time: () => boolean): void {
    const { mill, waneAllowanceIn, pattern = 'best' } = this.request;
    this.shapes.forEach(({ log }, shape) => {
      const most = this.mostOf[shape] ?? [];
      this.demand.forEach(({ kind, count, boardFeet }, index) => {
        if (kind !== 'free-of-heart' || (most[index] ?? 0) === 0 || !time()) return;
        const sizes = this.pieces(this.demand.map((_, size) => (size === index ? boardFeet : 0)));
        const { bound } = kindPlans({ log, mill, pattern: pattern === 'quartersawn' ? 'cant' : pattern, sizes, waneAllowanceIn, effort: PRICING_EFFORT });
        most[index] = Math.min(count, most[index] ?? 0, Math.floor(bound / boardFeet + TINY));
      });
    });
  }

  private pieces(prices?: readonly number[]): PricedSize[] {
    return this.demand.map(({ kind, thicknessIn, widthIn, lengthFt, boardFeet }, index) => ({ kind, thicknessIn, widthIn, lengthFt, value: (prices?.[index] ?? boardFeet) / boardFeet }));
  }

  private add(shape: number, pattern: Pattern, boards: readonly Board[]): boolean {
    const counts = this.demand.map(() => 0);
    for (const board of boards) counts[board.piece] = (counts[board.piece] ?? 0) + 1;
    const key = `${shape} ${counts.join(' ')}`;
    if (boards.length === 0 || this.known.has(key)) return false;
    this.known.add(key);
    this.made.push({ shape, pattern, boards, counts });
    return true;
  }

  /**
   * Plans every shape at the prices of one piece of each size, the largest shapes first, until `time` is over; the rest are filled in
   * plain layers. @returns whether a new plan was found.
   */
  planAt(prices: readonly number[], time: () => boolean): boolean {
    const { mill, pattern = 'best', waneAllowanceIn } = this.request;
    const wanted = this.pieces(prices).map((piece, index) => ((prices[index] ?? 0) > TINY ? piece : { ...piece, value: 0 }));
    let found = false;
    this.plannedAt.clear();
    const most = this.shapes.map(({ log }, shape) => {
      const each = (this.mostOf[shape] ?? []).reduce((sum, count, size) => sum + count * (prices[size] ?? 0), 0);
      if (!time()) {
        const stock = stockOf(log, mill, wanted, waneAllowanceIn);
        if (pattern !== 'quartersawn') found = this.add(shape, pattern === 'cant' ? 'cant' : 'live', greedyLayers(stockOf(log, mill, boardsAmong(wanted), waneAllowanceIn))) || found;
        if (this.special) found = this.addSpecial(shape, wanted) || found;
        return Math.min(each, areaBound(stock));
      }
      const key = JSON.stringify(log);
      const { plans, bound } = this.plannedAt.get(key) ?? kindPlans({ log, mill, pattern, sizes: wanted, waneAllowanceIn, effort: PRICING_EFFORT });
      this.plannedAt.set(key, { plans, bound });
      for (const plan of plans) found = this.add(shape, plan.pattern, plan.boards) || found;
      return Math.min(each, bound);
    });
    this.worths.push({ prices, most });
    this.takeOver();
    return found;
  }

  /** Timbers and slabs that have a log for themselves, of every size that is worth something: quick, for when there is no more time. */
  private addSpecial(shape: number, wanted: readonly PricedSize[]): boolean {
    const { mill } = this.request;
    const { log } = this.shapes[shape] as Shape;
    return this.demand.reduce((found, size, index) => {
      if (size.kind === 'board' || size.kind === 'free-of-heart' || (wanted[index]?.value ?? 0) <= 0) return found;
      const plan = planFor(log, mill, size, size.count);
      return this.add(shape, plan.pattern, plan.boards.map((board) => ({ ...board, piece: index }))) || found;
    }, false);
  }

  /** Plans log after log for what is then still wanted, the largest first: a whole answer that keeps to the counts. */
  planOneByOne(time: () => boolean): void {
    const { mill, pattern = 'best', waneAllowanceIn } = this.request;
    for (const order of [this.shapes.map((_, index) => index), this.shapes.map((_, index) => index).reverse()]) {
      const left = this.demand.map(({ count, kind }) => (kind === 'board' ? count : 0));
      for (const shape of order) {
        const { log, ids } = this.shapes[shape] as Shape;
        for (const _ of ids) {
          if (left.every((count) => count <= 0)) break;
          const pieces = this.pieces().map((piece, index): Piece => ({ ...piece, count: left[index] ?? 0 }));
          const few = time() && (this.request.logs.length <= 12 || pattern === 'quartersawn');
          const plan = few ? sawPlan({ log, mill, pattern, pieces, waneAllowanceIn, effort: QUICK }) : { pattern: pattern === 'cant' ? ('cant' as const) : ('live' as const), boards: greedyLayers(stockOf(log, mill, pieces, waneAllowanceIn)) };
          this.add(shape, plan.pattern, plan.boards);
          for (const board of plan.boards) left[board.piece] = (left[board.piece] ?? 0) - 1;
        }
      }
    }
  }

  /** A plan of a smaller log lies in a larger one as well: its boards reach the large end there too. */
  private takeOver(): void {
    const { mill, waneAllowanceIn = 0 } = this.request;
    for (const { shape, pattern, boards } of [...this.made]) {
      // A slab is as wide as its own log.
      if (boards.some(({ piece }) => this.demand[piece]?.kind === 'slab')) continue;
      for (let larger = shape - 1; larger >= Math.max(0, shape - NEIGHBOURS); larger--) {
        const { log } = this.shapes[larger] as Shape;
        if (mill.widestCutIn !== undefined && mill.widestCutIn < largeEnd(log)) continue;
        if ((log.heartDefectIn ?? 0) > (this.shapes[shape]?.log.heartDefectIn ?? 0)) continue;
        const fits = boards.every((board) => board.lengthFt <= log.lengthFt + 1e-9 && reachOf(board) <= radiusAt(log, Math.max(0, log.lengthFt - board.lengthFt)) + waneAllowanceIn + 1e-9);
        if (fits) this.add(larger, pattern, boards.map((board) => ({ ...board, startFt: Math.max(0, log.lengthFt - board.lengthFt) })));
      }
    }
  }

  /** What one more piece of each size is worth while logs are taken in fractions: the next round plans at these prices. */
  pricesBy(solve: Solver, seconds: number): readonly number[] | null {
    const solution = solve(this.model(false, (_, index) => this.demand[index]?.boardFeet ?? 0, (cost) => cost * VOLUME_WEIGHT), seconds);
    if (!solution) return null;
    return this.demand.map((_, index) => Math.max(0, solution.prices[index] ?? 0));
  }

  /**
   * The choice of plans as a model: columns are the plans made, then what is short of each size.
   * @param shortCost of one piece of a size. @param logCost of the use of a log that counts so much.
   */
  model(whole: boolean, shortCost: (count: number, index: number) => number, logCost: (cost: number) => number): Model {
    const { made, demand, shapes, limits } = this;
    return {
      columns: [
        ...made.map(({ shape }) => ({ cost: logCost(shapes[shape]?.cost ?? 0), most: shapes[shape]?.ids.length ?? 0, whole })),
        ...demand.map(({ count }, index) => ({ cost: shortCost(count, index), most: count, whole })),
      ],
      rows: [
        ...demand.map(({ count }, size) => ({
          terms: [...made.flatMap(({ counts }, column) => ((counts[size] ?? 0) > 0 ? [[column, counts[size] ?? 0] as const] : [])), [made.length + size, 1] as const],
          sign: '>=' as const,
          rest: count,
        })),
        ...shapes.flatMap(({ ids }, shape) => {
          const terms = made.flatMap((plan, column) => (plan.shape === shape ? [[column, 1] as const] : []));
          return terms.length > 0 ? [{ terms, sign: '<=' as const, rest: ids.length }] : [];
        }),
        ...limits.flatMap(({ shapes: limited, most }) => {
          const terms = made.flatMap(({ shape }, column) => (limited.includes(shape) ? [[column, 1] as const] : []));
          return terms.length > 0 ? [{ terms, sign: '<=' as const, rest: most }] : [];
        }),
      ],
    };
  }
}

/** Cost of a cubic foot of log beside that of a board foot short, while pricing: enough to prefer full logs, too little to leave a piece short. */
export const VOLUME_WEIGHT = 1e-3;

/** How far a board's farthest corner is from the pith, in. */
function reachOf({ xIn, yIn, widthIn, thicknessIn, turned }: Board): number {
  const [wide, high] = turned ? [thicknessIn, widthIn] : [widthIn, thicknessIn];
  return Math.hypot(Math.max(Math.abs(xIn), Math.abs(xIn + wide)), Math.max(Math.abs(yIn), Math.abs(yIn + high)));
}

/** The boards among some sizes; timbers and slabs are not to be cut. */
const boardsAmong = (sizes: readonly PricedSize[]): Piece[] => sizes.map(({ kind, ...size }) => (kind === 'board' ? size : { ...size, count: 0 }));
