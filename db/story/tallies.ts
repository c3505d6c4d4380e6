import { randomUUID } from 'node:crypto';
import { addHours, dayStart } from '../../src/domain/time.ts';
import { minutesOf } from '../../src/domain/trade/clock.ts';
import type { TallyEntry } from '../../src/schemas/tally-entries.ts';
import { takeEntries } from '../../src/server/commands/take-entries.ts';
import { offerTally } from '../../src/server/commands/offer-tally.ts';
import { answerQuery, decideTally, queryTally } from '../../src/server/commands/query-tally.ts';
import { signTally } from '../../src/server/commands/sign-tally.ts';
import { startSawing } from '../../src/server/commands/start-sawing.ts';
import { Log } from '../../src/server/models/listing.ts';
import { Mill } from '../../src/server/models/sawyer.ts';
import { tallyPage } from '../../src/server/queries/tally-page.ts';
import { bidOf } from './bids.ts';
import { boardFeetOf, boardsOf, scaleOf, slabsOf } from './boards.ts';
import { bookingOf } from './bookings.ts';
import { ZONE, type Calendar } from './calendar.ts';
import { listingOf } from './listings.ts';
import { handleMoney } from './money.ts';
import { who } from './people.ts';
import type { Timeline } from './timeline.ts';

/** A sawn job: when, what came of each log, and what the landowner did. */
interface Sawn {
  readonly listing: string;
  readonly owner: string;
  readonly sawyer: string;
  readonly on: number;
  /** Thicknesses sawn, inches. */
  readonly thicknesses: readonly number[];
  /** What came off the saw over what the bid expected. */
  readonly share: number;
  readonly metal?: readonly ('re-sharpened' | 'destroyed')[];
  readonly slabs?: boolean;
  /** Still sawing: nothing is offered yet. */
  readonly unfinished?: true;
  readonly signed?: number;
  readonly note?: string;
}

const sawn = (listing: string, sawyer: string, on: number, thicknesses: readonly number[], share: number, rest: Partial<Sawn> = {}): Sawn => ({ listing, owner: listing.split('-')[0] ?? '', sawyer, on, thicknesses, share, ...rest });

const days: readonly Sawn[] = [
  sawn('ada-maple', 'cleo', -24, [2, 1], 0.92, { signed: -23, note: 'The 8/4 is under the milk house roof, stickered.' }),
  sawn('tilda-oak', 'bram', -20, [2], 0.95, { signed: -19, metal: ['re-sharpened'], note: 'One staple in log 2.' }),
  sawn('ulf-pine', 'otis', -22, [2, 1], 0.85),
  sawn('vera-cherry', 'nell', -21, [1], 0.9, { signed: -20, metal: ['destroyed', 're-sharpened'] }),
  sawn('wim-basswood', 'ines', -17, [3], 0.9),
  sawn('yves-oak', 'hob', -4, [2, 6], 1.75, { signed: -2, note: 'The two posts from log 1 came out longer than listed.' }),
  sawn('anders-walnut', 'pim', -3, [1.25, 3], 0.9, { slabs: true, metal: ['destroyed'] }),
  sawn('ivo-oak', 'bram', -1, [2], 0.93, { note: 'Ends are painted. Log 4 had a little heart shake.' }),
  sawn('ada-pine', 'hob', -2, [1, 2], 0.88, { note: 'Slabs are in a heap by the lane.' }),
  sawn('berit-ash', 'moss', 0, [1], 0.9, { unfinished: true }),
];

const logsOf = async (listing: string): Promise<Log[]> => Log.findAll({ where: { listingId: (await listingOf(listing)).id, removedAt: null }, order: [['position', 'ASC']] });

/** Preparing from eight, then sawing as long as the mill's pace takes, with a rest at noon when it is long. */
function clockOf(one: Sawn, hours: number, calendar: Calendar): TallyEntry[] {
  const start = dayStart(one.on === 0 ? calendar.day(0) : calendar.workday(one.on), ZONE);
  const part = (activity: 'preparing' | 'sawing', fromHours: number, hours: number): TallyEntry & { kind: 'clock' } => ({
    kind: 'clock', id: randomUUID(), activity, startsAt: addHours(start, fromHours).toISOString(), endsAt: addHours(start, fromHours + hours).toISOString(),
  });
  const morning = Math.min(3.5, hours);
  const entries = [part('preparing', 0, 0.5), part('sawing', 0.5, morning), ...(hours > morning ? [part('sawing', 4.75, Math.min(9, hours - morning))] : [])];
  const done = entries.filter(({ endsAt }) => new Date(endsAt) <= calendar.now);
  return minutesOf(done.map(({ activity, startsAt, endsAt }) => ({ activity, startsAt: new Date(startsAt), endsAt: new Date(endsAt) })), 'sawing', 'preparing') > 0 ? done : [];
}

async function saw(one: Sawn, calendar: Calendar, at: Date): Promise<void> {
  const by = await who(one.sawyer);
  const booking = (await bookingOf(one.listing)).number;
  const logs = await logsOf(one.listing);
  const [butt, ...rest] = logs;
  const done = one.unfinished ? logs.slice(0, 1) : logs;
  const expected = (await bidOf(one.listing, one.sawyer)).expectedBfHundredths / 100;
  const share = (one.share * expected) / logs.reduce((sum, log) => sum + scaleOf(log), 0);
  const boards = one.slabs && butt ? [slabsOf(butt, 3, 3), ...rest.flatMap((log) => boardsOf(log, [one.thicknesses[0] ?? 1], share))] : done.flatMap((log) => boardsOf(log, one.thicknesses, share));
  const hits = (one.metal ?? []).map((outcome): TallyEntry => ({ kind: 'hit', id: randomUUID(), logId: logs[1]?.id ?? null, outcome, note: outcome === 'destroyed' ? 'Fence staple, grown over' : '' }));
  const { paceBfPerHour } = await Mill.findOne({ where: { sawyerId: by.id }, order: [['paceBfPerHour', 'DESC']], rejectOnEmpty: true });
  const hours = Math.max(0.75, Math.round((boardFeetOf(boards) / paceBfPerHour) * 4) / 4);
  await startSawing(by, booking, at);
  await takeEntries(by, { booking, entries: [...clockOf(one, hours, calendar), ...boards, ...hits] }, at);
}

async function sign(one: Sawn, at: Date): Promise<void> {
  const by = await who(one.owner);
  const { number } = await bookingOf(one.listing);
  await signTally(by, { booking: number, sha256: (await tallyPage(by, number)).sha256, name: by.name }, at);
  await handleMoney(at);
}

/** The first board lines of a tally as its landowner sees them. */
async function boardLines(owner: string, listing: string, count: number): Promise<{ number: number; lines: { line: 'board'; lineId: string }[] }> {
  const { number } = await bookingOf(listing);
  const page = await tallyPage(await who(owner), number);
  return { number, lines: page.view.boards.slice(0, count).map(({ id }) => ({ line: 'board', lineId: id })) };
}

async function query(owner: string, listing: string, count: number, says: string, at: Date): Promise<void> {
  const { number, lines } = await boardLines(owner, listing, count);
  await queryTally(await who(owner), { booking: number, lines, says }, at);
}

async function answer(owner: string, sawyer: string, listing: string, words: string, at: Date): Promise<void> {
  const { number } = await boardLines(owner, listing, 0);
  const { view } = await tallyPage(await who(sawyer), number);
  for (const { id } of view.queries) await answerQuery(await who(sawyer), { booking: number, query: id, answer: words }, at);
}

async function decide(at: Date): Promise<void> {
  const { number } = await bookingOf('wim-basswood');
  const { view, sha256 } = await tallyPage(await who('mo'), number);
  const decisions = view.queries.map(({ id }) => ({ query: id, decision: { kind: 'count' as const, count: 3 }, because: 'The photograph of the stack shows three of this width, and the sawyer agrees that one split.' }));
  await decideTally(await who('mo'), { booking: number, sha256, decisions }, at);
  await handleMoney(at);
}

/** Milling days, tallies and what was done with them: signed, left to the deadline, queried and decided, queried and waiting. */
export function tellTallies(timeline: Timeline): void {
  const { calendar } = timeline;
  for (const one of days) {
    timeline.add(one.on, '08:10', (at) => saw(one, calendar, at));
    if (one.unfinished) continue;
    timeline.add(one.on, '17:30', async (at) => offerTally(await who(one.sawyer), { booking: (await bookingOf(one.listing)).number, endedBySawyer: false, note: one.note ?? '' }, at));
    if (one.signed !== undefined) timeline.add(one.signed, '09:15', (at) => sign(one, at));
  }
  timeline.add(-16, '19:20', (at) => query('wim', 'wim-basswood', 1, 'I count three of the wide blanks, not as many as this.', at));
  timeline.add(-15, '12:15', (at) => answer('wim', 'ines', 'wim-basswood', 'One split on the bed and I laid it with the slabs. Three it is.', at));
  timeline.add(-14, '10:00', decide);
  timeline.add(-2, '20:10', (at) => query('anders', 'anders-walnut', 2, 'The slabs measure 14 in across the middle where I put the tape, not what is written here.', at));
  timeline.add(-1, '07:45', (at) => answer('anders', 'pim', 'anders-walnut', 'I measured both faces at mid-length and wrote both down. Please look at the photograph of the stack.', at));
}
