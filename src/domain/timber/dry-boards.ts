import type { TalliedBoard } from '~/domain/trade/tally-count.ts';
import { cutPieces, type CutPlan } from './cut-pieces.ts';
import { sizeAtMoisture, shrinkageByGrain } from './drying.ts';
import type { ProjectPiece } from './project-pieces.ts';
import { speciesOf } from './species.ts';

/** Boards of one green size with what they come to when dry. */
export interface DryBoards {
  readonly id: string;
  readonly species: string;
  readonly greenThicknessIn: number;
  readonly greenWidthIn: number;
  readonly lengthFt: number;
  readonly count: number;
  /** Null when the species has no published shrinkage. Flat-sawn is taken, which shrinks most across the width. */
  readonly dryThicknessIn: number | null;
  readonly dryWidthIn: number | null;
}

/** The boards of a tally by species and size, with their sizes at a moisture content. Lengths do not change. */
export function dryBoards(boards: readonly TalliedBoard[], speciesOfLog: (logId: string | null) => string, moisturePct: number): DryBoards[] {
  const found = new Map<string, DryBoards>();
  for (const board of boards.filter(({ kind }) => kind !== 'slab')) {
    const species = speciesOfLog(board.logId);
    const id = `${species} ${board.thicknessIn} ${board.widthIn} ${board.lengthFt}`;
    const before = found.get(id);
    const { radial, tangential } = speciesOf(species).shrinkagePct;
    const shrinkage = radial === null || tangential === null ? null : shrinkageByGrain({ radial, tangential }, 'flat');
    found.set(id, {
      id, species, greenThicknessIn: board.thicknessIn, greenWidthIn: board.widthIn, lengthFt: board.lengthFt, count: (before?.count ?? 0) + board.count,
      dryThicknessIn: shrinkage && sizeAtMoisture(board.thicknessIn, shrinkage.thicknessPct, moisturePct),
      dryWidthIn: shrinkage && sizeAtMoisture(board.widthIn, shrinkage.widthPct, moisturePct),
    });
  }
  return [...found.values()].sort((a, b) => a.greenThicknessIn - b.greenThicknessIn || b.greenWidthIn - a.greenWidthIn || b.lengthFt - a.lengthFt);
}

/** Pieces of one thickness and width with the boards they are cut from. */
export interface ProjectCut {
  readonly thicknessIn: number;
  readonly widthIn: number;
  readonly plan: CutPlan;
}

const usable = (board: DryBoards): { readonly thicknessIn: number; readonly widthIn: number } => ({ thicknessIn: board.dryThicknessIn ?? board.greenThicknessIn, widthIn: board.dryWidthIn ?? board.greenWidthIn });

/**
 * Cuts a project's pieces from dry boards, the thickest and widest pieces first: each board gives pieces of one thickness and width,
 * taken from the least board that is thick and wide enough. Within one size the cutting along the length is exact.
 */
export function cutProject(boards: readonly DryBoards[], pieces: readonly ProjectPiece[], kerfIn: number): ProjectCut[] {
  const left = new Map(boards.map(({ id, count }) => [id, count]));
  const sizes = [...new Map(pieces.map(({ thicknessIn, widthIn }) => [`${thicknessIn} ${widthIn}`, { thicknessIn, widthIn }])).values()].sort((a, b) => b.thicknessIn - a.thicknessIn || b.widthIn - a.widthIn);
  return sizes.map((size) => {
    const fitting = boards
      .filter((board) => usable(board).thicknessIn >= size.thicknessIn && usable(board).widthIn >= size.widthIn && (left.get(board.id) ?? 0) > 0)
      .sort((a, b) => a.greenThicknessIn * a.greenWidthIn - b.greenThicknessIn * b.greenWidthIn);
    const wanted = pieces.filter((piece) => piece.thicknessIn === size.thicknessIn && piece.widthIn === size.widthIn);
    const plan = cutPieces(fitting.map((board) => ({ id: board.id, lengthIn: board.lengthFt * 12, count: left.get(board.id) ?? 0 })), wanted.map(({ name, lengthIn, count }) => ({ id: name, lengthIn, count })), kerfIn);
    for (const { boardId } of plan.boards) left.set(boardId, (left.get(boardId) ?? 1) - 1);
    return { ...size, plan };
  });
}
