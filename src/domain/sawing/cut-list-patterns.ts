import type { Board } from './board.ts';
import { areaBound } from './bound.ts';
import { QUICK } from './cant.ts';
import { greedyLayers } from './greedy.ts';
import type { CutListRequest, ListedShape } from './cut-list.ts';
import type { Demand } from './demand.ts';
import { cubicFeet, largeEnd, type LogShape, radiusAt } from './log-shape.ts';
import { type Piece, stockOf } from './pieces.ts';
import { type Pattern, sawPlan } from './saw-plan.ts';
import type { Model, Solver } from './solver.ts';

/** Logs of one shape. */
export interface Shape {
  readonly log: LogShape;
  readonly ids: readonly string[];
  readonly cubicFeet: number;
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
  readonly made: Made[] = [];
  readonly worths: Worth[] = [];
  /** Most of each size that one log of each shape gives. */
  readonly mostOf: number[][];
  private readonly known = new Set<string>();

  constructor(
    private readonly request: CutListRequest,
    readonly demand: readonly Demand[],
  ) {
    const { mill } = request;
    const byShape = new Map<string, { log: ListedShape; ids: string[] }>();
    for (const log of request.logs) {
      if (mill.longestFt !== undefined && log.lengthFt > mill.longestFt + 1e-9) continue;
      const key = `${log.smallEndIn} ${largeEnd(log)} ${log.lengthFt} ${log.heartDefectIn ?? 0}`;
      const same = byShape.get(key) ?? { log, ids: [] };
      same.ids.push(log.id);
      byShape.set(key, same);
    }
    this.shapes = [...byShape.values()]
      .map(({ log: { smallEndIn, largeEndIn, lengthFt, heartDefectIn }, ids }) => ({ log: { smallEndIn, largeEndIn, lengthFt, heartDefectIn }, ids }))
      .map((shape) => ({ ...shape, cubicFeet: cubicFeet(shape.log) }))
      .sort((a, b) => b.cubicFeet - a.cubicFeet);
    this.mostOf = this.shapes.map(({ log }) => demand.map(({ boardFeet, count }, index) => Math.min(count, Math.floor(areaBound(stockOf(log, mill, this.pieces().slice(index, index + 1), request.waneAllowanceIn)) / boardFeet + TINY))));
  }

  private pieces(prices?: readonly number[]): Piece[] {
    return this.demand.map(({ thicknessIn, widthIn, lengthFt, boardFeet }, index) => ({ thicknessIn, widthIn, lengthFt, value: (prices?.[index] ?? boardFeet) / boardFeet }));
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
    const wanted = this.pieces(prices).map((piece, index) => ((prices[index] ?? 0) > TINY ? piece : { ...piece, count: 0 }));
    let found = false;
    const most = this.shapes.map(({ log }, shape) => {
      if (!time()) {
        const stock = stockOf(log, mill, wanted, waneAllowanceIn);
        if (pattern !== 'quartersawn') found = this.add(shape, pattern === 'cant' ? 'cant' : 'live', greedyLayers(stock)) || found;
        return areaBound(stock);
      }
      const free = wanted.filter((piece) => piece.count !== 0);
      if (free.length === 0) return 0;
      const places = wanted.flatMap((piece, index) => (piece.count === 0 ? [] : [index]));
      const plan = sawPlan({ log, mill, pattern, pieces: free, waneAllowanceIn, effort: PRICING_EFFORT });
      const boards = plan.boards.map((board) => ({ ...board, piece: places[board.piece] ?? 0 }));
      found = this.add(shape, plan.pattern, boards) || found;
      return plan.upperBoundValue;
    });
    this.worths.push({ prices, most });
    this.takeOver();
    return found;
  }

  /** Plans log after log for what is then still wanted, the largest first: a whole answer that keeps to the counts. */
  planOneByOne(time: () => boolean): void {
    const { mill, pattern = 'best', waneAllowanceIn } = this.request;
    for (const order of [this.shapes.map((_, index) => index), this.shapes.map((_, index) => index).reverse()]) {
      const left = this.demand.map(({ count }) => count);
      for (const shape of order) {
        const { log, ids } = this.shapes[shape] as Shape;
        for (const _ of ids) {
          if (left.every((count) => count <= 0)) break;
          const pieces = this.pieces().map((piece, index) => ({ ...piece, count: left[index] ?? 0 }));
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
    const solution = solve(this.model(false, (_, index) => this.demand[index]?.boardFeet ?? 0, (volume) => volume * VOLUME_WEIGHT), seconds);
    if (!solution) return null;
    return this.demand.map((_, index) => Math.max(0, solution.prices[index] ?? 0));
  }

  /**
   * The choice of plans as a model: columns are the plans made, then what is short of each size.
   * @param shortCost of one piece of a size. @param logCost of a log of some cubic feet.
   */
  model(whole: boolean, shortCost: (count: number, index: number) => number, logCost: (cubicFeet: number) => number): Model {
    const { made, demand, shapes } = this;
    return {
      columns: [
        ...made.map(({ shape }) => ({ cost: logCost(shapes[shape]?.cubicFeet ?? 0), most: shapes[shape]?.ids.length ?? 0, whole })),
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
