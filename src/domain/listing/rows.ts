import { PIECE_KINDS, type PieceKind } from '../sawing/piece-kind.ts';
import { formatFraction, formatInches, parseLengthFt, parseLengthIn, parseNumber } from '../measure.ts';
import { good, refused, type Problem, type Result } from '../result.ts';
import type { Defect } from '../timber/defects.ts';
import { readDefect } from '../timber/logs-in-url.ts';
import { matchSpecies, searchSpecies, type Species } from '../timber/species.ts';
import { insideBarkIn, meanDiameterIn } from '../timber/taper-and-bark.ts';
import type { LogTyped, PieceTyped } from './draft.ts';

/** A log as it was understood: inside bark, inches and feet. */
export interface LogRead {
  readonly id: string;
  readonly species: string;
  readonly smallEndIn: number;
  readonly largeEndIn: number | null;
  readonly lengthFt: number;
  readonly heartDefectIn: number | null;
  readonly defects: readonly Defect[];
  readonly note: string;
}

export interface PieceRead {
  readonly label: string;
  readonly thicknessIn: number;
  readonly widthIn: number;
  readonly lengthFt: number;
  readonly count: number;
  readonly sizing: 'full-sawn' | 'store-size';
  readonly forDwelling: boolean;
  readonly kind: PieceKind;
}

export type Measured = 'inside' | 'over';

/** Collects the problems of several fields, so that all are named at once. */
class Reading {
  readonly problems: Problem[] = [];
  take<T>(field: string, result: Result<T>): T | null {
    if (result.ok) return result.value;
    this.problems.push({ path: field, message: result.problems[0]?.message ?? '' });
    return null;
  }
  say(field: string, message: string): void {
    this.problems.push({ path: field, message });
  }
}

/** A diameter as one reading, or two at right angles whose mean counts: `14 1/2`, `14 x 15 1/2`, `37 cm and 39 cm`. */
export function readDiameterIn(text: string): Result<number> {
  const readings = text.split(/\s*(?:×|\bx\b|(?<=[\d"'])x(?=\d)|\*|&|\band\b|\bby\b)\s*/i);
  if (readings.length > 2) return refused('', 'Write one reading, or two at right angles like 14 x 15 1/2.');
  const [first, second] = readings.map((reading) => parseLengthIn(reading));
  if (first && !first.ok) return first;
  if (second && !second.ok) return second;
  if (!first) return refused('', 'Write the diameter, for instance 14 1/2.');
  return good(meanDiameterIn(first.value, second?.value));
}

function readSpecies(text: string): Result<Species> {
  const found = matchSpecies(text);
  if (found) return good(found);
  if (text.trim() === '') return refused('', 'Say what kind of tree it is. When unsure, ask a forester or take a leaf and bark to a nursery.');
  const near = searchSpecies(text).slice(0, 3).map(({ name }) => name);
  return refused('', near.length > 0 ? `Which one: ${near.join(', ')}?` : `We have no species called “${text.trim()}”. Choose one from the list.`);
}

const between = (value: number, least: number, most: number, words: string): Result<number> => (value >= least && value <= most ? good(value) : refused('', words));

function readSmallEnd(typed: string, takeOffBark: (reading: number) => number): Result<number> {
  if (typed.trim() === '') return refused('', 'Write the diameter of the small end, for instance 14 1/2.');
  const read = readDiameterIn(typed);
  if (!read.ok) return read;
  const inside = takeOffBark(read.value);
  if (inside <= 0) return refused('', 'A log end has a diameter. Measure the wood across the small end.');
  const found = formatInches(inside);
  return between(inside, 4, 60, inside < 4 ? `The small end is ${found} of wood; under 4 in it gives no board.` : `The small end comes to ${found}; the most we take is 60 in. Check the unit: a bare number is inches.`);
}

function readLargeEnd(typed: string, takeOffBark: (reading: number) => number, smallEndIn: number | null): Result<number | null> {
  if (typed.trim() === '') return good(null);
  const read = readDiameterIn(typed);
  if (!read.ok) return read;
  const inside = takeOffBark(read.value);
  if (smallEndIn !== null && inside < smallEndIn) {
    return refused('', `The large end (${formatInches(inside)}) is smaller than the small end (${formatInches(smallEndIn)}). Swap them, or measure again.`);
  }
  return between(inside, 4, 120, `The large end comes to ${formatInches(inside)}; between 4 and 120 in. Check the unit: a bare number is inches.`);
}

function readLength(typed: string): Result<number> {
  if (typed.trim() === '') return refused('', 'Write the length, for instance 8 ft 6 in. A bare number is feet.');
  const read = parseLengthFt(typed);
  if (!read.ok) return read;
  const feet = read.value;
  if (feet > 40) {
    const inInches = /^\s*[\d.]+\s*$/.test(typed) && feet / 12 >= 4 && feet / 12 <= 40 ? ` If you meant inches, write ${formatFraction(feet)} in.` : ' List each log that the stem is cut into by itself.';
    return refused('', `${formatFraction(feet)} ft is longer than a mobile mill takes: at most 40 ft.${inInches}`);
  }
  return between(feet, 4, 40, `${formatFraction(feet)} ft is too short to saw: at least 4 ft.`);
}

function readHeart(typed: string, smallEndIn: number | null): Result<number | null> {
  if (typed.trim() === '') return good(null);
  const read = readDiameterIn(typed);
  if (!read.ok) return read;
  if (read.value === 0) return good(null);
  if (smallEndIn !== null && read.value >= smallEndIn) return refused('', 'The rot is as wide as the log: leave this log out, or measure again.');
  return read;
}

/** Reads one row of the logs. Problems carry the field's own name (`smallEnd`). */
export function readLogRow(typed: LogTyped, measured: Measured): Result<LogRead> {
  const reading = new Reading();
  const species = reading.take('species', readSpecies(typed.species));
  // Without a species the bark is not known; the reading is then checked as it stands.
  const takeOffBark = (inches: number): number => (measured === 'over' && species ? insideBarkIn(inches, species) : inches);
  const smallEndIn = reading.take('smallEnd', readSmallEnd(typed.smallEnd, takeOffBark));
  const largeEndIn = reading.take('largeEnd', readLargeEnd(typed.largeEnd, takeOffBark, smallEndIn));
  const lengthFt = reading.take('length', readLength(typed.length));
  const heartDefectIn = reading.take('heart', readHeart(typed.heart, smallEndIn));
  const defects = typed.defects.split('!').filter((one) => one !== '').map(readDefect);
  if (typed.note.length > 500) reading.say('note', 'Keep the note to 500 characters.');
  if (!species || smallEndIn === null || lengthFt === null || reading.problems.length > 0) return { ok: false, problems: reading.problems };
  return good({
    id: typed.id, species: species.code, smallEndIn, largeEndIn, lengthFt, heartDefectIn,
    defects: defects.filter((defect) => defect !== null), note: typed.note.trim(),
  });
}

const size = (typed: string, read: (text: string) => Result<number>, least: number, most: number, missing: string, unit: string): Result<number> => {
  if (typed.trim() === '') return refused('', missing);
  const found = read(typed);
  return found.ok ? between(found.value, least, most, `Between ${formatFraction(least)} and ${most} ${unit}.`) : found;
};

/** Reads one row of the cut list. Hardwood quarters (`5/4`) are inches as they stand. Problems carry the field's own name. */
export function readPieceRow(typed: PieceTyped): Result<PieceRead> {
  const reading = new Reading();
  const thicknessIn = reading.take('thickness', size(typed.thickness, parseLengthIn, 0.25, 24, 'Write the thickness, for instance 1, 5/4 or 2.', 'in'));
  const widthIn = reading.take('width', size(typed.width, parseLengthIn, 0.5, 60, 'Write the width, for instance 6.', 'in'));
  const lengthFt = reading.take('length', size(typed.length, parseLengthFt, 0.5, 40, 'Write the length, for instance 8 ft. A bare number is feet.', 'ft'));
  const count = typed.count.trim() === '' ? 1 : parseNumber(typed.count);
  if (count === null || !Number.isInteger(count) || count < 1 || count > 5000) reading.say('count', 'Write how many, as a whole number.');
  const sizing = typed.sizing === 'store-size' ? 'store-size' : 'full-sawn';
  if (typed.label.length > 120) reading.say('label', 'Keep this to 120 characters.');
  if (thicknessIn === null || widthIn === null || lengthFt === null || count === null || reading.problems.length > 0) return { ok: false, problems: reading.problems };
  return good({ label: typed.label.trim(), thicknessIn, widthIn, lengthFt, count, sizing, forDwelling: typed.dwelling !== '', kind: PIECE_KINDS.find((kind) => kind === typed.kind) ?? 'board' });
}
