import { parentPort } from 'node:worker_threads';
import { sawPlan, type SawPlanRequest } from '../../domain/sawing/saw-plan.ts';

/** A task for a planning thread. */
export interface Task {
  readonly id: number;
  readonly kind: 'saw-plan';
  readonly request: SawPlanRequest;
}

export type Answer = { readonly id: number } & ({ readonly value: unknown } | { readonly error: string } | { readonly late: true });

parentPort?.on('message', ({ id, request }: Task) => {
  const answered = (answer: Answer): void => parentPort?.postMessage(answer);
  try {
    answered({ id, value: sawPlan(request) });
  } catch (error) {
    answered({ id, error: error instanceof Error ? (error.stack ?? error.message) : String(error) });
  }
});
