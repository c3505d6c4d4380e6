import type { Piece } from '~/domain/sawing/pieces.ts';
import type { Model, Solver } from '~/domain/sawing/solver.ts';

/** Plans on a coarse grid, made without anything of the planner: what it finds must be at least as good. Sizes all of the log's own length. */
export interface GridLog {
  readonly radiusIn: number;
  readonly kerfIn: number;
  readonly lengthFt: number;
  readonly pieces: readonly (Required<Pick<Piece, 'thicknessIn' | 'widthIn'>> & { readonly value?: number | undefined })[];
}

const worth = ({ lengthFt }: GridLog, piece: GridLog['pieces'][number]): number => ((piece.value ?? 1) * piece.thicknessIn * (piece.widthIn as number) * lengthFt) / 12;

/** The best boards of one thickness side by side in a run, by trying every one first. */
export function bestRun(log: GridLog, thicknessIn: number, runIn: number): number {
  return log.pieces
    .filter((piece) => piece.thicknessIn === thicknessIn && (piece.widthIn as number) <= runIn + 1e-9)
    .reduce((most, piece) => Math.max(most, worth(log, piece) + bestRun(log, thicknessIn, runIn - (piece.widthIn as number) - log.kerfIn)), 0);
}

/** Value of a flat layer at a height, cut off at two sides. */
export function layer(log: GridLog, thicknessIn: number, atIn: number, leftIn = -Infinity, rightIn = Infinity): number {
  const far = Math.max(Math.abs(atIn), Math.abs(atIn + thicknessIn));
  if (far >= log.radiusIn) return 0;
  const half = Math.sqrt(log.radiusIn ** 2 - far ** 2);
  return bestRun(log, thicknessIn, Math.min(half, rightIn) - Math.max(-half, leftIn));
}

const thicknesses = (log: GridLog): number[] => [...new Set(log.pieces.map((piece) => piece.thicknessIn))];

/** The best live plan whose layers begin on the grid, by an independent solver: no two layers share a grid line. */
export function liveBySolver(log: GridLog, stepIn: number, solve: Solver): number {
  const lines = Math.ceil((2 * log.radiusIn) / stepIn);
  const columns = thicknesses(log).flatMap((thicknessIn) =>
    Array.from({ length: lines }, (_, line) => ({ line, until: line + Math.ceil((thicknessIn + log.kerfIn) / stepIn - 1e-9), value: layer(log, thicknessIn, line * stepIn - log.radiusIn) })).filter((each) => each.value > 0),
  );
  const model: Model = {
    columns: columns.map(({ value }) => ({ cost: -value, most: 1, whole: true })),
    rows: Array.from({ length: lines }, (_, line) => ({ terms: columns.flatMap((each, index) => (each.line <= line && line < each.until ? [[index, 1] as const] : [])), sign: '<=' as const, rest: 1 })).filter(({ terms }) => terms.length > 1),
  };
  const solution = solve(model, 20);
  if (!solution?.proven) throw new Error('the solver proved nothing');
  return -solution.cost;
}

/** The best stack of layers between two heights, every layer beginning on the grid, by trying each. */
function stack(log: GridLog, fromIn: number, toIn: number, stepIn: number, leftIn: number, rightIn: number): number {
  const lines = Math.round((toIn - fromIn) / stepIn);
  const best = new Array<number>(lines + 2).fill(0);
  for (let line = lines; line >= 0; line--) {
    best[line] = best[line + 1] as number;
    for (const thicknessIn of thicknesses(log)) {
      const at = fromIn + line * stepIn;
      if (at + thicknessIn > toIn + 1e-9) continue;
      const after = Math.min(lines + 1, line + Math.ceil((thicknessIn + log.kerfIn) / stepIn - 1e-9));
      best[line] = Math.max(best[line] as number, layer(log, thicknessIn, at, leftIn, rightIn) + (best[after] as number));
    }
  }
  return best[0] ?? 0;
}

/** The best plan round a cant with its four faces and every layer on the grid, every one tried. */
export function cantByTrying(log: GridLog, stepIn: number): number {
  const faces = Array.from({ length: Math.floor(log.radiusIn / stepIn) * 2 + 1 }, (_, index) => (index - Math.floor(log.radiusIn / stepIn)) * stepIn);
  const beyond = new Map(faces.map((face) => [face, stack(log, face + log.kerfIn, log.radiusIn, stepIn, -Infinity, Infinity)]));
  const beside = new Map<string, number>();
  const sideOf = (face: number, below: number, above: number): number => {
    const key = `${face} ${below} ${above}`;
    const found = beside.get(key) ?? stack(log, face + log.kerfIn, log.radiusIn, stepIn, below, above);
    beside.set(key, found);
    return found;
  };
  let best = 0;
  for (const below of faces) for (const above of faces) {
    if (below >= above) continue;
    const flats = (beyond.get(above) ?? 0) + (beyond.get(-below) ?? 0);
    for (const left of faces) for (const right of faces) {
      if (left >= right) continue;
      best = Math.max(best, flats + sideOf(right, below, above) + sideOf(-left, below, above) + stack(log, below, above, stepIn, left, right));
    }
  }
  return best;
}

/**
 * The best quartersawn plan whose layers begin on the grid, by trying every stack: rows of a quarter begin a kerf past the diagonal of
 * their layer, so that boards of two quarters are never closer than the kerf, and all four quarters are alike.
 */
export function quartersByTrying(log: GridLog, stepIn: number): number {
  const lines = Math.ceil((2 * log.radiusIn) / stepIn);
  const known = new Map<number, number>();
  const from = (line: number): number => {
    if (line >= lines) return 0;
    const found = known.get(line);
    if (found !== undefined) return found;
    const atIn = line * stepIn - log.radiusIn;
    const best = thicknesses(log).reduce((most, thicknessIn) => {
      const far = Math.max(Math.abs(atIn), Math.abs(atIn + thicknessIn));
      const value = layer(log, thicknessIn, atIn, far + log.kerfIn);
      return value > 0 ? Math.max(most, value + from(line + Math.ceil((thicknessIn + log.kerfIn) / stepIn - 1e-9))) : most;
    }, from(line + 1));
    known.set(line, best);
    return best;
  };
  return 4 * from(0);
}
