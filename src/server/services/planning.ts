import type { CutListAnswer, CutListRequest } from '~/domain/sawing/cut-list.ts';
import { type Expected, expectedLumber, isQuick, type LumberRequest } from '~/domain/sawing/expected.ts';
import type { ListingPlan, ListingPlanRequest } from '~/domain/sawing/listing-plan.ts';
import type { SawPlan, SawPlanRequest } from '~/domain/sawing/saw-plan.ts';
import type { StemListPlan, StemListRequest } from '~/domain/sawing/stem-list.ts';
import type { StemPlan, StemRequest } from '~/domain/sawing/stem-plan.ts';
import type { Work } from './planning-thread.ts';
import { Thread } from './thread.ts';

type PlanningThread = Thread<Work>;
const planningThread = (): PlanningThread => new Thread('planning-thread.mjs');

const MOST_MS = 60_000;
/** The calculators are for anyone, so they have threads of their own and less time. */
const CALCULATOR_MOST_MS = 20_000;
const LIST_MOST_MS = 15_000;

// What bids wait for never waits for the calculators.
const plans = planningThread();
const calculators = planningThread();
/** Two cut lists at a time. */
const lists = [planningThread(), planningThread()] as const;

/** The saw plan of one log. @param asker who asks @throws Refusal `unavailable` when it takes too long or too many wait, `tooMany` when the asker has enough in hand */
export const planLog = (request: SawPlanRequest, asker: string): Promise<SawPlan> => calculators.ask({ kind: 'saw-plan', request }, { mostMs: CALCULATOR_MOST_MS, asker });

/** A cut list over many logs. @param asker who asks @throws Refusal as `planLog` */
export function planCutList(request: CutListRequest, asker: string): Promise<CutListAnswer> {
  const thread = lists[0].waiting <= lists[1].waiting ? lists[0] : lists[1];
  return thread.ask({ kind: 'cut-list', request }, { mostMs: LIST_MOST_MS, asker });
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
const listingThread = planningThread();

/** The lumber that a mill is expected to saw from some logs: in a thread, unless it is done sooner than handed over. @throws unavailable when too many wait. */
export const planLumber = (request: LumberRequest): Promise<Expected> =>
  lumber.answer(request, async () => {
    if (isQuick(request)) return expectedLumber(request.logs, request.mill, request.wanted, request.measuredBy);
    return plans.ask<Expected>({ kind: 'lumber', request }, { mostMs: MOST_MS });
  });

const stems = new Kept<StemRequest, StemPlan>(50);

/** Where to cut a stem for the boards of its logs, worked out in a thread. @param asker who asks @throws Refusal as `planLog` */
export const planStemBoards = (request: StemRequest, asker: string): Promise<StemPlan> => stems.answer(request, () => calculators.ask<StemPlan>({ kind: 'stem', request }, { mostMs: CALCULATOR_MOST_MS, asker }));

const stemLists = new Kept<StemListRequest, StemListPlan>(50);

/** Where to cut a stem for a cut list, worked out in a thread. @param asker who asks @throws Refusal as `planLog` */
export const planStemList = (request: StemListRequest, asker: string): Promise<StemListPlan> =>
  stemLists.answer(request, () => calculators.ask<StemListPlan>({ kind: 'stem-list', request }, { mostMs: CALCULATOR_MOST_MS, asker }));

/** The boards of a whole listing on one mill, worked out in a thread. @param asker who asks; nobody for our own jobs @throws Refusal as `planLog` */
export const planListing = (request: ListingPlanRequest, asker?: string): Promise<ListingPlan> => listings.answer(request, () => listingThread.ask<ListingPlan>({ kind: 'listing', request }, { mostMs: MOST_MS, asker }));
