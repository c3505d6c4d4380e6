import { parentPort } from 'node:worker_threads';
import { cutList, type CutListRequest, type Patience } from '../../domain/sawing/cut-list.ts';
import { expectedLumber, type LumberRequest } from '../../domain/sawing/expected.ts';
import { listingPlan, type ListingPlanRequest } from '../../domain/sawing/listing-plan.ts';
import { sawPlan, type SawPlanRequest } from '../../domain/sawing/saw-plan.ts';
import { stemForList, type StemListRequest } from '../../domain/sawing/stem-list.ts';
import { planStem, type StemRequest } from '../../domain/sawing/stem-plan.ts';
import type { Answer } from './thread.ts';

/** A task for a planning thread. */
export type Task = { readonly id: number } & Work;
export type Work = { readonly kind: 'saw-plan'; readonly request: SawPlanRequest } | { readonly kind: 'cut-list'; readonly request: CutListRequest } | { readonly kind: 'listing'; readonly request: ListingPlanRequest } | { readonly kind: 'lumber'; readonly request: LumberRequest } | { readonly kind: 'stem'; readonly request: StemRequest } | { readonly kind: 'stem-list'; readonly request: StemListRequest };

/** How long a cut list's logs are planned: by the processor's clock, or by the wall's where others have the processor. */
const PLANNING_CPU_MS = 900;
const PLANNING_MS = 3500;
/** A stem has some hundred ways to cut, each planned as a log of its own. */
const STEM_TIMES = 2;
const SOLVER_SECONDS = 0.4;

function patience(times = 1): Patience {
  const [from, wall] = [process.cpuUsage(), performance.now()];
  const cpuMs = (): number => {
    const { user, system } = process.cpuUsage(from);
    return (user + system) / 1000;
  };
  return { toPlan: () => cpuMs() < times * PLANNING_CPU_MS && performance.now() - wall < times * PLANNING_MS, solverSeconds: SOLVER_SECONDS, anew: () => patience(times) };
}

async function done(task: Task): Promise<unknown> {
  if (task.kind === 'saw-plan') return sawPlan(task.request);
  if (task.kind === 'lumber') return expectedLumber(task.request.logs, task.request.mill, task.request.wanted, task.request.measuredBy);
  if (task.kind === 'stem') return planStem(task.request);
  const { highsSolver } = await import('./solver.ts'); // only where it is needed: it is large
  const solve = await highsSolver();
  if (task.kind === 'stem-list') return stemForList(task.request, solve, patience(STEM_TIMES));
  if (task.kind === 'listing') return listingPlan(task.request, solve, patience());
  return cutList(task.request, solve, patience());
}

parentPort?.on('message', (task: Task) => {
  const { id } = task;
  done(task).then(
    (value) => parentPort?.postMessage({ id, value } satisfies Answer),
    (error: unknown) => parentPort?.postMessage({ id, error: error instanceof Error ? (error.stack ?? error.message) : String(error) } satisfies Answer),
  );
});
