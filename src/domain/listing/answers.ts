/** The questions of a listing that are answered by choosing: every value once, with the words of the form and of the page. */

export interface Option<V extends string = string> {
  readonly value: V;
  /** On the form, beside the box. */
  readonly label: string;
  /** On the listing's page, after the question's own name. */
  readonly said: string;
  readonly hint?: string;
}

const options = <const V extends string>(...rows: readonly Option<V>[]): readonly Option<V>[] => rows;

export const treeOwners = options(
  { value: 'mine', label: 'It is mine', said: 'the landowner' },
  { value: 'permission', label: 'It is somebody else’s, and I have their permission in writing', said: 'somebody else, with written permission', hint: 'A neighbour, a relative, the town, a utility or an insurer.' },
);

export const waysDown = options(
  { value: 'snapped', label: 'A storm snapped it', said: 'snapped in a storm', hint: 'A snapped stem may hide shake and splits: cut well below the break.' },
  { value: 'uprooted', label: 'A storm uprooted it', said: 'uprooted in a storm', hint: 'The root plate can stand up again when the stem is cut. Leave it to a trained feller.' },
  { value: 'felled', label: 'It was felled', said: 'felled' },
  { value: 'cleared', label: 'It was cleared with others', said: 'cleared with others' },
);

export const trucks = options(
  { value: 'to-the-logs', label: 'A truck and trailer can drive to the logs', said: 'truck and trailer to the logs' },
  { value: 'truck-only', label: 'A truck can, a trailer cannot', said: 'truck without a trailer to the logs' },
  { value: 'part-way', label: 'Only part of the way', said: 'truck part of the way' },
  { value: 'unknown', label: 'I do not know', said: 'not known whether a truck reaches the logs' },
);

export const slopes = options(
  { value: 'level', label: 'Level', said: 'level ground' },
  { value: 'gentle', label: 'Gentle', said: 'gentle slope' },
  { value: 'steep', label: 'Steep', said: 'steep slope', hint: 'Logs roll. Nobody stands below them.' },
);

export const overheadLines = options(
  { value: 'none', label: 'None near', said: 'no overhead lines near' },
  { value: 'near', label: 'Yes, over the logs, the landing or the way in', said: 'overhead lines over the logs, the landing or the way in' },
  { value: 'down', label: 'A line is down', said: 'a line is down', hint: 'Treat it as live and stay away. Call the utility before anything else.' },
  { value: 'unknown', label: 'I do not know', said: 'not known whether there are overhead lines' },
);

export const machines = options(
  { value: 'none', label: 'None', said: 'no machine on site' },
  { value: 'tractor', label: 'Tractor with forks or loader', said: 'tractor with forks or loader on site' },
  { value: 'skid-steer', label: 'Skid steer', said: 'skid steer on site' },
  { value: 'excavator', label: 'Excavator', said: 'excavator on site' },
  { value: 'other', label: 'Something else', said: 'another machine on site' },
);

export const water = options({ value: 'yes', label: 'Yes', said: 'water at the landing' }, { value: 'no', label: 'No', said: 'no water at the landing' });

export const landingTicks = options(
  { value: 'pad', label: 'There is a level, firm pad of about 30 × 30 ft for the mill', said: 'level, firm pad of about 30 × 30 ft' },
  { value: 'offDirt', label: 'The logs lie off the dirt', said: 'logs off the dirt', hint: 'On bunks or poles: dirt in the bark dulls blades.' },
  { value: 'parallel', label: 'They lie side by side, pointing one way', said: 'logs side by side' },
  { value: 'rolling', label: 'They are within rolling distance of the pad', said: 'logs within rolling distance' },
);

export const reDeckers = options(
  { value: 'owner', label: 'I do, before the sawyer comes', said: 'the landowner stacks the logs at the mill beforehand' },
  { value: 'sawyer', label: 'The sawyer, as part of the job', said: 'the sawyer moves the logs to the mill' },
  { value: 'not-needed', label: 'Nobody needs to', said: 'the logs need not be moved' },
);

export const slabEnds = options(
  { value: 'left', label: 'They stay here', said: 'slabs stay' },
  { value: 'bundled', label: 'Bundled and left here', said: 'slabs bundled and left' },
  { value: 'hauled', label: 'Hauled away', said: 'slabs hauled away' },
);

export const sawdustEnds = options({ value: 'left', label: 'It stays where it falls', said: 'sawdust stays' }, { value: 'hauled', label: 'Hauled away', said: 'sawdust hauled away' });

export const metalRisks = options(
  { value: 'none-known', label: 'None known: it grew in the woods', said: 'none known, a woodland tree' },
  { value: 'lawn-tree', label: 'It grew in a yard or by a house', said: 'yard tree: metal likely' },
  { value: 'fence-line', label: 'It grew on a fence line', said: 'fence line: metal likely' },
  { value: 'known-metal', label: 'There is metal in it', said: 'metal in it' },
  { value: 'unknown', label: 'I do not know', said: 'not known' },
);

export const sizings = options(
  { value: 'full-sawn', label: 'Full-sawn', said: 'full-sawn', hint: 'The size you write, rough from the saw.' },
  { value: 'store-size', label: 'Store size', said: 'store size', hint: 'The size it is called in a store: a 2 × 4 is 1 1/2 × 3 1/2 in once planed.' },
);

export const pieceKinds = options(
  { value: 'board', label: 'Board', said: 'board' },
  { value: 'boxed-heart', label: 'Timber, heart boxed', said: 'timber, heart boxed', hint: 'The heart of the tree runs in the middle of it.' },
  { value: 'free-of-heart', label: 'Timber, FOHC', said: 'timber, free of heart centre', hint: 'Cut clear of the heart, so that it checks less.' },
  { value: 'slab', label: 'Live-edge slab', said: 'live-edge slab', hint: 'Both edges left on; the width is the least of its narrower face.' },
);

export const barkChoices = options(
  { value: 'inside', label: 'Wood only, inside the bark', said: 'inside bark' },
  { value: 'over', label: 'Over the bark', said: 'over bark, the bark taken off by species', hint: 'We take off what is usual for the tree.' },
);

/** The words of a chosen value; the value itself when it is not known. */
export const saidOf = (list: readonly Option[], value: string): string => list.find((option) => option.value === value)?.said ?? value;

export interface Access {
  readonly truck: 'to-the-logs' | 'truck-only' | 'part-way' | 'unknown';
  /** The narrowest gate on the way, inches; null when there is none or it is not known. */
  readonly gateWidthIn: number | null;
  readonly slope: 'level' | 'gentle' | 'steep';
  readonly lines: 'none' | 'near' | 'down' | 'unknown';
  readonly machine: 'none' | 'tractor' | 'skid-steer' | 'excavator' | 'other';
  readonly machineNote: string;
  readonly water: 'yes' | 'no';
  /** Grown people who can help. */
  readonly helpers: number;
}

export interface Landing {
  readonly pad: boolean;
  readonly offDirt: boolean;
  readonly parallel: boolean;
  readonly rolling: boolean;
  readonly reDecks: 'owner' | 'sawyer' | 'not-needed';
  readonly note: string;
}

export interface Waste {
  readonly slabs: 'left' | 'bundled' | 'hauled';
  readonly sawdust: 'left' | 'hauled';
}
