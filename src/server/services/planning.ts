import { join } from 'node:path';
import { Worker } from 'node:worker_threads';
import type { SawPlan, SawPlanRequest } from '~/domain/sawing/saw-plan.ts';
import { unavailable } from '../errors.ts';
import type { Answer, Task } from './planning-thread.ts';

/** Plans are worked out in threads of their own, so that a large log never holds up a page. */
interface Thread {
  readonly worker: Worker;
  readonly waiting: Map<number, { readonly done: (answer: Answer) => void }>;
}

const WAIT_MS = 25_000;
const MOST_WAITING = 40;
let thread: Thread | undefined;
let lastId = 0;

function started(): Thread {
  if (thread) return thread;
  // Run from its source, like the programs that load the built pages: a thread needs a file of its own.
  const worker = new Worker(join(process.cwd(), 'src/server/services/planning-thread.ts'), { execArgv: ['--import', 'tsx'] });
  worker.unref();
  const mine: Thread = { worker, waiting: new Map() };
  worker.on('message', (answer: Answer) => {
    mine.waiting.get(answer.id)?.done(answer);
    mine.waiting.delete(answer.id);
  });
  const lost = (error?: unknown): void => {
    if (thread === mine) thread = undefined;
    for (const [id, { done }] of mine.waiting) done({ id, error: String(error ?? 'the planning thread ended') });
    mine.waiting.clear();
  };
  worker.on('error', lost);
  worker.on('exit', () => lost());
  return (thread = mine);
}

/** Hands a task to the planning thread. @throws unavailable when too many wait or it takes too long. */
async function planned<T>(task: Omit<Task, 'id'>): Promise<T> {
  const { worker, waiting } = started();
  if (waiting.size >= MOST_WAITING) throw unavailable('Too many plans are being worked out just now. Try again in a moment.', 5);
  const id = ++lastId;
  const answer = await new Promise<Answer>((done) => {
    const late = setTimeout(() => {
      done({ id, late: true });
      void worker.terminate();
    }, WAIT_MS);
    waiting.set(id, { done: (found) => (clearTimeout(late), done(found)) });
    worker.postMessage({ ...task, id });
  });
  if ('late' in answer) throw unavailable('This plan takes too long just now. Try again in a moment.', 10);
  if ('error' in answer) throw new Error(answer.error);
  return answer.value as T;
}

/** The saw plan of one log, worked out in a thread. */
export const planLog = (request: SawPlanRequest): Promise<SawPlan> => planned({ kind: 'saw-plan', request });
