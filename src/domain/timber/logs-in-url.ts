import { good, refused, type Problem, type Result } from '../result.ts';
import type { Defect } from './defects.ts';
import type { LogInput } from './estimate.ts';
import { findSpecies } from './species.ts';

/**
 * The logs of the estimator in a URL (`?logs=`), readable and short:
 * `white-oak_18_20.5_12.5_3~red-pine_14__16`: species, small end, large end (empty when not measured), length, how many alike;
 * then defects, each after a `!`: `!section-4`, `!wedge-8-90`. Diameters inside bark in inches, lengths in feet.
 */
export interface LogGroup extends LogInput {
  /** How many logs are alike. */
  readonly count: number;
}

/** As many logs as one estimate takes. */
export const mostLogs = 1000;

const number = (value: number): string => String(Number(value.toFixed(3)));

const defectFields: Readonly<Record<Defect['kind'], readonly string[]>> = {
  section: ['lengthFt'],
  wedge: ['lengthFt', 'angleDeg'],
  sweep: ['departureIn'],
  crook: ['deflectionIn', 'lengthFt'],
  interiorRot: ['widthIn', 'heightIn', 'lengthFt'],
  squared: ['widthIn', 'heightIn', 'lengthFt'],
};

const isKind = (text: string): text is Defect['kind'] => Object.hasOwn(defectFields, text);

/** A defect as a short word, `wedge-8-90`: its kind, then its measures in the order of `Defect`. */
export const writeDefect = (defect: Defect): string => {
  const values: Readonly<Record<string, unknown>> = { ...defect };
  return `${[defect.kind, ...defectFields[defect.kind].map((field) => number(Number(values[field])))].join('-')}`;
};

/** Writes logs for a URL; the text holds only characters that need no escaping in a query. */
export const writeLogs = (logs: readonly LogGroup[]): string =>
  logs
    .map((log) => {
      const fields = [log.species, number(log.smallEndIn), log.largeEndIn === undefined ? '' : number(log.largeEndIn), number(log.lengthFt), log.count === 1 ? '' : String(log.count)];
      return fields.join('_').replace(/_+$/, '') + (log.defects ?? []).map((defect) => `!${writeDefect(defect)}`).join('');
    })
    .join('~');

const readNumber = (text: string | undefined): number => (text !== undefined && /^\d{1,4}(\.\d{1,3})?$/.test(text) ? Number(text) : Number.NaN);

/** Reads what `writeDefect` wrote, or null. */
export const readDefect = (text: string): Defect | null => {
  const [kind = '', ...values] = text.split('-');
  if (!isKind(kind)) return null;
  const fields = defectFields[kind];
  const numbers = values.map(readNumber);
  if (numbers.length !== fields.length || numbers.some((value) => Number.isNaN(value) || value > 360)) return null;
  const entries = fields.map((field, index) => [field, numbers[index]]);
  return { kind, ...Object.fromEntries(entries) } as Defect;
};

const within = (value: number, low: number, high: number): boolean => value >= low && value <= high;

const readLog = (text: string, path: string): Result<LogGroup> => {
  const [measures = '', ...defectTexts] = text.split('!');
  const [species = '', small, large, length, count, ...tooMuch] = measures.split('_');
  if (!findSpecies(species)) return refused(`${path}.species`, `There is no species "${species}".`);
  const smallEndIn = readNumber(small);
  const lengthFt = readNumber(length);
  const largeEndIn = large === undefined || large === '' ? undefined : readNumber(large);
  const many = count === undefined || count === '' ? 1 : readNumber(count);
  if (!within(smallEndIn, 4, 60)) return refused(`${path}.smallEndIn`, 'The small end is between 4 and 60 in.');
  if (!within(lengthFt, 4, 40)) return refused(`${path}.lengthFt`, 'The length is between 4 and 40 ft.');
  if (largeEndIn !== undefined && !within(largeEndIn, smallEndIn, 120)) return refused(`${path}.largeEndIn`, 'The large end is between the small end and 120 in.');
  if (tooMuch.length > 0 || !Number.isInteger(many) || !within(many, 1, mostLogs)) return refused(`${path}.count`, 'The count is a whole number.');
  const defects = defectTexts.map(readDefect);
  if (defects.some((defect) => defect === null)) return refused(`${path}.defects`, 'A defect of this log cannot be read.');
  const found = defects.filter((defect) => defect !== null);
  return good({ species, smallEndIn, ...(largeEndIn === undefined ? {} : { largeEndIn }), lengthFt, count: many, ...(found.length === 0 ? {} : { defects: found }) });
};

/** Reads logs from a URL. Refuses the whole text, naming every log that cannot be read; an empty text is no logs. */
export function readLogs(text: string): Result<readonly LogGroup[]> {
  if (text === '') return good([]);
  const read = text.split('~').map((log, index) => readLog(log, `logs.${index}`));
  const problems: Problem[] = read.flatMap((result) => (result.ok ? [] : result.problems));
  if (problems.length > 0) return { ok: false, problems };
  const logs = read.flatMap((result) => (result.ok ? [result.value] : []));
  if (logs.reduce((sum, log) => sum + log.count, 0) > mostLogs) return refused('logs', `At most ${mostLogs} logs.`);
  return good(logs);
}

/** Each log by itself: a group of three alike becomes three. */
export const eachLog = (groups: readonly LogGroup[]): readonly LogInput[] =>
  groups.flatMap(({ count, ...log }) => Array.from({ length: count }, (): LogInput => log));
