import { parentPort } from 'node:worker_threads';
import { sawPlan, type SawPlanRequest } from '../../domain/sawing/saw-plan.ts';

/** A task for the planning thread, and its answer. */
export interface Task {
  readonly id: number;
  readonly kind: 'saw-plan';
  readonly request: SawPlanRequest;
}

const port = parentPort;
if (!port) throw new Error('The planning thread is started by planning.ts.');
port.on('message', (task: Task) => {
  try {
    port.postMessage({ id: task.id, answer: sawPlan(task.request) });
  } catch (error) {
    port.postMessage({ id: task.id, error: error instanceof Error ? (error.stack ?? error.message) : String(error) });
  }
});
