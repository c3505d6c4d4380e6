import { bandWorks } from './band.ts';
import { type Board, section } from './board.ts';
import { acrossLog, mirrored } from './layers.ts';
import { boardsOfLayers, flatStack } from './live.ts';
import type { LogShape } from './log-shape.ts';
import { type Mill, type Piece, stockOf } from './pieces.ts';
import { unitsUp } from './units.ts';

/**
 * Boards from the wood round others that are already planned, flat or turned: flat ones above and below them all, turned ones on both
 * sides of them. The given boards stay where they are; what comes back begins a kerf beyond them.
 * @param piece what is cut there; its boards carry index 0.
 */
export function fillRound(log: LogShape, mill: Mill, boards: readonly Board[], piece: Piece, waneAllowanceIn = 0): Board[] {
  if (boards.length === 0) return [];
  const stock = stockOf(log, mill, [piece], waneAllowanceIn);
  const { kerf } = stock;
  const sections = boards.map(section);
  const top = unitsUp(Math.max(...sections.map((each) => each.top)));
  const bottom = unitsUp(-Math.min(...sections.map((each) => each.bottom)));
  const right = unitsUp(Math.max(...sections.map((each) => each.right)));
  const left = unitsUp(-Math.min(...sections.map((each) => each.left)));
  const flats = flatStack(stock);
  const flat = acrossLog(stock);
  const clear = Math.ceil(stock.heart);
  const band = { below: bottom, above: top };
  const tooTall = mill.widestCutIn !== undefined && bottom + top > unitsUp(mill.widestCutIn);
  const works = tooTall ? null : bandWorks(stock);
  const sides = works ? [...works.columnsFrom(band, Math.max(clear, right + kerf)), ...mirrored(works.columnsFrom(band, Math.max(clear, left + kerf)))] : [];
  return [
    ...boardsOfLayers(stock, flat, flats.layers(top + kerf)),
    ...boardsOfLayers(stock, flat, mirrored(flats.layers(bottom + kerf))),
    ...boardsOfLayers(stock, acrossLog(stock, -bottom, top), sides, true),
  ];
}
