import { parseLengthIn } from '~/domain/measure.ts';
import { good, type Problem, type Result } from '~/domain/result.ts';

/** A piece of a project, finished sizes in inches. */
export interface ProjectPiece {
  readonly name: string;
  readonly count: number;
  readonly thicknessIn: number;
  readonly widthIn: number;
  readonly lengthIn: number;
}

const MOST_LINES = 40;
const MOST_PIECES = 200;

function readLine(line: string, at: number): ProjectPiece | Problem {
  const wrong = (message: string): Problem => ({ path: 'pieces', message: `Line ${at + 1}: ${message}` });
  const [name = '', count = '', thickness = '', width = '', length = '', ...more] = line.split(',').map((part) => part.trim());
  if (more.length > 0 || length === '') return wrong('write name, how many, thickness, width and length, parted by commas: Leg, 4, 1 1/2, 3, 29.');
  const [thick, wide, long] = [parseLengthIn(thickness), parseLengthIn(width), parseLengthIn(length)];
  if (name === '') return wrong('give the piece a name.');
  if (!/^\d{1,3}$/.test(count) || Number(count) < 1) return wrong('how many is a whole number from 1.');
  if (!thick.ok || !wide.ok || !long.ok || Math.min(thick.value, wide.value, long.value) <= 0) return wrong('write sizes in inches, like 1 1/2 or 29.');
  return { name: name.slice(0, 60), count: Number(count), thicknessIn: thick.value, widthIn: wide.value, lengthIn: long.value };
}

/** Reads a project's pieces as they are typed: one a line, `Leg, 4, 1 1/2, 3, 29` (name, count, thickness, width, length in inches). */
export function readProjectPieces(text: string): Result<readonly ProjectPiece[]> {
  const lines = text.split('\n').map((line) => line.trim()).filter((line) => line !== '');
  if (lines.length > MOST_LINES) return { ok: false, problems: [{ path: 'pieces', message: `At most ${MOST_LINES} lines.` }] };
  const read = lines.map(readLine);
  const problems = read.filter((one): one is Problem => 'message' in one);
  const pieces = read.filter((one): one is ProjectPiece => 'lengthIn' in one);
  if (problems.length > 0) return { ok: false, problems };
  if (pieces.reduce((sum, { count }) => sum + count, 0) > MOST_PIECES) return { ok: false, problems: [{ path: 'pieces', message: `At most ${MOST_PIECES} pieces.` }] };
  return good(pieces);
}
