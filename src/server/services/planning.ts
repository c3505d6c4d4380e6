import { join } from 'node:path';
import { Worker } from 'node:worker_threads';
import type { CutListAnswer, CutListRequest } from '~/domain/sawing/cut-list.ts';
import { type Expected, expectedLumber, isQuick, type LumberRequest } from '~/domain/sawing/expected.ts';
import type { ListingPlan, ListingPlanRequest } from '~/domain/sawing/listing-plan.ts';
import type { SawPlan, SawPlanRequest } from '~/domain/sawing/saw-plan.ts';
import type { StemPlan, StemRequest } from '~/domain/sawing/stem-plan.ts';
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
    const worker = new Worker(join(process.cwd(), 'src/server/services/planning-thread.mjs'));
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
const WAIT_MS = 60_000;
const plans = new Thread();
/** Two cut lists at a time. */
const lists = [new Thread(), new Thread()];
const LIST_WAIT_MS = 15_000;

/** The saw plan of one log, worked out in a thread. @throws unavailable when too many wait. */
export async function planLog(request: SawPlanRequest): Promise<SawPlan> {
  notTooMany(plans);
  return plans.planned({ kind: 'saw-plan', request }, WAIT_MS);
}

/** A cut list over many logs, worked out in a thread. @throws unavailable when two are being worked out already. */
export async function planCutList(request: CutListRequest): Promise<CutListAnswer> {
  const idle = lists.find(({ waiting }) => waiting === 0);
  if (!idle) throw unavailable('Two cut lists are being worked out just now. Try again in a moment.', 3);
  return idle.planned({ kind: 'cut-list', request }, LIST_WAIT_MS);
}

/** Answers worked out before, by what was asked: a bid's form, its page and its placing ask the same. */
class Kept<Request, T> {
  private readonly known = new Map<string, Promise<T>>();
  constructor(private readonly most: number) {}

  answer(request: Request, work: () => Promise<T>): Promise<T> {
    const key = JSON.stringify(request);
    const known = this.known.get(key);
    if (known) return known;
    const found = work();
    found.catch(() => this.known.delete(key));
    this.known.set(key, found);
    const oldest = this.known.size > this.most ? this.known.keys().next() : undefined;
    if (oldest && !oldest.done) this.known.delete(oldest.value);
    return found;
  }
}

const lumber = new Kept<LumberRequest, Expected>(200);
const listings = new Kept<ListingPlanRequest, ListingPlan>(100);
/** Listings are planned apart from single logs: they take longer. */
const listingThread = new Thread();

const notTooMany = (thread: Thread): void => {
  if (thread.waiting >= MOST_WAITING) throw unavailable('Too many plans are being worked out just now. Try again in a moment.', 5);
};

/** The lumber that a mill is expected to saw from some logs: in a thread, unless it is done sooner than handed over. @throws unavailable when too many wait. */
export const planLumber = (request: LumberRequest): Promise<Expected> =>
  lumber.answer(request, async () => {
    if (isQuick(request)) return expectedLumber(request.logs, request.mill, request.wanted, request.measuredBy);
    notTooMany(plans);
    return plans.planned<Expected>({ kind: 'lumber', request }, WAIT_MS);
  });

const stems = new Kept<StemRequest, StemPlan>(50);

/** Where to cut a stem for the boards of its logs, worked out in a thread. @throws unavailable when too many wait. */
export const planStemBoards = (request: StemRequest): Promise<StemPlan> =>
  stems.answer(request, async () => {
    notTooMany(plans);
    return plans.planned<StemPlan>({ kind: 'stem', request }, WAIT_MS);
  });

/** The boards of a whole listing on one mill, worked out in a thread. @throws unavailable when too many wait. */
export const planListing = (request: ListingPlanRequest): Promise<ListingPlan> =>
  listings.answer(request, async () => {
    notTooMany(listingThread);
    return listingThread.planned<ListingPlan>({ kind: 'listing', request }, WAIT_MS);
  });
