import { join } from 'node:path';
import { Worker } from 'node:worker_threads';
import type { CutListAnswer, CutListRequest } from '~/domain/sawing/cut-list.ts';
import type { SawPlan, SawPlanRequest } from '~/domain/sawing/saw-plan.ts';
import { unavailable } from '../errors.ts';
import type { Answer, Work } from './planning-thread.ts';

/** Plans are worked out in threads of their own, so that a large log never holds up a page. A thread does one task after another. */
class Thread {
  private worker: Worker | undefined;
  private readonly tasks = new Map<number, (answer: Answer) => void>();
  private lastId = 0;

  get waiting(): number {
    return this.tasks.size;
  }

  private started(): Worker {
    if (this.worker) return this.worker;
    // Run from its source, like the programs that load the built pages: a thread needs a file of its own.
    const worker = new Worker(join(process.cwd(), 'src/server/services/planning-thread.ts'), { execArgv: ['--import', 'tsx'] });
    worker.unref();
    const finish = (answer: Answer): void => {
      this.tasks.get(answer.id)?.(answer);
      this.tasks.delete(answer.id);
    };
    const lost = (error?: unknown): void => {
      if (this.worker !== worker) return;
      this.worker = undefined;
      for (const id of [...this.tasks.keys()]) finish({ id, error: String(error ?? 'the planning thread ended') });
    };
    worker.on('message', finish);
    worker.on('error', lost);
    worker.on('exit', () => lost());
    return (this.worker = worker);
  }

  /** Hands over a task. @throws unavailable when it takes longer than `waitMs`. */
  async planned<T>(work: Work, waitMs: number): Promise<T> {
    const worker = this.started();
    const id = ++this.lastId;
    const answer = await new Promise<Answer>((done) => {
      const late = setTimeout(() => {
        done({ id, late: true });
        void worker.terminate();
      }, waitMs);
      this.tasks.set(id, (found) => (clearTimeout(late), done(found)));
      worker.postMessage({ ...work, id });
    });
    if ('late' in answer) throw unavailable('This takes too long just now. Try again in a moment.', 10);
    if ('error' in answer) throw new Error(answer.error);
    return answer.value as T;
  }
}

const MOST_WAITING = 40;
const WAIT_MS = 25_000;
const plans = new Thread();
/** Two cut lists at a time. */
const lists = [new Thread(), new Thread()];
const LIST_WAIT_MS = 15_000;

/** The saw plan of one log, worked out in a thread. @throws unavailable when too many wait. */
export async function planLog(request: SawPlanRequest): Promise<SawPlan> {
  if (plans.waiting >= MOST_WAITING) throw unavailable('Too many plans are being worked out just now. Try again in a moment.', 5);
  return plans.planned({ kind: 'saw-plan', request }, WAIT_MS);
}

/** A cut list over many logs, worked out in a thread. @throws unavailable when two are being worked out already. */
export async function planCutList(request: CutListRequest): Promise<CutListAnswer> {
  const idle = lists.find(({ waiting }) => waiting === 0);
  if (!idle) throw unavailable('Two cut lists are being worked out just now. Try again in a moment.', 3);
  return idle.planned({ kind: 'cut-list', request }, LIST_WAIT_MS);
}
