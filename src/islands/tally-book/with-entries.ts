import type { TallyEntry } from '~/schemas/tally-entries.ts';
import type { TallyView } from '~/schemas/tally-view.ts';

interface Kept {
  readonly id: string;
}
const once = <Row extends Kept>(rows: readonly Row[], row: Row): readonly Row[] => (rows.some(({ id }) => id === row.id) ? rows : [...rows, row]);
const without = <Row extends Kept>(rows: readonly Row[], gone: string): readonly Row[] => rows.filter(({ id }) => id !== gone);

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
    case 'remove':
      return { ...view, boards: without(view.boards, entry.id), hits: without(view.hits, entry.id), culls: without(view.culls, entry.id), clock: without(view.clock, entry.id) };
    case 'extras': {
      const { kind: _, id: __, ...changed } = entry;
      const known = Object.fromEntries(Object.entries(changed).filter(([, value]) => value !== undefined));
      return { ...view, extras: { ...view.extras, ...known } };
    }
    case 'start':
      return view.status === 'held' ? { ...view, status: 'sawing' } : view;
  }
}

/** Lays entries that the server does not have yet over the tally as it last told it. An entry that it has changes nothing. */
export const withEntries = (view: TallyView, entries: readonly TallyEntry[]): TallyView => entries.reduce(withEntry, view);
