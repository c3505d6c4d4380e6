import { type Band, type BandPlan, bandWorks } from './band.ts';
import { type Board, section } from './board.ts';
import { acrossLog, mirrored, type Stack } from './layers.ts';
import { boardsOfLayers } from './live.ts';
import { blockedHalfWidth, type Stock } from './pieces.ts';
import { FACE_GRID, type Units, unitsUp } from './units.ts';

export interface CantPlan {
  readonly boards: Board[];
  /** What no cant plan of this log passes, as far as the search went; only meant when `stock.oneLength`. */
  readonly bound: number;
}

interface Node {
  readonly below: readonly [Units, Units];
  readonly above: readonly [Units, Units];
  /** Best contents of the tallest band of the node. */
  readonly inside: number;
  readonly bound: number;
}

/** How hard to look: bands examined before the search stops with what it has and a bound for the rest. */
export const THOROUGH = 700;
export const QUICK = 60;

/**
 * Sawn round a cant: flats below and above a band, turned boards beside a rectangle in it, the rectangle resawn in layers of one
 * orientation. The two flats are searched on a grid of 1/32 in by branch and bound (a band holds no less than a narrower one, the
 * flats beyond it no more), so what is cut off is proven worse; everything inside is placed exactly.
 * @param flats the flat stack of the same stock.
 * @param enough value that is already had: nothing below it is looked for.
 */
export function cantPlan(stock: Stock, flats: Stack, enough = 0, effort = THOROUGH): CantPlan {
  const works = bandWorks(stock);
  const { kerf, reach } = stock;
  const blocked = blockedHalfWidth(stock);
  let best = enough;
  let found: { band: Band; plan: BandPlan } | undefined;
  const beyond = (face: Units): number => flats.above(face + kerf);
  const look = (band: Band): { inside: number; bound: number } => {
    const outside = beyond(band.above) + beyond(band.below);
    const { value, bound, plan } = works.worth(band, best - outside);
    if (outside + value > best + 1e-7 && band.below >= blocked && band.above >= blocked) {
      best = outside + value;
      found = { band, plan };
    }
    return { inside: bound, bound: outside + bound };
  };

  // Likely heights first: a good plan early makes the search short.
  const step = 4 * FACE_GRID;
  const seeds = works.heights.map((height) => {
    let chosen = { below: height / 2, worth: -1 };
    const from = Math.max(blocked, height / 2 - 8 * step);
    for (let below = Math.min(from, height - blocked); below <= height / 2; below += step) {
      const worth = beyond(below) + beyond(height - below);
      if (below >= blocked && worth > chosen.worth) chosen = { below: Math.floor(below), worth };
    }
    return { band: { below: Math.floor(chosen.below), above: height - Math.floor(chosen.below) }, worth: chosen.worth };
  });
  const stride = Math.max(1, Math.ceil(seeds.length / (effort / 3)));
  for (let index = 0; index < seeds.length; index += stride) look((seeds[index] as { band: Band }).band);

  const edge = Math.ceil(reach / FACE_GRID) * FACE_GRID;
  const insideOf = (below: Units, above: Units): number => (below + above > 0 ? look({ below, above }).inside : 0);
  const queue: Node[] = [];
  const add = (below: readonly [Units, Units], above: readonly [Units, Units], inside: number): void => {
    if (above[1] < below[0] || above[1] < blocked || below[1] < blocked) return;
    const bound = beyond(below[0]) + beyond(above[0]) + inside;
    if (bound <= best + 1e-7) return;
    let slot = queue.length;
    while (slot > 0 && (queue[slot - 1] as Node).bound > bound) slot--;
    queue.splice(slot, 0, { below, above, inside, bound });
  };
  add([-edge, edge], [-edge, edge], insideOf(edge, edge));
  let unresolved = 0;
  for (let looks = 0; looks < effort; looks++) {
    const node = queue.pop();
    if (!node || node.bound <= best + 1e-7) break;
    const [belowSize, aboveSize] = [node.below[1] - node.below[0], node.above[1] - node.above[0]];
    if (Math.max(belowSize, aboveSize) <= FACE_GRID) {
      unresolved = Math.max(unresolved, node.bound); // only between two lines of the grid
      continue;
    }
    const splitBelow = belowSize >= aboveSize;
    const [from, to] = splitBelow ? node.below : node.above;
    const middle = Math.round((from + to) / 2 / FACE_GRID) * FACE_GRID;
    if (splitBelow) {
      add([middle, to], node.above, node.inside);
      add([from, middle], node.above, insideOf(middle, node.above[1]));
    } else {
      add(node.below, [middle, to], node.inside);
      add(node.below, [from, middle], insideOf(node.below[1], middle));
    }
  }
  const open = queue.at(-1)?.bound ?? 0;
  const bound = Math.max(best, open, unresolved);
  return { boards: found ? boardsOf(stock, flats, works, found.band, found.plan) : [], bound };
}

/** The boards of a band, and the flats below and above what the band really needs. */
function boardsOf(stock: Stock, flats: Stack, works: ReturnType<typeof bandWorks>, band: Band, plan: BandPlan): Board[] {
  const { kerf } = stock;
  const columnRule = acrossLog(stock, -band.below, band.above);
  const columns = (right: Units, left: Units): Board[] => boardsOfLayers(stock, columnRule, [...works.columnsFrom(band, right), ...mirrored(works.columnsFrom(band, left))], true);
  const inside =
    plan.kind === 'columns'
      ? stock.heart > 0
        ? columns(plan.split, plan.split)
        : columns(kerf - plan.split, plan.split)
      : [...boardsOfLayers(stock, acrossLog(stock, plan.left, plan.right), works.cantLayers(band, plan.left, plan.right)), ...columns(plan.right + kerf, -plan.left + kerf)];
  const top = inside.reduce((most, board) => Math.max(most, unitsUp(section(board).top)), -band.below);
  const bottom = inside.reduce((least, board) => Math.min(least, -unitsUp(-section(board).bottom)), band.above);
  const flat = acrossLog(stock);
  return [
    ...boardsOfLayers(stock, flat, mirrored(flats.layers(-bottom + kerf))),
    ...inside,
    ...boardsOfLayers(stock, flat, flats.layers(top + kerf)),
  ];
}
