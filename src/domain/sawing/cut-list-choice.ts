import { type Pool, VOLUME_WEIGHT } from './cut-list-patterns.ts';
import type { Demand } from './demand.ts';
import type { Model, Solution, Solver } from './solver.ts';

/** How often each plan of the pool is cut, and what stays short of each size. */
export interface Choice {
  readonly times: readonly number[];
  readonly short: readonly number[];
}

const TINY = 1e-6;

/** Least board feet short, then least log volume. */
const isBetter = (pool: Pool, a: Choice, b: Choice): boolean => {
  const gain = boardFeetShort(pool.demand, b) - boardFeetShort(pool.demand, a);
  return gain > TINY || (gain > -TINY && costOf(pool, a) < costOf(pool, b) - TINY);
};

export const boardFeetShort = (demand: readonly Demand[], { short }: Choice): number => demand.reduce((sum, { boardFeet }, index) => sum + boardFeet * (short[index] ?? 0), 0);

const costOf = (pool: Pool, { times }: Choice): number => times.reduce((sum, count, plan) => sum + count * (pool.shapes[pool.made[plan]?.shape ?? 0]?.cost ?? 0), 0);

/** How many more logs of each shape may be used. */
class Free {
  private readonly own: number[];
  private readonly shared: { readonly shapes: ReadonlySet<number>; most: number }[];

  constructor({ shapes, limits }: Pool) {
    this.own = shapes.map(({ ids }) => ids.length);
    this.shared = limits.map((limit) => ({ shapes: new Set(limit.shapes), most: limit.most }));
  }

  of(shape: number): number {
    return this.shared.reduce((least, limit) => (limit.shapes.has(shape) ? Math.min(least, limit.most) : least), this.own[shape] ?? 0);
  }

  take(shape: number, count: number): void {
    this.own[shape] = (this.own[shape] ?? 0) - count;
    for (const limit of this.shared) if (limit.shapes.has(shape)) limit.most -= count;
  }
}

/** Never more plans of a shape than there are logs of it: what a solver stopped short of an answer may hold. */
function withinLogs(pool: Pool, times: readonly number[], free = new Free(pool)): number[] {
  return pool.made.map(({ shape }, plan) => {
    const taken = Math.max(0, Math.min(times[plan] ?? 0, free.of(shape)));
    if (taken > 0) free.take(shape, taken);
    return taken;
  });
}

/** A choice by how often each plan is cut. */
function choiceOf(pool: Pool, times: readonly number[]): Choice {
  const made = pool.demand.map((_, size) => times.reduce((sum, count, plan) => sum + count * (pool.made[plan]?.counts[size] ?? 0), 0));
  return { times, short: pool.demand.map(({ count }, size) => Math.max(0, count - (made[size] ?? 0))) };
}

/** Starts from plans taken in fractions, rounded down, and adds log after log the plan that covers most of what is left; then leaves out logs that nothing needs. */
function completed(pool: Pool, fractions: readonly number[]): Choice {
  const free = new Free(pool);
  const times = withinLogs(pool, fractions.map((part) => Math.floor(part + TINY)), free);
  const { short } = choiceOf(pool, times);
  const left = [...short];
  for (;;) {
    let best = -1;
    let most = TINY;
    pool.made.forEach(({ shape, counts }, index) => {
      if (free.of(shape) <= 0) return;
      const covers = counts.reduce((sum, count, size) => sum + Math.min(count, left[size] ?? 0) * (pool.demand[size]?.boardFeet ?? 0), 0);
      if (covers > most) [best, most] = [index, covers];
    });
    const plan = pool.made[best];
    if (!plan) break;
    times[best] = (times[best] ?? 0) + 1;
    free.take(plan.shape, 1);
    plan.counts.forEach((count, size) => (left[size] = Math.max(0, (left[size] ?? 0) - count)));
  }
  let choice = choiceOf(pool, times);
  for (let plan = 0; plan < times.length; plan++) {
    while ((choice.times[plan] ?? 0) > 0) {
      const without = choiceOf(pool, choice.times.map((count, index) => (index === plan ? count - 1 : count)));
      if (!isBetter(pool, without, choice)) break;
      choice = without;
    }
  }
  return choice;
}

/** The plans in whole numbers: least board feet short, then, with no more than that short, least log volume. */
export function choose(pool: Pool, solve: Solver, seconds: number): Choice {
  const plans = pool.made.length;
  const { demand } = pool;
  if (plans === 0) return choiceOf(pool, []);
  const boardFeetOf = (_: number, index: number): number => demand[index]?.boardFeet ?? 0;
  let best = completed(pool, []);
  const offer = (solution: Solution | null): void => {
    if (!solution) return;
    const found = [choiceOf(pool, withinLogs(pool, solution.columns.slice(0, plans).map((value) => Math.floor(value + 0.01)))), completed(pool, solution.columns)];
    for (const each of found) if (isBetter(pool, each, best)) best = each;
  };
  offer(solve(pool.model(false, boardFeetOf, (cost) => cost * VOLUME_WEIGHT), seconds));
  if (boardFeetShort(demand, best) > TINY) offer(solve(pool.model(true, boardFeetOf, () => 0), seconds));
  const model = pool.model(true, () => 0, (cost) => cost);
  const noMoreShort: Model = { ...model, rows: [...model.rows, { terms: demand.map(({ boardFeet }, index) => [plans + index, boardFeet] as const), sign: '<=', rest: boardFeetShort(demand, best) + TINY }] };
  offer(solve(noMoreShort, seconds));
  return best;
}
