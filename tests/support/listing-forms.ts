import { randomUUID } from 'node:crypto';
import { asListingTyped, type ListingTyped, type LogTyped, type PieceTyped } from '~/domain/listing/draft.ts';

/** A log's row as typed; white oak, 18 in at the small end, 12 ft 6 in long, unless told otherwise. */
export const typedLog = (changes: Partial<LogTyped> = {}): LogTyped => ({ id: randomUUID(), species: 'White oak', smallEnd: '18', largeEnd: '20 1/2', length: "12' 6\"", heart: '', defects: '', note: '', ...changes });

/** A row of the cut list as typed. */
export const typedPiece = (changes: Partial<PieceTyped> = {}): PieceTyped => ({ label: 'Table top', thickness: '8/4', width: '8', length: '8', count: '6', sizing: 'full-sawn', kind: 'board', dwelling: '', ...changes });

/** A whole form as a landowner near ZIP 54665 types it: three oak logs, an easy landing, a yard tree. */
export const typedListing = (changes: Partial<ListingTyped> = {}): ListingTyped => ({
  ...asListingTyped({
    treeOwner: 'mine', ownerConfirmed: 'on', howDown: 'uprooted', cameDownOn: '2026-07-18', sealed: 'yes', measured: 'inside', zip: '54665', lat: '43.5561', lng: '-90.8884',
    directions: 'Blue gate, second lane on the left.', truck: 'to-the-logs', gateWidth: '12 ft', slope: 'level', lines: 'none', machine: 'tractor', machineNote: '', water: 'yes', helpers: '2',
    pad: 'on', offDirt: 'on', parallel: 'on', rolling: 'on', reDecks: 'owner', landingNote: '', slabs: 'left', sawdust: 'left', metal: 'lawn-tree', metalNote: '', note: '', closesOn: '2026-08-10',
  }),
  logs: [typedLog(), typedLog({ smallEnd: '16 x 17' }), typedLog({ smallEnd: '14 3/8', largeEnd: '', length: '10' })],
  pieces: [typedPiece()],
  ...changes,
});
