import { formatFraction, parseLengthIn, parseNumber } from '../measure.ts';
import { good, type Problem, type Result } from '../result.ts';
import { matchSpecies, speciesOf } from './species.ts';
import { thicknessName } from './tally.ts';

/** Boards of one species and size. */
export interface BoardLine {
  readonly species: string;
  readonly thicknessIn: number;
  readonly widthIn: number;
  readonly lengthFt: number;
  readonly count: number;
}

const MOST_LINES = 40;

/** Thickness as the trade says it: hardwood in quarters, softwood in inches. */
export const thicknessOf = ({ species, thicknessIn }: Pick<BoardLine, 'species' | 'thicknessIn'>): string => thicknessName(thicknessIn, speciesOf(species).group).replace(/ in$/, '');

/** A line as `readBoardLines` reads it: `White oak, 5/4, 8, 10, 6`. */
export const boardLine = (line: BoardLine): string => [speciesOf(line.species).name, thicknessOf(line), formatFraction(line.widthIn), formatFraction(line.lengthFt), line.count].join(', ');

function readLine(line: string, at: number): BoardLine | Problem {
  const wrong = (message: string): Problem => ({ path: 'boards', message: `Line ${at + 1}: ${message}` });
  const [name = '', thickness = '', width = '', length = '', count = '', ...more] = line.split(',').map((part) => part.trim());
  if (more.length > 0 || count === '') return wrong('write species, thickness, width, length and how many, parted by commas: White oak, 5/4, 8, 10, 6.');
  const species = matchSpecies(name);
  if (!species) return wrong(`“${name.slice(0, 40)}” is not a species known here.`);
  const [thick, wide, long] = [parseLengthIn(thickness), parseLengthIn(width), parseNumber(length.replace(/\s*(ft|feet|foot|')$/i, ''))];
  if (!thick.ok || thick.value <= 0 || thick.value > 24) return wrong('write the thickness in quarters or inches, like 5/4 or 2.');
  if (!wide.ok || wide.value <= 0 || wide.value > 60) return wrong('write the width in inches, at most 60.');
  if (long === null || long < 1 || long > 40) return wrong('write the length in feet, from 1 to 40.');
  if (!/^\d{1,4}$/.test(count) || Number(count) < 1) return wrong('how many is a whole number from 1.');
  return { species: species.code, thicknessIn: thick.value, widthIn: wide.value, lengthFt: long, count: Number(count) };
}

/** Reads boards as they are typed, one size a line: species, thickness, width in inches, length in feet, how many. Nothing typed is nothing read. */
export function readBoardLines(text: string): Result<readonly BoardLine[]> {
  const lines = text.split('\n').map((line) => line.trim()).filter((line) => line !== '');
  if (lines.length === 0) return { ok: false, problems: [{ path: 'boards', message: 'Write at least one line of boards.' }] };
  if (lines.length > MOST_LINES) return { ok: false, problems: [{ path: 'boards', message: `At most ${MOST_LINES} lines.` }] };
  const read = lines.map(readLine);
  const problems = read.filter((one): one is Problem => 'message' in one);
  return problems.length > 0 ? { ok: false, problems } : good(read.filter((one): one is BoardLine => 'species' in one));
}

/** Boards gathered by species and size, thin before thick, narrow before wide, short before long. */
export function gathered(boards: readonly BoardLine[]): BoardLine[] {
  const found = new Map<string, BoardLine>();
  for (const board of boards) {
    const key = [board.species, board.thicknessIn, board.widthIn, board.lengthFt].join(' ');
    const before = found.get(key);
    found.set(key, before ? { ...before, count: before.count + board.count } : { ...board });
  }
  return [...found.values()].sort((a, b) => a.species.localeCompare(b.species) || a.thicknessIn - b.thicknessIn || a.widthIn - b.widthIn || a.lengthFt - b.lengthFt);
}
