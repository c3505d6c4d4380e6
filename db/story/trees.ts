import type { PieceKind } from '../../src/domain/sawing/piece-kind.ts';
import { randomUUID } from 'node:crypto';
import { asListingTyped, type ListingTyped, type LogTyped, type PieceTyped } from '../../src/domain/listing/draft.ts';
import type { Calendar } from './calendar.ts';

/** The night of the windstorm, in days from today. */
export const STORM = -38;

/** A listing to be: the form as its landowner types it, and when. Days count from today. */
export interface Tree {
  readonly key: string;
  readonly owner: string;
  readonly zip: string;
  /** Miles north and east of the middle of the ZIP code's area. */
  readonly away: readonly [north: number, east: number];
  readonly logs: readonly LogTyped[];
  readonly pieces: readonly PieceTyped[];
  readonly where: keyof typeof grounds;
  /** Null: the draft was never published. */
  readonly listed: number | null;
  readonly closes: number;
  readonly note: string;
  readonly answers?: Partial<Omit<ListingTyped, 'logs' | 'pieces'>>;
  /** Pictures of log ends and of the landing that go with it. */
  readonly pictures?: number;
}

/** Logs of one species, each `small end, large end, length`: inches inside bark, and feet with the trim; `-` for an end not measured. */
export const logs = (species: string, ...measures: readonly string[]): readonly LogTyped[] =>
  measures.map((measure) => {
    const [smallEnd = '', largeEnd = '', length = '', ...note] = measure.split(' ');
    return { id: randomUUID(), species, smallEnd, largeEnd: largeEnd === '-' ? '' : largeEnd, length, heart: '', defects: '', note: note.join(' ') };
  });

/** A line of a cut list: `count × thickness × width × length`, as people write it. */
export const piece = (label: string, size: string, sizing: 'full-sawn' | 'store-size' = 'full-sawn', dwelling = '', kind: PieceKind = 'board'): PieceTyped => {
  const [count = '', thickness = '', width = '', length = ''] = size.split(' ');
  return { label, count, thickness, width, length, sizing, kind, dwelling };
};

const easy = { truck: 'to-the-logs', slope: 'level', lines: 'none', machine: 'tractor', machineNote: '', helpers: '2', water: 'yes', pad: 'on', offDirt: 'on', parallel: 'on', rolling: 'on', reDecks: 'owner', slabs: 'left', sawdust: 'left' } as const;

/** Where logs come to lie, with what follows for access, landing and metal. */
const grounds = {
  yard: { ...easy, gateWidth: '10 ft', machine: 'none', offDirt: '', helpers: '1', metal: 'lawn-tree', metalNote: 'A swing hung in it once.' },
  field: { ...easy, gateWidth: '14 ft', metal: 'none-known', metalNote: '' },
  fence: { ...easy, gateWidth: '12 ft', metal: 'fence-line', metalNote: 'Three strands of wire went past it.' },
  woods: { ...easy, truck: 'part-way', slope: 'gentle', water: 'no', parallel: '', rolling: '', reDecks: 'sawyer', gateWidth: '', machine: 'skid-steer', metal: 'none-known', metalNote: '' },
  hill: { ...easy, truck: 'truck-only', slope: 'steep', pad: '', water: 'no', reDecks: 'owner', gateWidth: '11 ft', metal: 'unknown', metalNote: '' },
} as const;

const MILES_PER_DEGREE = 69;

/** The form as typed. @param middle of the ZIP code's area */
export function typedForm(tree: Tree, middle: { readonly lat: number; readonly lng: number }, calendar: Calendar): ListingTyped {
  const [north, east] = tree.away;
  const lat = middle.lat + north / MILES_PER_DEGREE;
  const lng = middle.lng + east / (MILES_PER_DEGREE * Math.cos((lat * Math.PI) / 180));
  return {
    ...asListingTyped({
      treeOwner: 'mine', ownerConfirmed: 'on', howDown: 'uprooted', cameDownOn: calendar.day(STORM), sealed: 'yes', measured: 'inside', zip: tree.zip, lat: lat.toFixed(5), lng: lng.toFixed(5),
      directions: 'The green fire number at the lane, then left past the barn.', landingNote: '', ...grounds[tree.where], note: tree.note, closesOn: calendar.day(tree.closes), ...tree.answers,
    }),
    logs: tree.logs,
    pieces: tree.pieces,
  };
}
