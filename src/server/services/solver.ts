import loadHighs from 'highs';
import { modelText, type Solver } from '../../domain/sawing/solver.ts';

const PROVEN = 'Optimal';

/** HiGHS, compiled to WebAssembly, as the planner's solver. It runs in the calling thread and blocks it. */
export async function highsSolver(): Promise<Solver> {
  const highs = await loadHighs();
  return (model, seconds) => {
    const solution = highs.solve(modelText(model), { output_flag: false, time_limit: seconds, mip_rel_gap: 0, mip_abs_gap: 1e-6 });
    const columns = model.columns.map((_, index) => {
      const column = solution.Columns[`c${index}`];
      return column && 'Primal' in column ? column.Primal : Number.NaN;
    });
    if (solution.Status === 'Infeasible' || columns.some((value) => !Number.isFinite(value))) return null;
    const byName = new Map(solution.Rows.flatMap((row) => ('Dual' in row ? [[row.Name, row.Dual] as const] : [])));
    return { proven: solution.Status === PROVEN, cost: solution.ObjectiveValue, columns, prices: model.rows.map((_, index) => byName.get(`r${index}`) ?? 0) };
  };
}
