/** The form of a listing exactly as it was typed: every answer is text, so that nothing is ever lost to a parser. */

export interface LogTyped {
  /** Made by whoever adds the row; kept through every save, so that photographs stay tied to their log. */
  readonly id: string;
  readonly species: string;
  /** One reading, or two at right angles: `14 1/2 x 15`. */
  readonly smallEnd: string;
  readonly largeEnd: string;
  readonly length: string;
  /** Diameter of rot or a hole round the heart. */
  readonly heart: string;
  /** Defects brought along from the estimator, as `domain/timber/logs-in-url.ts` writes them (`!sweep-3`). */
  readonly defects: string;
  readonly note: string;
}

export interface PieceTyped {
  readonly label: string;
  readonly thickness: string;
  readonly width: string;
  readonly length: string;
  readonly count: string;
  readonly sizing: string;
  /** A board, a timber round the heart or clear of it, or a slab; empty is a board. */
  readonly kind: string;
  /** `on` or nothing. */
  readonly dwelling: string;
}

const answers = [
  'treeOwner', 'howDown', 'ownerConfirmed', 'cameDownOn', 'sealed', 'measured',
  'zip', 'lat', 'lng', 'directions',
  'truck', 'slope', 'lines', 'machine', 'gateWidth', 'machineNote', 'helpers', 'water',
  'pad', 'offDirt', 'parallel', 'rolling', 'reDecks', 'landingNote', 'slabs', 'sawdust',
  'metal', 'metalNote', 'closesOn', 'note',
] as const;

export type Answer = (typeof answers)[number];

export type ListingTyped = { readonly [A in Answer]: string } & { readonly logs: readonly LogTyped[]; readonly pieces: readonly PieceTyped[] };

/** The names of the single answers, in the form's order. */
export const answerNames: readonly Answer[] = answers;
export const logFields = ['id', 'species', 'smallEnd', 'largeEnd', 'length', 'heart', 'defects', 'note'] as const;
export const pieceFields = ['label', 'thickness', 'width', 'length', 'count', 'sizing', 'kind', 'dwelling'] as const;

export const MOST_LOGS = 200;
export const MOST_PIECES = 50;

const row = <const F extends string>(fields: readonly F[], from: Readonly<Record<string, unknown>>): { readonly [K in F]: string } =>
  Object.fromEntries(fields.map((field) => [field, typeof from[field] === 'string' ? from[field] : ''])) as { readonly [K in F]: string };

export const blankLog = (id: string, species = ''): LogTyped => ({ ...row(logFields, {}), id, species });
export const blankPiece = (): PieceTyped => ({ ...row(pieceFields, {}), sizing: 'full-sawn' });

/** Whether nothing was typed in a log's row that a person would miss. The species alone is carried over from the row above. */
export const isBlankLog = (log: LogTyped): boolean => [log.smallEnd, log.largeEnd, log.length, log.heart, log.note].every((text) => text.trim() === '');
export const isBlankPiece = (piece: PieceTyped): boolean => [piece.label, piece.thickness, piece.width, piece.length, piece.count].every((text) => text.trim() === '');

/** A form nobody has typed in yet. */
export const emptyListing = (): ListingTyped => ({ ...row(answers, {}), sealed: '', measured: 'inside', logs: [], pieces: [] });

const rowsOf = (value: unknown): readonly Readonly<Record<string, unknown>>[] =>
  Array.isArray(value) ? value.filter((one): one is Record<string, unknown> => typeof one === 'object' && one !== null) : [];

/** Makes whatever was stored or sent a typed form: unknown names are dropped, missing ones are empty. */
export function asListingTyped(value: unknown): ListingTyped {
  const from = typeof value === 'object' && value !== null ? (value as Readonly<Record<string, unknown>>) : {};
  const single = row(answers, from);
  return {
    ...single,
    measured: single.measured || 'inside',
    logs: rowsOf(from['logs']).map((log) => row(logFields, log)),
    pieces: rowsOf(from['pieces']).map((piece) => row(pieceFields, piece)),
  };
}

/** Gathers posted names such as `logs.2.smallEnd` into rows, in the order of their numbers. */
export function listingFromFields(fields: Iterable<readonly [name: string, value: string]>): ListingTyped {
  const single: Record<string, string> = {};
  const rows: Record<'logs' | 'pieces', Map<number, Record<string, string>>> = { logs: new Map(), pieces: new Map() };
  for (const [name, value] of fields) {
    const cell = /^(logs|pieces)\.(\d{1,4})\.([A-Za-z]+)$/.exec(name);
    if (!cell) {
      single[name] = value;
      continue;
    }
    const list = rows[cell[1] as 'logs' | 'pieces'];
    const number = Number(cell[2]);
    list.set(number, { ...list.get(number), [cell[3] ?? '']: value });
  }
  const inOrder = (list: Map<number, Record<string, string>>): readonly Record<string, string>[] => [...list].sort(([a], [b]) => a - b).map(([, cells]) => cells);
  return asListingTyped({ ...single, logs: inOrder(rows.logs), pieces: inOrder(rows.pieces) });
}

/** Whether anything at all was typed: a form just opened is not worth keeping. */
export function isUntouched(typed: ListingTyped): boolean {
  const chosen: ReadonlySet<Answer> = new Set(['measured', 'closesOn']);
  return answers.every((name) => chosen.has(name) || typed[name].trim() === '') && typed.logs.every((log) => isBlankLog(log) && log.species.trim() === '') && typed.pieces.every(isBlankPiece);
}

const sameRow = (one: LogTyped | PieceTyped | undefined, other: LogTyped | PieceTyped | undefined): boolean => JSON.stringify(one) === JSON.stringify(other);
const sameRows = (some: readonly (LogTyped | PieceTyped)[], others: readonly (LogTyped | PieceTyped)[]): boolean => some.length === others.length && some.every((one, index) => sameRow(one, others[index]));

/**
 * Lays what a person typed into a form, since it was opened, over another text of the same form.
 * @param opened the form as it was drawn
 * @param now the form as it stands
 * @param base the text to lay it over, such as one that the browser had kept
 * @returns `base` itself when nothing was typed; rows are taken whole, all logs or all pieces
 */
export function typedOver(opened: ListingTyped, now: ListingTyped, base: ListingTyped): ListingTyped {
  const changed = answers.filter((name) => now[name] !== opened[name]);
  const logs = !sameRows(opened.logs, now.logs);
  const pieces = !sameRows(opened.pieces, now.pieces);
  if (changed.length === 0 && !logs && !pieces) return base;
  return { ...base, ...Object.fromEntries(changed.map((name) => [name, now[name]])), ...(logs ? { logs: now.logs } : {}), ...(pieces ? { pieces: now.pieces } : {}) };
}
