import { type Board, boardOf } from './board.ts';
import { distances, heartGap } from './layers.ts';
import { blockedHalfWidth, type Stock, type ThicknessGroup } from './pieces.ts';
import { bestRow, type RowBoard } from './row.ts';
import { halfChord, type Units } from './units.ts';

/** The boards of a thickness that may still be cut. */
function available(group: ThicknessGroup, left: readonly number[]): ThicknessGroup | null {
  const widths = group.widths.flatMap(({ width, choices }) => {
    const open = choices.filter((choice) => (left[choice.piece] ?? 0) > 0);
    return open.length > 0 ? [{ width, choices: open }] : [];
  });
  const narrowest = widths[0]?.width;
  return narrowest === undefined ? null : { ...group, widths, narrowest };
}

/**
 * Fills the run `from … to` of a layer board by board, each time with the first board of the best row of what may still be cut.
 * @param left how many of each piece may still be cut; lowered by what is taken.
 */
export function fillRun(stock: Stock, group: ThicknessGroup, far: Units, from: Units, to: Units, left: number[]): RowBoard[] {
  const taken: RowBoard[] = [];
  for (let start = from; ; ) {
    const open = available(group, left);
    if (!open) return taken;
    const half = stock.radiusSquared.map((radius) => halfChord(radius, far));
    const row: RowBoard[] = [];
    bestRow(open, half.map((each) => (each < 0 ? 0 : Math.max(-each, start))), half.map((each) => Math.min(each, to)), stock.kerf, row);
    const board = row[0];
    if (!board) return taken;
    taken.push(board);
    left[board.choice.piece] = (left[board.choice.piece] ?? 0) - 1;
    start = board.at + board.choice.width + stock.kerf;
  }
}

/** A layer right across the log at `at`, within the counts. */
function layerWithin(stock: Stock, group: ThicknessGroup, at: Units, left: readonly number[]): { readonly row: readonly RowBoard[]; readonly left: number[] } {
  const { far, near } = distances({ group, at });
  const gap = heartGap(stock, near);
  const rest = [...left];
  const row = gap === 0 ? fillRun(stock, group, far, -Infinity, Infinity, rest) : [...fillRun(stock, group, far, -Infinity, -gap, rest), ...fillRun(stock, group, far, gap, Infinity, rest)];
  return { row, left: rest };
}

/**
 * A through-and-through plan that keeps to counts: layers outward from the pith, each time the one that brings most for its height.
 * Not the best there is; good where the log holds about as much as is asked for.
 */
export function greedyLayers(stock: Stock): Board[] {
  const { kerf } = stock;
  const blocked = blockedHalfWidth(stock);
  let left = stock.pieces.map((piece) => piece.count ?? Infinity);
  const boards: Board[] = [];
  const worth = (row: readonly RowBoard[]): number => row.reduce((sum, board) => sum + board.choice.value, 0);
  let [top, bottom] = blocked > 0 ? [blocked - kerf, kerf - blocked] : [NaN, NaN];
  for (;;) {
    let best: { readonly group: ThicknessGroup; readonly at: Units; readonly row: readonly RowBoard[]; readonly left: number[]; readonly gain: number } | undefined;
    for (const group of stock.groups) {
      const places = Number.isNaN(top) ? [Math.ceil(-group.thickness / 2)] : [top + kerf, bottom - kerf - group.thickness];
      for (const at of places) {
        const layer = layerWithin(stock, group, at, left);
        const gain = worth(layer.row) / (group.thickness + kerf);
        if (gain > (best?.gain ?? 0)) best = { group, at, ...layer, gain };
      }
    }
    if (!best) return boards;
    const { at, group } = best;
    left = best.left;
    boards.push(...best.row.map((board) => boardOf(stock, board, at, false)));
    top = Number.isNaN(top) ? at + group.thickness : Math.max(top, at + group.thickness);
    bottom = Number.isNaN(bottom) ? at : Math.min(bottom, at);
  }
}
