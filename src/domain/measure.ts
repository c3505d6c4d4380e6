import { good, refused, type Result } from './result.ts';

/** The units people measure in. */
export type LengthUnit = 'in' | 'ft' | 'mm' | 'cm' | 'm';

/** Inches in a unit, exact. */
export const inchesPer: Readonly<Record<LengthUnit, number>> = { in: 1, ft: 12, mm: 1 / 25.4, cm: 1 / 2.54, m: 100 / 2.54 };

/** Changes a length from one unit to another. */
export const convertLength = (value: number, from: LengthUnit, to: LengthUnit): number =>
  from === to ? value : Number(((value * inchesPer[from]) / inchesPer[to]).toPrecision(15));

const unicodeFractions: Readonly<Record<string, string>> = {
  '½': '1/2', '⅓': '1/3', '⅔': '2/3', '¼': '1/4', '¾': '3/4', '⅛': '1/8', '⅜': '3/8', '⅝': '5/8', '⅞': '7/8', '⅕': '1/5', '⅖': '2/5', '⅗': '3/5', '⅘': '4/5', '⅙': '1/6', '⅚': '5/6',
};

const unitWords: Readonly<Record<string, LengthUnit>> = {
  '"': 'in', in: 'in', inch: 'in', inches: 'in', ins: 'in',
  "'": 'ft', ft: 'ft', foot: 'ft', feet: 'ft',
  mm: 'mm', millimeter: 'mm', millimeters: 'mm', millimetre: 'mm', millimetres: 'mm',
  cm: 'cm', centimeter: 'cm', centimeters: 'cm', centimetre: 'cm', centimetres: 'cm',
  m: 'm', meter: 'm', meters: 'm', metre: 'm', metres: 'm',
};

/** Brings the many ways of writing a measure to plain ASCII with spaces. */
const plainText = (text: string): string =>
  text
    .trim()
    .toLowerCase()
    .replace(/[½⅓⅔¼¾⅛⅜⅝⅞⅕⅖⅗⅘⅙⅚]/g, (sign) => ` ${unicodeFractions[sign] ?? ''}`)
    .replace(/(\d+)\u2044(\d+)/g, '$1/$2')
    .replace(/[’‘′ʹ´`]/g, "'")
    .replace(/''|[”“″ʺ]/g, '"')
    .replace(/[‐‑‒–—−]/g, '-')
    .replace(/(\d)\s*-\s*(\d+\s*\/\s*\d)/g, '$1 $2')
    .replace(/('|ft\.?|foot|feet)\s*-\s*(?=\d)/g, '$1 ')
    .replace(/\s*\/\s*/g, '/')
    .replace(/\s+/g, ' ')
    .trim();

/** `1,200` and `1,200.5` hold thousands; `12,5` a decimal comma. */
const decimal = (text: string): number | null => {
  if (/^\d{1,3}(,\d{3})+(\.\d*)?$/.test(text)) return Number(text.replaceAll(',', ''));
  if (/^\d*,\d+$/.test(text)) return Number(text.replace(',', '.'));
  return /^(\d+\.?\d*|\.\d+)$/.test(text) ? Number(text) : null;
};

const quantity = (text: string): number | null => {
  const mixed = /^(?:([\d.,]+) )?(\d+)\/(\d+)$/.exec(text);
  if (!mixed) return decimal(text);
  const whole = mixed[1] === undefined ? 0 : decimal(mixed[1]);
  const denominator = Number(mixed[3]);
  if (whole === null || denominator === 0) return null;
  return whole + Number(mixed[2]) / denominator;
};

/**
 * Reads a number as people write it: `12 3/8`, `12-3/8`, `12⅜`, `12.375`, `12,5` (a decimal comma), `1,200` (thousands).
 * @returns null when it is not one, or is negative.
 */
export const parseNumber = (text: string): number | null => quantity(plainText(text));

const part = /^(\d+\/\d+|[\d.,]+(?: \d+\/\d+)?) ?("|'|[a-z]+\.?)?\s*/;

const say = (assumed: LengthUnit): string =>
  assumed === 'ft' ? 'Write a length, for instance 12, 12 ft 6 in or 3.7 m.' : 'Write a measure, for instance 14 1/2, 1\' 6" or 37 cm.';

/** A bare quantity after written feet is inches (`1' 6`), after written metres centimetres. */
const unitAfter = (previous: LengthUnit | null, wasWritten: boolean, assumed: LengthUnit): LengthUnit | undefined => {
  if (previous === null) return assumed;
  if (!wasWritten) return undefined;
  return previous === 'ft' ? 'in' : previous === 'm' ? 'cm' : undefined;
};

/**
 * Reads a length as people write it, in inches: `12 3/8`, `12-3/8`, `1' 6"`, `1 ft 6 in`, `30 cm`, `2 m 40 cm`, `12,5`, `12⅜`.
 * `assumed` is the unit of a bare number. Quantities go from the larger unit to the smaller.
 * @returns a refusal at `path` when it cannot be read.
 */
export function parseLengthIn(text: string, assumed: LengthUnit = 'in', path = ''): Result<number> {
  let rest = plainText(text);
  let inches = 0;
  let previous: LengthUnit | null = null;
  let wasWritten = false;
  if (rest === '') return refused(path, say(assumed));
  while (rest !== '') {
    const match = part.exec(rest);
    if (!match) return refused(path, say(assumed));
    const value = quantity(match[1] ?? '');
    const word = match[2]?.replace(/\.$/, '');
    const unit: LengthUnit | undefined = word === undefined ? unitAfter(previous, wasWritten, assumed) : unitWords[word];
    if (value === null || unit === undefined) return refused(path, say(assumed));
    if (previous !== null && inchesPer[unit] >= inchesPer[previous]) return refused(path, say(assumed));
    inches += value * inchesPer[unit];
    previous = unit;
    wasWritten = word !== undefined;
    rest = rest.slice(match[0].length).replace(/^,\s*/, '');
  }
  return good(Number(inches.toPrecision(15)));
}

/** Reads a length in feet; a bare number is feet. See `parseLengthIn`. */
export function parseLengthFt(text: string, assumed: LengthUnit = 'ft', path = ''): Result<number> {
  const read = parseLengthIn(text, assumed, path);
  return read.ok ? good(Number((read.value / 12).toPrecision(15))) : read;
}

/** Nothing that is measured is longer; beyond it a fraction of an inch has no meaning. */
const printable = (value: number): boolean => Math.abs(value) < 1e12;

const greatestDivisor = (a: number, b: number): number => (b === 0 ? a : greatestDivisor(b, a % b));

/** A number with a fraction to the nearest 1/16 (or another denominator): `12 3/8`, `3/8`, `0`, `−1/2`. Never NaN: what is not a length prints as `?`. */
export function formatFraction(value: number, denominator: 2 | 4 | 8 | 16 | 32 = 16): string {
  if (!printable(value)) return '?';
  const parts = Math.round(Math.abs(value) * denominator);
  const whole = Math.floor(parts / denominator);
  const left = parts % denominator;
  const divisor = greatestDivisor(left, denominator);
  const fraction = left === 0 ? '' : `${left / divisor}/${denominator / divisor}`;
  const sign = value < 0 && parts > 0 ? '−' : '';
  return `${sign}${whole > 0 || fraction === '' ? whole : ''}${whole > 0 && fraction !== '' ? ' ' : ''}${fraction}`;
}

/** `12 3/8 in` */
export const formatInches = (inches: number, denominator: 2 | 4 | 8 | 16 | 32 = 16): string => `${formatFraction(inches, denominator)} in`;

/** `12 ft 6 in`, `12 ft`, `3/8 in`: inches as feet and inches to 1/16. */
export function formatFeetInches(inches: number, denominator: 2 | 4 | 8 | 16 | 32 = 16): string {
  if (!printable(inches)) return '?';
  const parts = Math.round(Math.abs(inches) * denominator);
  const feet = Math.floor(parts / (12 * denominator));
  const left = (parts - feet * 12 * denominator) / denominator;
  const sign = inches < 0 && parts > 0 ? '−' : '';
  if (feet === 0) return `${sign}${formatInches(left, denominator)}`;
  return left === 0 ? `${sign}${feet} ft` : `${sign}${feet} ft ${formatInches(left, denominator)}`;
}

/** A length given in feet as feet and inches: `12 ft 6 in`. */
export const formatFeet = (feet: number): string => formatFeetInches(feet * 12);

/** Inches in metric: `37.5 cm` below a metre, `3.66 m` from there on. */
export function formatMetric(inches: number): string {
  if (!printable(inches)) return '?';
  const cm = inches * 2.54;
  return Math.abs(cm) < 100 ? `${Number(cm.toFixed(1))} cm` : `${(cm / 100).toFixed(2)} m`;
}
