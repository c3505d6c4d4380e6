import loadHighs from 'highs';
import { highsOptions, solverOf, type Solver, type TextSolution } from '../../domain/sawing/solver.ts';

/** HiGHS, compiled to WebAssembly, as the planner's solver. It runs in the calling thread and blocks it. */
export async function highsSolver(): Promise<Solver> {
  const highs = await loadHighs();
  return solverOf((text, seconds) => highs.solve(text, highsOptions(seconds)) as TextSolution);
}
