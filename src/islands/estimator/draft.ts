import { formatFraction, parseLengthFt, parseLengthIn, parseNumber } from '~/domain/measure.ts';
import type { Result } from '~/domain/result.ts';
import type { Defect, DefectKind } from '~/domain/timber/defects.ts';
import { mostLogs, type LogGroup } from '~/domain/timber/logs-in-url.ts';
import { findSpecies } from '~/domain/timber/species.ts';
import { insideBarkIn, meanDiameterIn } from '~/domain/timber/taper-and-bark.ts';
import type { Units } from '~/islands/logs/words.ts';

/** The form of one log, as typed. */
export interface Draft {
  /** A species code, or empty. */
  readonly species: string;
  readonly small: string;
  readonly smallAcross: string;
  readonly overBark: boolean;
  readonly large: string;
  readonly length: string;
  readonly count: string;
  readonly defects: readonly DraftDefect[];
}

export interface DraftDefect {
  readonly kind: DefectKind;
  readonly values: Readonly<Record<string, string>>;
}

export const emptyDraft: Draft = { species: '', small: '', smallAcross: '', overBark: false, large: '', length: '', count: '1', defects: [] };

interface DefectField {
  readonly field: string;
  readonly label: string;
  readonly unit: 'in' | 'ft' | 'deg';
}

const alongFt: DefectField = { field: 'lengthFt', label: 'Length along the log', unit: 'ft' };

/** What is asked for each kind of defect, in words a landowner knows. */
export const defectForms: Readonly<Record<DefectKind, { readonly hint: string; readonly fields: readonly DefectField[] }>> = {
  section: { hint: 'A stretch that gives no boards at all: a crotch, a rotten end.', fields: [alongFt] },
  wedge: { hint: 'A slice like a piece of pie: a lightning scar, a fire scar, a seam.', fields: [alongFt, { field: 'angleDeg', label: 'Angle of the slice', unit: 'deg' }] },
  sweep: { hint: 'The whole log bends: stretch a string from end to end and measure the widest gap.', fields: [{ field: 'departureIn', label: 'Widest gap', unit: 'in' }] },
  crook: { hint: 'One end kinks away from the rest.', fields: [{ field: 'deflectionIn', label: 'How far it kinks', unit: 'in' }, alongFt] },
  interiorRot: { hint: 'Rot or a hole inside: its width and height on the end.', fields: [{ field: 'widthIn', label: 'Width', unit: 'in' }, { field: 'heightIn', label: 'Height', unit: 'in' }, alongFt] },
  squared: { hint: 'A block of bad wood, boxed in: board feet come straight off.', fields: [{ field: 'widthIn', label: 'Width', unit: 'in' }, { field: 'heightIn', label: 'Height', unit: 'in' }, alongFt] },
};

export interface ReadDraft {
  /** The log, when nothing is missing or wrong. */
  readonly log: LogGroup | null;
  /** What is wrong, by field; a field left empty counts only when the log is added. */
  readonly problems: Readonly<Record<string, string>>;
  readonly missing: Readonly<Record<string, string>>;
}

const inLimits = (read: Result<number>, low: number, high: number, words: string): number | string =>
  read.ok ? (read.value >= low - 1e-9 && read.value <= high + 1e-9 ? read.value : words) : (read.problems[0]?.message ?? words);

const readDefect = ({ kind, values }: DraftDefect, units: Units): Defect | string => {
  const read: Record<string, number> = {};
  for (const { field, label, unit } of defectForms[kind].fields) {
    const text = values[field] ?? '';
    const value = unit === 'deg' ? parseNumber(text.replace(/°|deg(rees)?/g, '')) : number(unit === 'ft' ? parseLengthFt(text, units === 'us' ? 'ft' : 'm') : parseLengthIn(text, units === 'us' ? 'in' : 'cm'));
    const most = unit === 'deg' ? 360 : unit === 'ft' ? 40 : 120;
    if (value === null || value > most || (value <= 0 && field !== 'departureIn')) return `${label}: write a ${unit === 'deg' ? 'number of degrees up to 360' : `measure up to ${most} ${unit}`}.`;
    read[field] = value;
  }
  return { kind, ...read } as Defect;
};

const number = (read: Result<number>): number | null => (read.ok ? read.value : null);

/** Understands the form, field by field. */
export function readDraft(draft: Draft, units: Units): ReadDraft {
  const problems: Record<string, string> = {};
  const missing: Record<string, string> = {};
  const across = units === 'us' ? 'in' : 'cm';
  const measure = (field: 'small' | 'smallAcross' | 'large' | 'length', low: number, high: number, words: string): number | undefined => {
    const text = draft[field].trim();
    if (text === '') return undefined;
    const value = inLimits(field === 'length' ? parseLengthFt(text, units === 'us' ? 'ft' : 'm') : parseLengthIn(text, across), low, high, words);
    if (typeof value === 'number') return value;
    problems[field] = value;
    return undefined;
  };
  const species = findSpecies(draft.species);
  if (!species) missing['species'] = 'Choose the species. If you are not sure, take the nearest you know.';
  const reading = measure('small', 4, 80, 'The small end is between 4 and 60 in, inside bark.');
  const atRightAngles = measure('smallAcross', 4, 80, 'The second reading is between 4 and 60 in.');
  if (draft.small.trim() === '') missing['small'] = 'Measure the small end.';
  const mean = reading === undefined ? undefined : meanDiameterIn(reading, atRightAngles);
  const smallEndIn = mean === undefined || !species ? mean : draft.overBark ? insideBarkIn(mean, species) : mean;
  if (smallEndIn !== undefined && !problems['small'] && (smallEndIn < 4 || smallEndIn > 60)) problems['small'] = 'The small end is between 4 and 60 in, inside bark.';
  const bigReading = measure('large', 4, 140, 'The large end is between 4 and 120 in.');
  const largeEndIn = bigReading === undefined || !species || !draft.overBark ? bigReading : insideBarkIn(bigReading, species);
  if (largeEndIn !== undefined && smallEndIn !== undefined && largeEndIn < smallEndIn) problems['large'] = 'The large end is smaller than the small end. Swap them, or measure again.';
  if (largeEndIn !== undefined && largeEndIn > 120) problems['large'] = 'The large end is between 4 and 120 in.';
  const lengthFt = measure('length', 4, 40, 'The length is between 4 and 40 ft.');
  if (draft.length.trim() === '') missing['length'] = 'Measure the length.';
  const count = draft.count.trim() === '' ? 1 : parseNumber(draft.count);
  if (count === null || !Number.isInteger(count) || count < 1 || count > mostLogs) problems['count'] = `Write a whole number from 1 to ${mostLogs}.`;
  const defects = draft.defects.map((defect, index) => {
    const read = readDefect(defect, units);
    if (typeof read !== 'string') return read;
    const untouched = Object.values(defect.values).every((text) => text.trim() === '');
    (untouched ? missing : problems)[`defect-${index}`] = read;
    return null;
  });
  const complete = species && smallEndIn !== undefined && lengthFt !== undefined && count !== null && Object.keys(problems).length === 0;
  const sound = defects.filter((defect) => defect !== null);
  const log = complete ? { species: species.code, smallEndIn, ...(largeEndIn === undefined ? {} : { largeEndIn }), lengthFt, count, ...(sound.length === 0 ? {} : { defects: sound }) } : null;
  return { log, problems, missing };
}

const inchText = (inches: number, units: Units): string => (units === 'us' ? formatFraction(inches) : String(Number((inches * 2.54).toFixed(1))));
const feetText = (feet: number, units: Units): string => (units === 'us' ? (Number.isInteger(feet) ? String(feet) : `${Math.floor(feet)} ft ${formatFraction((feet - Math.floor(feet)) * 12)} in`) : String(Number((feet * 0.3048).toFixed(2))));

/** A log of the list as a form again. */
export function draftOf(log: LogGroup, units: Units): Draft {
  return {
    ...emptyDraft,
    species: log.species,
    small: inchText(log.smallEndIn, units),
    large: log.largeEndIn === undefined ? '' : inchText(log.largeEndIn, units),
    length: feetText(log.lengthFt, units),
    count: String(log.count),
    defects: (log.defects ?? []).map((defect) => {
      const measures: Readonly<Record<string, unknown>> = { ...defect };
      const values = defectForms[defect.kind].fields.map(({ field, unit }) => {
        const value = Number(measures[field]);
        return [field, unit === 'deg' ? String(value) : unit === 'ft' ? feetText(value, units) : inchText(value, units)];
      });
      return { kind: defect.kind, values: Object.fromEntries(values) as Record<string, string> };
    }),
  };
}
