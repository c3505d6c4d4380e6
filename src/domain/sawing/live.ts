import { type Board, boardOf } from './board.ts';
import { acrossLog, centredStack, distances, type Layer, type RowRule, type Stack, stackOf } from './layers.ts';
import type { Stock } from './pieces.ts';
import type { RowBoard } from './row.ts';

/** The boards of some layers, flat or turned. */
export function boardsOfLayers(stock: Stock, rule: RowRule, layers: readonly Layer[], turned = false): Board[] {
  return layers.flatMap((layer) => {
    const { far, near } = distances(layer);
    const row: RowBoard[] = [];
    rule.value(layer.group, far, near, row);
    return row.map((board) => boardOf(stock, board, layer.at, turned));
  });
}

/** The stack of flat layers right through the log: every live plan, and the flats below and above a cant. */
export const flatStack = (stock: Stock): Stack => stackOf(stock, acrossLog(stock));

/**
 * Sawn through and through: flat layers of one thickness each, boards side by side in a layer. Exact over every opening.
 * @param stack the flat stack of this stock, when it is already known.
 */
export function livePlan(stock: Stock, stack: Stack = flatStack(stock)): Board[] {
  const rule = acrossLog(stock);
  const layers = stack.layers(-stock.reach);
  return boardsOfLayers(stock, rule, centredStack(stock, rule, layers));
}
