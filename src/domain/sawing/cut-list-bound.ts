import type { Pool } from './cut-list-patterns.ts';
import type { Demand } from './demand.ts';
import type { Model, Solver } from './solver.ts';

/**
 * What every choice of plans satisfies, whichever plans: at any prices, the logs used are worth no less than the pieces made; and a
 * log gives no more of one size than it holds of that size alone. Columns: logs used of each shape, then pieces short.
 */
function relaxed(pool: Pool, demand: readonly Demand[], shortCost: (index: number) => number, logCost: (cost: number) => number, whole: boolean): Model {
  const { shapes, limits, worths, mostOf } = pool;
  return {
    columns: [
      ...shapes.map(({ cost, ids }) => ({ cost: logCost(cost), most: ids.length, whole })),
      ...demand.map(({ count }, index) => ({ cost: shortCost(index), most: count, whole })),
    ],
    rows: [
      ...worths.map(({ prices, most }) => ({
        terms: [...most.map((value, shape) => [shape, value] as const), ...prices.map((price, index) => [shapes.length + index, price] as const)].filter(([, value]) => value > 0),
        sign: '>=' as const,
        // A hair less, so that a rounding in the sums never makes the bound too sharp.
        rest: demand.reduce((sum, { count }, index) => sum + count * (prices[index] ?? 0), 0) * (1 - 1e-9) - 1e-7,
      })),
      ...demand.map(({ count }, index) => ({
        terms: [...shapes.flatMap((_, shape) => ((mostOf[shape]?.[index] ?? 0) > 0 ? [[shape, mostOf[shape]?.[index] ?? 0] as const] : [])), [shapes.length + index, 1] as const],
        sign: '>=' as const,
        rest: count,
      })),
      ...limits.map(({ shapes: limited, most }) => ({ terms: limited.map((shape) => [shape, 1] as const), sign: '<=' as const, rest: most })),
    ],
  };
}

/** The least of a relaxed model: in whole numbers when that is proven in time, else in fractions, else nothing (0). */
function least(model: (whole: boolean) => Model, solve: Solver, seconds: number): number {
  const whole = solve(model(true), seconds);
  if (whole?.proven) return whole.cost - 1e-7;
  const parts = solve(model(false), seconds);
  return parts?.proven ? Math.max(0, parts.cost - 1e-7) : 0;
}

/** Board feet that stay short whatever plans are chosen. */
export function leastShort(pool: Pool, demand: readonly Demand[], solve: Solver, seconds: number): number {
  const all = demand.reduce((sum, { count, boardFeet }) => sum + count * boardFeet, 0);
  if (pool.shapes.length === 0) return all;
  return Math.max(0, least((whole) => relaxed(pool, demand, (index) => demand[index]?.boardFeet ?? 0, () => 0, whole), solve, seconds));
}

/** What the logs that are used count, whatever plans are chosen, when as many board feet are short as `short` says. */
export function leastCost(pool: Pool, demand: readonly Demand[], short: readonly number[], solve: Solver, seconds: number): number {
  if (pool.shapes.length === 0) return 0;
  const allowed = demand.reduce((sum, { boardFeet }, index) => sum + boardFeet * (short[index] ?? 0), 0);
  const model = (whole: boolean): Model => {
    const { columns, rows } = relaxed(pool, demand, () => 0, (cost) => cost, whole);
    return { columns, rows: [...rows, { terms: demand.map(({ boardFeet }, index) => [pool.shapes.length + index, boardFeet] as const), sign: '<=', rest: allowed + 1e-6 }] };
  };
  return Math.max(0, least(model, solve, seconds));
}
