import { join } from 'node:path';
import { Worker, type ResourceLimits } from 'node:worker_threads';
import { Refusal, tooMany, unavailable } from '../errors.ts';

/** What a thread answers to a task, by the id it came with. */
export type Answer = { readonly id: number } & ({ readonly value: unknown } | { readonly error: string });

/** How a task is done. */
export interface Asking {
  /** How long the task may take once it is begun, ms. */
  readonly mostMs: number;
  /** Who asks: one asker has at most two tasks in hand, so that nobody keeps a thread from everybody else. Without one there is no such limit. */
  readonly asker?: string | undefined;
}

interface Task {
  readonly work: object;
  readonly asking: Asking;
  readonly done: (answer: Outcome) => void;
}

type Outcome = Answer | { readonly refused: Refusal };

const MOST_OF_ONE_ASKER = 2;
const MOST_WAITING = 40;

/** A task took longer than it may. */
export const tookTooLong = (): Refusal => unavailable('This takes too long just now. Try again in a moment.', 10);

/**
 * A thread that does one task after another, so that what takes long holds up no page. A task that takes too long is ended by itself:
 * those behind it go on in a new thread.
 */
export class Thread<Work extends object> {
  private worker: Worker | undefined;
  private running: { readonly id: number; readonly task: Task; readonly late: NodeJS.Timeout } | undefined;
  private readonly queue: Task[] = [];
  private lastId = 0;

  /** @param file the thread's program, in this folder: run from its source, as a thread needs a file of its own. */
  constructor(private readonly file: string, private readonly resourceLimits: ResourceLimits = {}) {}

  /** Tasks in hand. */
  get waiting(): number {
    return this.queue.length + (this.running ? 1 : 0);
  }

  /** Hands over a task. @throws Refusal `unavailable` when it takes too long or too many wait, `tooMany` when the asker has enough in hand. */
  async ask<T>(work: Work, asking: Asking): Promise<T> {
    const { asker } = asking;
    const inHand = [...this.queue, ...(this.running ? [this.running.task] : [])];
    if (asker !== undefined && inHand.filter((task) => task.asking.asker === asker).length >= MOST_OF_ONE_ASKER) throw tooMany(5);
    if (inHand.length >= MOST_WAITING) throw unavailable('Too many of these are being worked out just now. Try again in a moment.', 5);
    const outcome = await new Promise<Outcome>((done) => {
      this.queue.push({ work, asking, done });
      this.next();
    });
    if ('refused' in outcome) throw outcome.refused;
    if ('error' in outcome) throw new Error(outcome.error);
    return outcome.value as T;
  }

  private next(): void {
    const task = this.running ? undefined : this.queue.shift();
    if (!task) return;
    const worker = this.started();
    const id = ++this.lastId;
    const late = setTimeout(() => {
      this.worker = undefined;
      void worker.terminate();
      this.finish(id, { refused: tookTooLong() });
    }, task.asking.mostMs);
    this.running = { id, task, late };
    worker.postMessage({ ...task.work, id });
  }

  private finish(id: number, outcome: Outcome): void {
    if (this.running?.id !== id) return;
    const { task, late } = this.running;
    clearTimeout(late);
    this.running = undefined;
    task.done(outcome);
    this.next();
  }

  private started(): Worker {
    if (this.worker) return this.worker;
    const worker = new Worker(join(process.cwd(), 'src/server/services', this.file), { resourceLimits: this.resourceLimits });
    worker.unref();
    const lost = (error?: unknown): void => {
      if (this.worker !== worker) return;
      this.worker = undefined;
      if (this.running) this.finish(this.running.id, { id: this.running.id, error: String(error ?? 'the thread ended') });
    };
    worker.on('message', (answer: Answer) => this.finish(answer.id, answer));
    worker.on('error', lost);
    worker.on('exit', () => lost());
    return (this.worker = worker);
  }
}
