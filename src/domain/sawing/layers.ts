import { blockedHalfWidth, type Stock, type ThicknessGroup } from './pieces.ts';
import { bestRow, centred, type RowBoard } from './row.ts';
import { halfChord, type Units } from './units.ts';

/**
 * Layers of boards stacked away from the pith. A layer lies at `at … at + thickness` along the stack; what it is worth depends
 * only on how far its outer edge (`far`) and its inner edge (`near`) are from the pith.
 */
export interface RowRule {
  /** The row's value, its boards too when `boards` is given. Never rises with `far`, never falls with `near`. */
  readonly value: (group: ThicknessGroup, far: Units, near: Units, boards?: RowBoard[]) => number;
}

const low: number[] = [];
const high: number[] = [];

/** Half of the gap that the heart (and at least a kerf) leaves in a row whose nearest edge is `near` from the pith; 0 when the row passes clear. */
export const heartGap = (stock: Stock, near: Units): Units =>
  near >= stock.heart ? 0 : Math.max(Math.ceil(stock.kerf / 2), Math.ceil(Math.sqrt(stock.heart ** 2 - near ** 2) - 1e-7));

/** Rows right across the log between `left` and `right`, on both sides of the heart when there is one to box out. */
export function acrossLog(stock: Stock, left = -Infinity, right = Infinity): RowRule {
  const part = (group: ThicknessGroup, far: Units, from: Units, to: Units, boards?: RowBoard[]): number => {
    stock.radiusSquared.forEach((radius, index) => {
      const half = halfChord(radius, far);
      low[index] = half < 0 ? 0 : Math.max(-half, from);
      high[index] = half < 0 ? -1 : Math.min(half, to);
    });
    if (!boards) return bestRow(group, low, high, stock.kerf);
    const row: RowBoard[] = [];
    const value = bestRow(group, low, high, stock.kerf, row);
    boards.push(...centred(row, high));
    return value;
  };
  return {
    value: (group, far, near, boards) => {
      const gap = heartGap(stock, near);
      if (gap === 0) return part(group, far, left, right, boards);
      if (left === -right && !boards) return 2 * part(group, far, gap, right);
      return part(group, far, left, -gap, boards) + part(group, far, gap, right, boards);
    },
  };
}

/** For one thickness: the value of a layer at each place from `first` on (the places below mirror them). */
interface LayerTable {
  readonly group: ThicknessGroup;
  readonly first: Units;
  readonly values: Float64Array;
}

function layerTable(stock: Stock, group: ThicknessGroup, rule: RowRule): LayerTable {
  const t = group.thickness;
  const first = Math.ceil(-t / 2);
  const size = Math.max(0, stock.reach - t - first + 1);
  const values = new Float64Array(size);
  const clear = Math.ceil(stock.heart);
  const worth = (far: Units, near: Units): number => rule.value(group, far, near);
  const nearOf = (at: Units): Units => Math.max(0, at);
  // Between two places whose best and worst cases agree, every place between has the same value.
  const fill = (from: Units, to: Units): void => {
    const best = worth(from + t, nearOf(to));
    const worst = from === to && from >= 0 ? best : worth(to + t, nearOf(from));
    if (best - worst < 1e-9) values.fill(worst, from - first, to - first + 1);
    else if (to - from > 0) {
      const middle = Math.floor((from + to) / 2);
      fill(from, middle);
      fill(middle + 1, to);
    }
  };
  // Clear of the heart the value only falls: the ends of a stretch are enough, and shared.
  const fall = (from: Units, atFrom: number, to: Units, atTo: number): void => {
    if (atFrom - atTo < 1e-9) values.fill(atTo, from - first, to - first + 1);
    else if (to - from <= 1) {
      values[from - first] = atFrom;
      values[to - first] = atTo;
    } else {
      const middle = Math.floor((from + to) / 2);
      const between = worth(middle + t, nearOf(middle));
      fall(from, atFrom, middle, between);
      fall(middle, between, to, atTo);
    }
  };
  const last = first + size - 1;
  const split = clear > 0 ? Math.min(clear, last + 1) : first;
  if (split > first) fill(first, split - 1);
  if (split <= last) fall(split, worth(split + t, nearOf(split)), last, worth(last + t, nearOf(last)));
  return { group, first, values };
}

/** A layer of a plan. */
export interface Layer {
  readonly group: ThicknessGroup;
  readonly at: Units;
}

/** How far a layer's outer and inner edges are from the pith. */
export function distances({ group, at }: Layer): { readonly far: Units; readonly near: Units } {
  const top = at + group.thickness;
  return { far: Math.max(Math.abs(at), Math.abs(top)), near: at <= 0 && top >= 0 ? 0 : Math.min(Math.abs(at), Math.abs(top)) };
}

/** The same layers on the other side of the pith. */
export const mirrored = (layers: readonly Layer[]): Layer[] => layers.map(({ group, at }) => ({ group, at: -at - group.thickness }));

/** The best stacks of layers above every height. */
export interface Stack {
  /** Best value of layers that begin at `from` or above (`from` in units from the pith; any number). */
  readonly above: (from: Units) => number;
  /** The layers of such a stack, lowest first. */
  readonly layers: (from: Units) => Layer[];
}

/**
 * Best stacks by dynamic programming over every unit of height: exact, gaps allowed.
 * Layers whose two cuts would be wider than the mill cuts (`blocked`) are left out.
 */
export function stackOf(stock: Stock, rule: RowRule, blocked: Units = blockedHalfWidth(stock)): Stack {
  const { reach, kerf } = stock;
  const tables = stock.groups.map((group) => layerTable(stock, group, rule));
  const best = new Float64Array(2 * reach + 2);
  const choice = new Int8Array(2 * reach + 2).fill(-1);
  // The loop below runs for every unit of height: each thickness's figures stand in plain arrays.
  const thickness = Int32Array.from(tables, ({ group }) => group.thickness);
  const firsts = Int32Array.from(tables, ({ first }) => first);
  const tablesOfValues = tables.map(({ values }) => values);
  const isPassing = (at: Units, t: Units): boolean => (at - kerf >= blocked || at <= -blocked) && (at + t >= blocked || at + t + kerf <= -blocked);
  for (let at = reach; at >= -reach; at--) {
    const here = at + reach;
    let most = best[here + 1] as number;
    let chosen = -1;
    for (let index = 0; index < tablesOfValues.length; index++) {
      const values = tablesOfValues[index] as Float64Array;
      const t = thickness[index] as number;
      const first = firsts[index] as number;
      const slot = at >= first ? at - first : -at - t - first;
      if (slot >= values.length) continue;
      const worth = values[slot] as number;
      if (worth <= 0) continue;
      const next = here + t + kerf;
      const sum = next > 2 * reach ? worth : worth + (best[next] as number);
      if (sum > most + 1e-9 && (blocked === 0 || isPassing(at, t))) {
        most = sum;
        chosen = index;
      }
    }
    choice[here] = chosen;
    best[here] = most;
  }
  const above = (from: Units): number => (from > reach ? 0 : (best[Math.max(0, Math.ceil(from) + reach)] as number));
  const layers = (from: Units): Layer[] => {
    const found: Layer[] = [];
    for (let at = Math.max(-reach, Math.ceil(from)); at <= reach; ) {
      const table = tables[choice[at + reach] as number];
      if (table) found.push({ group: table.group, at });
      at += table ? table.group.thickness + kerf : 1;
    }
    return blocked === 0 && stock.heart === 0 ? pulledTogether(found, from, kerf) : found;
  };
  return { above, layers };
}

/**
 * The same layers without wood left between them: all moved towards the one nearest the pith, and that one down to `from` where the
 * stack begins above the pith. Nearer the pith a layer holds no less.
 */
function pulledTogether(layers: readonly Layer[], from: Units, kerf: Units): Layer[] {
  const far = layers.map((layer) => distances(layer).far);
  const nearest = far.indexOf(Math.min(...far));
  const first = layers[nearest];
  if (!first) return [...layers];
  const moved = [...layers];
  moved[nearest] = from >= 0 ? { ...first, at: Math.ceil(from) } : first;
  for (let index = nearest + 1; index < moved.length; index++) {
    const [below, layer] = [moved[index - 1] as Layer, moved[index] as Layer];
    moved[index] = { ...layer, at: below.at + below.group.thickness + kerf };
  }
  for (let index = nearest - 1; index >= 0; index--) {
    const [above, layer] = [moved[index + 1] as Layer, moved[index] as Layer];
    moved[index] = { ...layer, at: above.at - kerf - layer.group.thickness };
  }
  return moved;
}

/** Moves a whole stack to the middle of its play, so that what is left over is shared by the slabs on both sides. */
export function centredStack(stock: Stock, rule: RowRule, layers: readonly Layer[]): readonly Layer[] {
  if (stock.heart > 0 || blockedHalfWidth(stock) > 0 || layers.length === 0) return layers;
  const worth = ({ group, at }: Layer): number => rule.value(group, distances({ group, at }).far, 0);
  const values = layers.map(worth);
  const holds = (shift: Units): boolean => layers.every((layer, index) => worth({ ...layer, at: layer.at + shift }) >= (values[index] as number) - 1e-9);
  const play = (direction: 1 | -1): Units => {
    let good = 0;
    for (let step = stock.reach; step >= 1; step = Math.floor(step / 2)) if (holds(direction * (good + step))) good += step;
    return good;
  };
  const shift = Math.floor((play(1) - play(-1)) / 2);
  return holds(shift) ? layers.map((layer) => ({ ...layer, at: layer.at + shift })) : layers;
}
