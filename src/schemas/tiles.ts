import { z } from 'zod';
import { DEEPEST_TILE, type Tile } from '~/domain/finding/tiles.ts';
import type { Problem, Result } from '~/domain/result.ts';
import { findingFields } from './listings.ts';

/** What one mill takes whole, as a tile's address says it. */
export interface TakenWhole {
  /** Over the bark, at the largest end. */
  readonly largestLogIn: number;
  readonly longestFt: number;
  readonly shortestFt: number;
}

/** `30x18x4,26x17x4`: what each of a sawyer's mills takes, in the address itself, so that a tile is the same for whoever asks. */
export const takenWholeText = (mills: readonly TakenWhole[]): string => mills.slice(0, 10).map(({ largestLogIn, longestFt, shortestFt }) => [largestLogIn, longestFt, shortestFt].map((size) => Number(size.toFixed(4))).join('x')).join(',');

const measure = '\\d{1,3}(?:\\.\\d{1,4})?';
const takenWhole = z
  .string()
  .regex(new RegExp(`^${measure}(?:x${measure}){2}(?:,${measure}(?:x${measure}){2}){0,9}$`), { error: 'Write what each mill takes as largest log in inches, longest and shortest in feet: 30x18x4, at most ten with commas between.' })
  .transform((text): readonly TakenWhole[] =>
    text.split(',').map((mill) => {
      const [largestLogIn = 0, longestFt = 0, shortestFt = 0] = mill.split('x').map(Number);
      return { largestLogIn, longestFt, shortestFt };
    }),
  );

const { species, minBoardFeet, maxLargestEndIn } = findingFields;

/** `GET /api/tiles/{z}/{x}/{y}`: the list's filters that do not depend on where one stands. */
export const tileQuery = z.strictObject({
  species,
  minBoardFeet,
  maxLargestEndIn,
  closing: z.enum(['1'], { error: 'This is 1 or left out.' }).optional(),
  fits: takenWhole.optional(),
});
export type TileQuery = z.output<typeof tileQuery>;

const whole = (name: string, most: number) =>
  z.string().regex(/^(0|[1-9]\d{0,8})$/, { error: `${name} is a whole number.` }).transform(Number).refine((value) => value <= most, { error: `${name} is at most ${most.toLocaleString('en-US')}.` });

/** The tile that three parts of an address name. Problems when one is no number or outside the map. */
export function readTile(z_: string | undefined, x: string | undefined, y: string | undefined): Result<Tile> {
  const zoom = whole('The zoom', DEEPEST_TILE).safeParse(z_ ?? '');
  if (!zoom.success) return { ok: false, problems: problemsAt('z', zoom.error) };
  const most = 2 ** zoom.data - 1;
  const column = whole('The column', most).safeParse(x ?? '');
  const row = whole('The row', most).safeParse(y ?? '');
  if (column.success && row.success) return { ok: true, value: { z: zoom.data, x: column.data, y: row.data } };
  return { ok: false, problems: [...(column.success ? [] : problemsAt('x', column.error)), ...(row.success ? [] : problemsAt('y', row.error))] };
}

const problemsAt = (path: string, error: z.ZodError): Problem[] => error.issues.map(({ message }) => ({ path, message }));
