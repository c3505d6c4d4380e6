import { type Board, boardOf, section, totalValue } from './board.ts';
import { distances, heartGap, type RowRule, type Stack, stackOf } from './layers.ts';
import type { Stock, ThicknessGroup } from './pieces.ts';
import { bestRow, pushedOut, type RowBoard } from './row.ts';
import { halfChord, inches, type Units } from './units.ts';

/**
 * Rows of one quarter: boards on the flat whose row begins past the diagonal (|x| ≥ |y| over the whole board, and `clear`
 * more) and ends at the bark, so that every face runs along a radius.
 */
function inQuarter(stock: Stock, clear: Units): RowRule {
  const low: number[] = [];
  const high: number[] = [];
  return {
    value: (group: ThicknessGroup, far: Units, near: Units, boards?: RowBoard[]): number => {
      const start = Math.max(far + clear, heartGap(stock, near), Math.ceil(stock.kerf / 2));
      stock.radiusSquared.forEach((radius, index) => {
        low[index] = start;
        high[index] = halfChord(radius, far);
      });
      if (!boards) return bestRow(group, low, high, stock.kerf);
      const row: RowBoard[] = [];
      const value = bestRow(group, low, high, stock.kerf, row);
      boards.push(...pushedOut(row, high, stock.kerf));
      return value;
    },
  };
}

interface Quarter {
  readonly rule: RowRule;
  readonly stack: Stack;
  readonly value: number;
}

function quarter(stock: Stock, clear: Units): Quarter {
  const rule = inQuarter(stock, clear);
  const stack = stackOf(stock, rule, 0);
  return { rule, stack, value: stack.above(-stock.reach) };
}

/** The boards of two opposite quarters: right and left when flat, top and bottom when turned. */
function twoQuarters(stock: Stock, { rule, stack }: Quarter, turned: boolean): Board[] {
  const layers = stack.layers(-stock.reach);
  return layers.flatMap((layer) => {
    const { far, near } = distances(layer);
    const row: RowBoard[] = [];
    rule.value(layer.group, far, near, row);
    const opposite = row.map((board) => ({ ...board, at: -board.at - board.choice.width }));
    return [...row, ...opposite].map((board) => boardOf(stock, board, layer.at, turned));
  });
}

/** Whether every flat board and every turned board are a kerf apart in x or in y. */
function keepsKerf(stock: Stock, flat: readonly Board[], turned: readonly Board[]): boolean {
  const kerf = inches(stock.kerf) - 1e-9;
  return flat.every((one) => {
    const a = section(one);
    return turned.every((other) => {
      const b = section(other);
      return b.left - a.right >= kerf || a.left - b.right >= kerf || b.bottom - a.top >= kerf || a.bottom - b.top >= kerf;
    });
  });
}

export interface QuarteredPlan {
  readonly boards: Board[];
  /** No quartersawn plan of this log is worth more: four quarters that need not keep a kerf between them. */
  readonly bound: number;
}

/**
 * Quartersawn: each quarter's boards lie along its radius. The quarters are planned apart, each exactly; where boards of two
 * quarters would meet at a diagonal, both or one of them gives way by the kerf, whichever is worth more.
 * @param enough value that is already had: where no quartersawn plan can pass it, none is made.
 */
export function quartersawnPlan(stock: Stock, enough = 0): QuarteredPlan {
  const widest = stock.mill.widestCutIn;
  const free = quarter(stock, 0);
  if (widest !== undefined && widest < 2 * inches(stock.woodRadius)) return { boards: [], bound: 4 * free.value };
  const bound = 4 * free.value;
  if (bound <= enough) return { boards: [], bound };
  const full = { flat: twoQuarters(stock, free, false), turned: twoQuarters(stock, free, true) };
  if (keepsKerf(stock, full.flat, full.turned)) return { boards: [...full.flat, ...full.turned], bound };
  const one = quarter(stock, stock.kerf);
  const two = quarter(stock, 2 * stock.kerf);
  const candidates = [
    [...twoQuarters(stock, one, false), ...twoQuarters(stock, one, true)],
    [...full.flat, ...twoQuarters(stock, two, true)],
    [...full.flat, ...twoQuarters(stock, one, true)],
  ];
  const kept = candidates.filter((boards) => keepsKerf(stock, boards.filter((board) => !board.turned), boards.filter((board) => board.turned)));
  const best = kept.reduce((most, boards) => (totalValue(boards, stock.pieces) > totalValue(most, stock.pieces) ? boards : most), [] as Board[]);
  return { boards: best, bound };
}
