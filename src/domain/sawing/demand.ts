import type { WantedPiece } from './cut-list.ts';
import { boardFeet } from './pieces.ts';
import type { PieceKind } from './piece-kind.ts';

/** One wanted size of a kind, all pieces of it together. */
export interface Demand {
  readonly ids: readonly string[];
  readonly kind: PieceKind;
  readonly thicknessIn: number;
  readonly widthIn: number;
  readonly lengthFt: number;
  readonly count: number;
  /** Of one piece. */
  readonly boardFeet: number;
}

/** The wanted sizes, each of a kind once. */
export function demandOf(pieces: readonly WantedPiece[]): Demand[] {
  const found = new Map<string, Demand>();
  for (const { id, thicknessIn, widthIn, lengthFt, count, kind = 'board' } of pieces) {
    const key = `${thicknessIn} ${widthIn} ${lengthFt} ${kind}`;
    const same = found.get(key);
    found.set(key, { ids: [...(same?.ids ?? []), id], kind, thicknessIn, widthIn, lengthFt, count: (same?.count ?? 0) + count, boardFeet: boardFeet(thicknessIn, widthIn, lengthFt) });
  }
  return [...found.values()];
}
