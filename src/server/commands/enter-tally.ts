import { checkClock, corrected } from '~/domain/trade/clock.ts';
import { authorize, rolesOnBooking } from '../authorize.ts';
import { execute, inTransaction, oneRow } from '../db.ts';
import { conflict, invalid } from '../errors.ts';
import { lockBooking } from '../locks.ts';
import { type Booking, Log, MeasuredLog, MetalHit, Tally, TallyPart } from '../models/index.ts';
import { type KeptClock, tallyWork } from '../tally-work.ts';
import { record } from '../transition.ts';
import type { Viewer } from '../viewer.ts';
import { queryEntered } from './query-entered.ts';
import { beginSawing } from './start-sawing.ts';
import type { Line } from './take-entries.ts';
import { watchHold, watchLogs, watchMetal } from './watch-day.ts';

/** Writes one entry. Everything is keyed by the id it was made with, so a repeated send changes nothing. */
async function enter(entry: Line, booking: Booking, tally: Tally, sequence: number, at: Date): Promise<void> {
  switch (entry.kind) {
    case 'board':
      await execute(
        `INSERT INTO tally_board (id, tally_id, log_id, kind, thickness_in, width_in, second_width_in, length_ft, count, entered_at, sequence)
         VALUES ($1, $2, $3, $4, $5, $6, $7, $8, $9, $10, $11) ON CONFLICT (id) DO NOTHING`,
        [entry.id, tally.id, entry.logId, entry.boardKind, entry.thicknessIn, entry.widthIn, entry.secondWidthIn, entry.lengthFt, entry.count, at, sequence],
      );
      return;
    case 'hit':
      await execute('INSERT INTO metal_hit (id, tally_id, log_id, outcome, note, entered_at) VALUES ($1, $2, $3, $4, $5, $6) ON CONFLICT (id) DO NOTHING', [entry.id, tally.id, entry.logId, entry.outcome, entry.note, at]);
      return;
    case 'cull':
      await execute('INSERT INTO cull_log (id, tally_id, log_id, reason, opening_minutes, passes, entered_at) VALUES ($1, $2, $3, $4, $5, $6, $7) ON CONFLICT (id) DO NOTHING', [entry.id, tally.id, entry.logId, entry.reason, entry.openingMinutes, entry.passes, at]);
      return;
    case 'clock': {
      const { kind: _, ...kept } = entry;
      const clock = tally.clock as KeptClock[];
      if (!clock.some(({ id }) => id === entry.id)) tally.clock = [...clock, kept];
      return;
    }
    case 'correctClock':
      tally.clock = (tally.clock as KeptClock[]).map((kept) => (kept.id === entry.clockId ? corrected(kept, entry) : kept));
      return;
    case 'remove':
      for (const table of ['tally_board', 'metal_hit', 'cull_log']) await execute(`UPDATE ${table} SET removed_at = $1 WHERE id = $2 AND tally_id = $3 AND removed_at IS NULL`, [at, entry.id, tally.id]);
      tally.clock = (tally.clock as KeptClock[]).filter(({ id }) => id !== entry.id);
      return;
    case 'extras': {
      const { kind: _, id: __, ...changed } = entry;
      tally.extras = { ...tally.extras, ...changed };
      return;
    }
    case 'measure': {
      const { smallEndIn, largeEndIn, lengthFt } = entry;
      // Measures anew take the landowner's word for the old ones away.
      await MeasuredLog.upsert({ bookingId: booking.id, logId: entry.logId, smallEndIn, largeEndIn, lengthFt, measuredAt: at, agreedAt: null });
      return;
    }
    case 'addLog': {
      const { id, label, species, smallEndIn, largeEndIn, lengthFt } = entry;
      const last = await oneRow<{ position: number }>('SELECT coalesce(max(position), 0)::int AS position FROM log WHERE listing_id = $1', [booking.listingId]);
      const position = (last?.position ?? 0) + 1;
      await Log.create({ id, listingId: booking.listingId, position, label: label || `Log ${position}, added`, species, smallEndIn, largeEndIn, lengthFt, addedOnTheDay: true });
      return;
    }
    case 'start':
      return;
  }
}

/** Entries without a row of their own, which are known again by this table. */
const remembered: ReadonlySet<Line['kind']> = new Set(['extras', 'start', 'measure', 'addLog', 'correctClock']);

/** Whether an entry is new. A repeated one was done before and is left alone. */
async function isNew(entry: Line, by: Viewer, booking: Booking, at: Date): Promise<boolean> {
  if (!remembered.has(entry.kind)) return true;
  const first = await oneRow('INSERT INTO tally_entry (id, booking_id, kind, entered_by, entered_at) VALUES ($1, $2, $3, $4, $5) ON CONFLICT (id) DO NOTHING RETURNING id', [entry.id, booking.id, entry.kind, by.id, at]);
  return first !== undefined;
}

/** Entries may only name logs of this booking's listing. */
async function refuseStrangeLogs(entries: readonly Line[], booking: Booking): Promise<void> {
  const known = new Set((await Log.findAll({ where: { listingId: booking.listingId }, attributes: ['id'] })).map(({ id }) => id));
  for (const entry of entries) if (entry.kind === 'addLog') known.add(entry.id);
  const problems = entries.flatMap((entry, index) => {
    const named = 'logId' in entry && entry.logId !== null ? [entry.logId] : entry.kind === 'extras' ? [...(entry.quartersawnLogIds ?? []), ...(entry.draggedLogIds ?? [])] : [];
    return named.some((id) => !known.has(id)) ? [{ path: `entries.${index}.logId`, message: 'This log is not one of the listing’s.' }] : [];
  });
  if (problems.length > 0) throw invalid(problems);
}

/** What was signed for part of the work stands: only a query changes it. */
async function refuseSignedLines(entries: readonly Line[], tally: Tally): Promise<void> {
  const signed = new Set((await TallyPart.findAll({ where: { tallyId: tally.id }, attributes: ['lineIds'] })).flatMap(({ lineIds }) => lineIds));
  const problems = entries.flatMap((entry, index) => ((entry.kind === 'remove' && signed.has(entry.id)) || (entry.kind === 'correctClock' && signed.has(entry.clockId)) ? [{ path: `entries.${index}.id`, message: 'This line was signed for part of the work and stands. The landowner can query it when the whole tally is offered.' }] : []));
  if (problems.length > 0) throw invalid(problems);
}

/**
 * Takes entries into the tally, in the order given: while sawing, or to amend a queried tally.
 * What was sawn is never turned away because the saw should have stood still: that is for the two of them to settle.
 * @throws Refusal `invalid` for strange logs, lines signed for part of the work, or clock entries that overlap
 */
export async function enterTally(by: Viewer, input: { readonly booking: number; readonly entries: readonly Line[] }, at: Date): Promise<{ readonly revision: number }> {
  return inTransaction(async () => {
    const booking = await lockBooking(input.booking);
    const roles = rolesOnBooking(by, booking);
    if (input.entries.some(({ kind }) => kind === 'start') && booking.status === 'held') await beginSawing(by, booking, at);
    authorize(by, 'booking', booking.status === 'queried' ? 'amendTally' : 'enterTally', roles, booking.status);
    const tally = await Tally.findOne({ where: { bookingId: booking.id, part: 1 }, lock: true });
    if (!tally) throw conflict('Go through the check-list and start sawing first.');
    await refuseStrangeLogs(input.entries, booking);
    if (booking.status === 'sawing') await refuseSignedLines(input.entries, tally);
    const queried = booking.status === 'queried' ? await tallyWork(booking) : null;

    const hitsBefore = await MetalHit.count({ where: { tallyId: tally.id, removedAt: null } });
    const last = await oneRow<{ sequence: number }>('SELECT coalesce(max(sequence), 0)::int AS sequence FROM tally_board WHERE tally_id = $1', [tally.id]);
    const logsChanged = new Set<string>();
    for (const [index, entry] of input.entries.entries()) {
      if (!(await isNew(entry, by, booking, at))) continue;
      await enter(entry, booking, tally, (last?.sequence ?? 0) + index + 1, at);
      if (entry.kind === 'measure') logsChanged.add(entry.logId);
      if (entry.kind === 'addLog') logsChanged.add(entry.id);
    }

    const checked = checkClock((tally.clock as KeptClock[]).map(({ activity, startsAt, endsAt }) => ({ activity, startsAt: new Date(startsAt), endsAt: new Date(endsAt) })));
    if (!checked.ok) throw invalid(checked.problems.map(({ path, message }) => ({ path: `clock.${path}`, message })));
    tally.revision += 1;
    await tally.save();
    await booking.update({ updatedAt: at });
    if (queried) {
      await record(by, 'amendTally', 'booking', booking.id, at, { data: { entries: input.entries.length } });
      const amended = await tallyWork(booking);
      if (amended) await queryEntered(queried, amended, at);
    }
    await watchLogs(by, booking, logsChanged);
    await watchMetal(by, booking, tally, hitsBefore);
    await watchHold(by, booking, tally, at);
    return { revision: tally.revision };
  });
}
