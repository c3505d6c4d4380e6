import { corrected } from '~/domain/trade/clock.ts';
import type { DayLog } from '~/domain/trade/day-logs.ts';
import type { TallyEntry } from '~/schemas/tally-entries.ts';
import { tallyLog } from '~/schemas/tally-log.ts';
import type { TallyView } from '~/schemas/tally-view.ts';

interface Kept {
  readonly id: string;
}
const once = <Row extends Kept>(rows: readonly Row[], row: Row): readonly Row[] => (rows.some(({ id }) => id === row.id) ? rows : [...rows, row]);
const without = <Row extends Kept>(rows: readonly Row[], gone: string): readonly Row[] => rows.filter(({ id }) => id !== gone);

/** The view with one of its logs changed, and everything that follows from its measures worked out anew. */
const withLog = (view: TallyView, id: string, change: (log: DayLog) => Partial<DayLog>): TallyView => ({
  ...view,
  logs: view.logs.map((log) => (log.id === id ? tallyLog({ ...log, ...change(log) }, log.label, view.mill) : log)),
});

function withAllowance(view: TallyView, entry: Extract<TallyEntry, { kind: 'allow' }>): TallyView {
  const { id, what, logId, limitCents, name } = entry;
  if (view.allowances.some((one) => one.id === id)) return view;
  const allowed = { ...view, allowances: [...view.allowances, { id, what, logId, limitCents, name }] };
  if (what === 'metal') return { ...allowed, metalAllowed: view.hits.length };
  return logId === null ? allowed : withLog(allowed, logId, () => ({ agreed: true }));
}

function withEntry(view: TallyView, entry: TallyEntry): TallyView {
  switch (entry.kind) {
    case 'board': {
      const { kind: _, boardKind, ...row } = entry;
      return { ...view, boards: once(view.boards, { ...row, kind: boardKind }) };
    }
    case 'hit': {
      const { kind: _, ...row } = entry;
      return { ...view, hits: once(view.hits, row) };
    }
    case 'cull': {
      const { kind: _, ...row } = entry;
      return { ...view, culls: once(view.culls, row) };
    }
    case 'clock': {
      const { kind: _, ...row } = entry;
      return { ...view, clock: once(view.clock, row) };
    }
    case 'correctClock':
      // A correction that the server has already made is not made twice.
      return { ...view, clock: view.clock.map((row) => (row.id === entry.clockId && (row.startsAt !== entry.startsAt || row.endsAt !== entry.endsAt) ? corrected(row, entry) : row)) };
    case 'remove':
      return { ...view, boards: without(view.boards, entry.id), hits: without(view.hits, entry.id), culls: without(view.culls, entry.id), clock: without(view.clock, entry.id) };
    case 'extras': {
      const { kind: _, id: __, ...changed } = entry;
      const known = Object.fromEntries(Object.entries(changed).filter(([, value]) => value !== undefined));
      return { ...view, extras: { ...view.extras, ...known } };
    }
    case 'start':
      return view.status === 'held' ? { ...view, status: 'sawing' } : view;
    case 'measure': {
      const { smallEndIn, largeEndIn, lengthFt } = entry;
      return withLog(view, entry.logId, () => ({ measured: { smallEndIn, largeEndIn, lengthFt }, agreed: false }));
    }
    case 'addLog': {
      const { id, species, smallEndIn, largeEndIn, lengthFt } = entry;
      const log: DayLog = { id, species, defects: [], listed: { smallEndIn, largeEndIn, lengthFt }, measured: null, added: true, agreed: false };
      return { ...view, logs: once(view.logs, tallyLog(log, entry.label || `Log ${view.logs.length + 1}, added`, view.mill)) };
    }
    case 'allow':
      return withAllowance(view, entry);
    case 'part': {
      const lineIds = [...view.boards, ...view.hits, ...view.culls, ...view.clock].map((line) => line.id);
      return { ...view, parts: once(view.parts, { id: entry.id, name: entry.name, lineIds, costCents: null }) };
    }
    case 'offer':
      return view.status === 'sawing' ? { ...view, status: 'tallied', endedBySawyer: entry.endedBySawyer } : view;
    case 'sign':
      return view.status === 'tallied' ? { ...view, status: 'signed' } : view;
  }
}

/** Lays entries that the server does not have yet over the tally as it last told it. An entry that it has changes nothing. */
export const withEntries = (view: TallyView, entries: readonly TallyEntry[]): TallyView => entries.reduce(withEntry, view);
