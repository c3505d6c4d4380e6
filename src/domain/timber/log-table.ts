import { parseLengthFt, parseLengthIn, parseNumber, type LengthUnit } from '../measure.ts';
import type { Result } from '../result.ts';
import type { Defect } from './defects.ts';
import { estimateLog, type LogInput } from './estimate.ts';
import type { ScaleSettings } from './log-scale.ts';
import { mostLogs, readDefect, writeDefect, type LogGroup } from './logs-in-url.ts';
import { matchSpecies, searchSpecies, speciesOf } from './species.ts';
import { insideBarkIn } from './taper-and-bark.ts';
import { greenWeightWithBark } from './weight.ts';

/** A cell that cannot be used: its line as a person counts them, its column's heading, and what to do. */
export interface TableProblem {
  readonly line: number;
  readonly column: string;
  readonly message: string;
}

export interface LogTable {
  readonly logs: readonly LogGroup[];
  readonly problems: readonly TableProblem[];
  /** Headings that were not understood. */
  readonly unused: readonly string[];
}

type Field = 'species' | 'smallEndIn' | 'smallOverBarkIn' | 'largeEndIn' | 'lengthFt' | 'count' | 'defects';

interface Column {
  readonly field: Field;
  readonly heading: string;
  readonly index: number;
  readonly unit: LengthUnit | null;
}

const headings: readonly (readonly [Field, RegExp])[] = [
  ['defects', /^defects?$/],
  ['species', /^(species|tree|wood|kind|type|timber|species code)( name)?$/],
  ['smallOverBarkIn', /^(dob|(small end |diameter |dia |top )?(over|outside) bark)$/],
  ['largeEndIn', /^(large|big|butt|bottom|led|large end|big end|butt end)( (end|diameter|dia|dib))*$/],
  ['smallEndIn', /^(small|top|sed|dib|d|dia|diam|diameter|small end|top end|scaling)( (end|diameter|dia|dib|inside bark))*$/],
  ['lengthFt', /^(l|len|length|log length|long)$/],
  ['count', /^(n|no|count|qty|quantity|number|pieces|pcs|logs|how many|pieces alike)$/],
];

/** Columns that our own file adds and that are worked out again. */
const workedOut = /^(scientific name|log|#|.* (bf|lb|ft3|ft³)|notes?|remarks?)$/;

const units: readonly (readonly [RegExp, LengthUnit])[] = [
  [/\b(in|inch|inches)$|"$/, 'in'],
  [/\b(ft|feet|foot)$|'$/, 'ft'],
  [/\bmm$/, 'mm'],
  [/\bcm$/, 'cm'],
  [/\b(m|meters?|metres?)$/, 'm'],
];

const plainHeading = (text: string): string => text.trim().toLowerCase().replace(/[()[\],:._-]+/g, ' ').replace(/\s+/g, ' ').trim();

const columnOf = (text: string, index: number): Column | null => {
  const whole = plainHeading(text);
  const found = units.find(([pattern]) => pattern.test(whole) && whole.replace(pattern, '').trim() !== '');
  const name = found ? whole.replace(found[0], '').trim() : whole;
  const match = headings.find(([, pattern]) => pattern.test(name));
  return match ? { field: match[0], heading: text.trim(), index, unit: found?.[1] ?? null } : null;
};

const byPosition: Readonly<Record<number, readonly Field[]>> = {
  3: ['species', 'smallEndIn', 'lengthFt'],
  4: ['species', 'smallEndIn', 'largeEndIn', 'lengthFt'],
  5: ['species', 'smallEndIn', 'largeEndIn', 'lengthFt', 'count'],
};

const fieldNames: Readonly<Record<Field, string>> = {
  species: 'Species', smallEndIn: 'Small end', smallOverBarkIn: 'Over bark', largeEndIn: 'Large end', lengthFt: 'Length', count: 'Count', defects: 'Defects',
};

const isBlank = (row: readonly string[]): boolean => row.every((text) => text.trim() === '');

const between = (read: Result<number>, low: number, high: number, words: string): number | string =>
  !read.ok ? (read.problems[0]?.message ?? words) : read.value >= low && read.value <= high ? read.value : words;

const readSpecies = (text: string): string | { readonly code: string } => {
  const species = matchSpecies(text);
  if (species) return { code: species.code };
  const near = searchSpecies(text).slice(0, 3).map(({ name }) => name);
  return near.length > 0 && near.length < 76 && text.trim() !== '' ? `Which "${text.trim()}"? Write ${near.join(', or ')}.` : `"${text.trim()}" is not a species we know. Write its common or scientific name.`;
};

const readDefects = (text: string): readonly Defect[] | null => {
  const found = text.split(/[\s;]+/).filter((word) => word !== '').map(readDefect);
  return found.every((defect) => defect !== null) ? found : null;
};

/** Reads one line; complains through `wrong` with the field and the words. */
const readRow = (text: (field: Field) => { readonly value: string; readonly unit: LengthUnit | null } | null, wrong: (field: Field, message: string) => void): LogGroup | null => {
  let failed = false;
  const fail = (field: Field, message: string): undefined => {
    failed = true;
    wrong(field, message);
    return undefined;
  };
  const measure = (field: Field, low: number, high: number, words: string): number | undefined => {
    const cell = text(field);
    if (!cell || cell.value.trim() === '') return undefined;
    const read = field === 'lengthFt' ? parseLengthFt(cell.value, cell.unit ?? 'ft') : parseLengthIn(cell.value, cell.unit ?? 'in');
    const value = between(read, low, high, words);
    return typeof value === 'string' ? fail(field, value) : value;
  };
  const species = readSpecies(text('species')?.value ?? '');
  const code = typeof species === 'string' ? fail('species', species) : species.code;
  const inside = measure('smallEndIn', 4, 60, 'The small end is between 4 and 60 in.');
  const overBark = measure('smallOverBarkIn', 4, 80, 'A diameter over bark is between 4 and 80 in.');
  const smallEndIn = inside ?? (overBark !== undefined && code !== undefined ? Math.max(4, insideBarkIn(overBark, speciesOf(code))) : undefined);
  if (smallEndIn === undefined && !failed) fail('smallEndIn', 'The small end is missing.');
  const largeEndIn = measure('largeEndIn', 4, 120, 'The large end is between 4 and 120 in.');
  if (largeEndIn !== undefined && smallEndIn !== undefined && largeEndIn < smallEndIn) fail('largeEndIn', 'The large end is smaller than the small end.');
  const lengthFt = measure('lengthFt', 4, 40, 'The length is between 4 and 40 ft.');
  if (lengthFt === undefined && !failed) fail('lengthFt', 'The length is missing.');
  const countText = text('count')?.value.trim() ?? '';
  const count = countText === '' ? 1 : parseNumber(countText);
  if (count === null || !Number.isInteger(count) || count < 1 || count > mostLogs) fail('count', `The count is a whole number from 1 to ${mostLogs}.`);
  const defects = readDefects(text('defects')?.value ?? '');
  if (defects === null) fail('defects', 'Write defects as the exported table does, for instance wedge-8-90 or section-4.');
  if (failed || code === undefined || smallEndIn === undefined || lengthFt === undefined || count === null || defects === null) return null;
  return { species: code, smallEndIn, ...(largeEndIn === undefined ? {} : { largeEndIn }), lengthFt, count, ...(defects.length === 0 ? {} : { defects }) };
};

/**
 * Reads a table of logs, line by line, with whatever headings it has; units may stand in a heading (`Length (m)`) or a cell.
 * Without headings three columns are species, small end and length; a fourth (large end) comes before the length, a fifth is the count.
 * What can be read is returned together with what cannot; nothing is guessed.
 */
export function readLogTable(rows: readonly (readonly string[])[]): LogTable {
  const first = rows.findIndex((row) => !isBlank(row));
  const head = rows[first];
  if (!head) return { logs: [], problems: [{ line: 1, column: '', message: 'The table is empty. Paste lines with species, small end and length.' }], unused: [] };
  const named = head.map(columnOf);
  const hasHeadings = named.filter((column) => column !== null).length >= 2;
  const columns = hasHeadings
    ? named.filter((column) => column !== null)
    : (byPosition[head.length] ?? []).map((field, index): Column => ({ field, heading: fieldNames[field], index, unit: null }));
  const missing = (['species', 'lengthFt'] as const).filter((field) => !columns.some((column) => column.field === field));
  if (!columns.some(({ field }) => field === 'smallEndIn' || field === 'smallOverBarkIn')) return { logs: [], problems: [{ line: first + 1, column: '', message: 'There is no column for the small end. Head the columns species, small end, length.' }], unused: [] };
  if (missing.length > 0) return { logs: [], problems: missing.map((field) => ({ line: first + 1, column: '', message: `There is no column for the ${fieldNames[field].toLowerCase()}. Head the columns species, small end, length.` })), unused: [] };

  const logs: LogGroup[] = [];
  const problems: TableProblem[] = [];
  rows.forEach((row, index) => {
    if (index < first + (hasHeadings ? 1 : 0) || isBlank(row)) return;
    const cell = (field: Field): { value: string; unit: LengthUnit | null } | null => {
      const column = columns.find((candidate) => candidate.field === field);
      return column ? { value: row[column.index] ?? '', unit: column.unit } : null;
    };
    const log = readRow(cell, (field, message) => problems.push({ line: index + 1, column: columns.find((column) => column.field === field)?.heading ?? fieldNames[field], message }));
    if (log) logs.push(log);
  });
  if (logs.reduce((sum, log) => sum + log.count, 0) > mostLogs) problems.push({ line: first + 1, column: '', message: `That is more than ${mostLogs} logs. Split the table.` });
  const unused = hasHeadings ? head.filter((text, index) => named[index] === null && text.trim() !== '' && !workedOut.test(text.trim().toLowerCase())) : [];
  return { logs, problems, unused };
}

const number = (value: number, decimals: number): string => String(Number(value.toFixed(decimals)));

/** Headings of the table that `writeLogTable` writes; `readLogTable` reads them back. */
export const tableHeadings: readonly string[] = [
  'Species', 'Scientific name', 'Small end in', 'Large end in', 'Length ft', 'Count', 'Defects',
  'International 1/4 bf', 'Scribner Decimal C bf', 'Doyle bf', 'Net International 1/4 bf', 'Net Scribner Decimal C bf', 'Net Doyle bf', 'Huber ft3', 'Green weight with bark lb',
];

const writeRow = ({ count, ...log }: LogGroup, settings: ScaleSettings): readonly string[] => {
  const species = speciesOf(log.species);
  const estimate = estimateLog(log satisfies LogInput, settings);
  const { boardFeet: gross, netBoardFeet: net } = estimate;
  const scales = [gross.internationalQuarter, gross.scribnerDecimalC, gross.doyle, net.internationalQuarter, net.scribnerDecimalC, net.doyle];
  return [
    species.name, species.scientificName, number(log.smallEndIn, 3), log.largeEndIn === undefined ? '' : number(log.largeEndIn, 3), number(log.lengthFt, 3), String(count),
    (log.defects ?? []).map(writeDefect).join(' '), ...scales.map((boardFeet) => number(boardFeet * count, 0)), number(estimate.cubicFeet.huber * count, 2), number(greenWeightWithBark(log, species) * count, 0),
  ];
};

/** A table of the logs with their figures, headings first; figures are for all logs of a line together. */
export const writeLogTable = (logs: readonly LogGroup[], settings: ScaleSettings = {}): readonly (readonly string[])[] => [tableHeadings, ...logs.map((log) => writeRow(log, settings))];
