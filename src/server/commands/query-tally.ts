import { bookingStates } from '~/domain/states/booking.ts';
import { paths } from '~/domain/paths.ts';
import { queryAnswered, tallyQueried } from '~/emails/tally-letters.ts';
import { authorize, rolesOnBooking } from '../authorize.ts';
import { inTransaction } from '../db.ts';
import { conflict, invalid, notFound } from '../errors.ts';
import { enqueue } from '../jobs/queue.ts';
import { lockBooking } from '../locks.ts';
import { CullLog, MetalHit, Tally, TallyBoard, TallyQuery } from '../models/tally.ts';
import { linkTo, partiesOf } from '../parties.ts';
import { tallyWork } from '../tally-work.ts';
import { record, transition } from '../transition.ts';
import type { Viewer } from '../viewer.ts';
import { signWork } from './sign-tally.ts';

export interface QueriedLine {
  readonly line: 'board' | 'hit' | 'cull' | 'clock' | 'extras';
  readonly lineId: string | null;
}

/** The landowner names the lines that look wrong. The 72 hours stop. */
export async function queryTally(by: Viewer, input: { readonly booking: number; readonly lines: readonly QueriedLine[]; readonly says: string }, at: Date): Promise<void> {
  await inTransaction(async () => {
    const booking = await lockBooking(input.booking);
    authorize(by, 'booking', 'queryTally', rolesOnBooking(by, booking), booking.status);
    const work = await tallyWork(booking);
    if (!work) throw notFound('tally');
    const known = new Set([...work.boards, ...work.hits, ...work.culls, ...work.clock].map(({ id }) => id));
    if (input.lines.some(({ line, lineId }) => line !== 'extras' && (lineId === null || !known.has(lineId)))) throw invalid([{ path: 'lines', message: 'One of these lines is no longer in the tally. Load the page again.' }]);
    for (const { line, lineId } of input.lines) await TallyQuery.create({ tallyId: work.tally.id, line, lineId, says: input.says, createdAt: at });
    await transition(bookingStates, 'query', booking, by, at, { signBy: null, updatedAt: at }, { data: { lines: input.lines.length } });
    const { landowner, sawyer } = await partiesOf(booking);
    await enqueue('send-mail', tallyQueried(sawyer, landowner.name, input.says, input.lines.length, linkTo(paths.tally(booking.number))));
  });
}

/** The sawyer answers a queried line; what is wrong is corrected in the tally itself. */
export async function answerQuery(by: Viewer, input: { readonly booking: number; readonly query: string; readonly answer: string }, at: Date): Promise<void> {
  await inTransaction(async () => {
    const booking = await lockBooking(input.booking);
    authorize(by, 'booking', 'amendTally', rolesOnBooking(by, booking), booking.status);
    const tally = await Tally.findOne({ where: { bookingId: booking.id, part: 1 }, rejectOnEmpty: true });
    const query = await TallyQuery.findOne({ where: { id: input.query, tallyId: tally.id }, lock: true });
    if (!query) throw notFound('query');
    await query.update({ answer: input.answer, answeredAt: at });
    await record(by, 'answerQuery', 'booking', booking.id, at, { data: { query: query.id } });
    const { landowner, sawyer } = await partiesOf(booking);
    await enqueue('send-mail', queryAnswered(landowner, sawyer.name, input.answer, linkTo(paths.signTally(booking.number))));
  });
}

/** How a moderator decides a line: it stands, it is struck out (of the extras all are), or (for boards) this many are counted. */
export type Decision = { readonly kind: 'stands' } | { readonly kind: 'struck' } | { readonly kind: 'count'; readonly count: number };

export interface Decided {
  readonly query: string;
  readonly decision: Decision;
  /** The reason in writing, read by both sides. */
  readonly because: string;
}

async function carryOut(tally: Tally, query: TallyQuery, decision: Decision, at: Date): Promise<void> {
  if (decision.kind === 'stands') return;
  if (query.lineId === null) return void (await tally.update({ extras: {} }));
  if (query.line === 'board' && decision.kind === 'count' && decision.count > 0) {
    await TallyBoard.update({ count: decision.count }, { where: { id: query.lineId, tallyId: tally.id } });
    return;
  }
  const gone = { where: { id: query.lineId, tallyId: tally.id } } as const;
  if (query.line === 'board') await TallyBoard.update({ removedAt: at }, gone);
  if (query.line === 'hit') await MetalHit.update({ removedAt: at }, gone);
  if (query.line === 'cull') await CullLog.update({ removedAt: at }, gone);
  if (query.line === 'clock') await tally.update({ clock: (tally.clock as { id: string }[]).filter(({ id }) => id !== query.lineId) });
}

/**
 * A moderator decides every open queried line with a reason; the tally then counts as signed.
 * @param input `sha256` of the tally that the moderator read
 * @throws Refusal `conflict` when a line is left undecided, or the tally has changed since it was read
 */
export async function decideTally(by: Viewer, input: { readonly booking: number; readonly sha256: string; readonly decisions: readonly Decided[] }, at: Date): Promise<void> {
  await inTransaction(async () => {
    const booking = await lockBooking(input.booking);
    authorize(by, 'booking', 'decideTally', rolesOnBooking(by, booking), booking.status);
    const tally = await Tally.findOne({ where: { bookingId: booking.id, part: 1 }, lock: true, rejectOnEmpty: true });
    if ((await tallyWork(booking))?.sha256 !== input.sha256) throw conflict('The tally has changed since this page was shown. Read it as it stands now, then decide.');
    const open = await TallyQuery.findAll({ where: { tallyId: tally.id, decidedAt: null }, lock: true });
    for (const query of open) {
      const decided = input.decisions.find((one) => one.query === query.id);
      if (!decided) throw conflict('Decide every queried line: each needs a decision and a reason.');
      if (decided.because.trim() === '') throw invalid([{ path: `because.${query.id}`, message: 'Write the reason: both sides read it.' }]);
      await carryOut(tally, query, decided.decision, at);
      await query.update({ decision: decided.decision, decidedBecause: decided.because.trim(), decidedBy: by.id, decidedAt: at });
    }
    const work = await tallyWork(booking);
    if (work) await signWork(booking, work, by, 'moderator', null, at);
  });
}
