import { fillings, fitting, type Frontier, valueIn } from './frontier.ts';
import { acrossLog, distances, type Layer, type RowRule } from './layers.ts';
import { type Limits, OutwardStacks } from './outward.ts';
import type { Stock } from './pieces.ts';
import { type Units, UNITS_PER_IN, unitsDown } from './units.ts';

/** A band of the log between two flats, `below` under the pith and `above` over it. */
export type Band = Limits;

/** What a band holds: turned columns all through, or a cant from `left` to `right` with columns beside it. */
export type BandPlan = { readonly kind: 'columns'; readonly split: Units } | { readonly kind: 'cant'; readonly left: Units; readonly right: Units };

export interface BandWorth {
  /** The best contents found. */
  readonly value: number;
  readonly plan: BandPlan;
  /** No contents of this band, or of one inside it, are worth more (when every thickness has one length). */
  readonly bound: number;
}

export interface BandWorks {
  /** Looks only for contents worth more than `enough`; the bound always holds. */
  readonly worth: (band: Band, enough: number) => BandWorth;
  /** Columns outward from `from`, nearest first, on the right-hand side. */
  readonly columnsFrom: (band: Band, from: Units) => Layer[];
  /** The layers of a cant, lowest first. */
  readonly cantLayers: (band: Band, left: Units, right: Units) => Layer[];
  /** Heights of band that some row or stack fills exactly, rising. */
  readonly heights: readonly Units[];
}

/** Cants whose corners pass the bark are tried so often in a band before their bound is left standing. */
const WANEY_TRIES = 3;
/** Sides of a cant passed over together when none of them can win. */
const TOGETHER = 12;
/** Step of the widths for which stacks between two sides are kept. */
const SIDE_STEP = UNITS_PER_IN / 8;

/** Prepares the search of one stock's bands. */
export function bandWorks(stock: Stock): BandWorks {
  const { kerf, reach, groups } = stock;
  const heart = stock.heart > 0 ? Math.max(Math.ceil(stock.heart), Math.ceil(kerf / 2)) : 0;
  const widestCut = stock.mill.widestCutIn === undefined ? Infinity : unitsDown(stock.mill.widestCutIn);
  const leastRadius = stock.radiusSquared.reduce((least, each) => Math.min(least, each), Infinity);
  const columns = new OutwardStacks(stock);
  const scratch = new OutwardStacks(stock);

  // What a cant of a given width holds in a given height, wane left aside.
  const cantRows: Frontier[] = groups.map((group) => fillings(group.widths.map(({ width, choices }) => ({ size: width, value: choices[0]?.value ?? 0 })), kerf, Math.min(2 * reach, widestCut)));
  const cantWidths = [...new Set(cantRows.flatMap((rows) => rows.sizes))].sort((a, b) => a - b);
  const widthClass: Frontier = { sizes: cantWidths, values: cantWidths };
  // Of the band being looked at: what a cant of each width holds in its height, -1 until asked.
  const insides = new Float64Array(cantWidths.length);
  const cants = new Map<number, Frontier>();
  const cantOf = (index: number): Frontier => {
    let found = cants.get(index);
    if (!found) {
      const room = cantWidths[index] ?? 0;
      found = fillings(groups.map((group, g) => ({ size: group.thickness, value: valueIn(cantRows[g] as Frontier, room) })), kerf, 2 * reach);
      cants.set(index, found);
    }
    return found;
  };

  // Flat layers held between two sides: a cant that runs into the wane holds no more than these do in its height.
  const held = new Map<number, ReturnType<OutwardStacks['snapshot']>>();
  const steps = Math.ceil(reach / SIDE_STEP) + 1;
  // Neighbouring sides mostly fall into the same step: the last answer is kept.
  let [lastKey, lastAbove, lastBelow, lastHeld] = [-1, -1, -1, 0];
  const heldTo = (one: Units, other: Units, { below, above }: Band): number => {
    const near = Math.ceil(one / SIDE_STEP);
    const far = Math.min(steps, Math.ceil(other / SIDE_STEP));
    const key = (near + steps) * (2 * steps + 2) + far;
    if (key === lastKey && above === lastAbove && below === lastBelow) return lastHeld;
    let found = held.get(key);
    if (!found) {
      scratch.build({ below: near * SIDE_STEP, above: far * SIDE_STEP });
      found = scratch.snapshot();
      held.set(key, found);
    }
    lastKey = key;
    lastAbove = above;
    lastBelow = below;
    lastHeld = found.total - found.valueFrom(above + kerf) - found.valueFrom(below + kerf);
    return lastHeld;
  };

  function worth(band: Band, enough: number): BandWorth {
    const height = band.below + band.above;
    columns.build(band);
    const whole = columns.bothSides();
    let bound = whole.value;
    let value = heart > 0 ? 2 * columns.valueFrom(heart) : whole.value;
    let plan: BandPlan = { kind: 'columns', split: heart > 0 ? heart : whole.split };
    insides.fill(-1);
    const { places, values } = columns;
    const insideOf = (right: Units, left: Units): number => {
      const width = fitting(widthClass, Math.min(left + right, widestCut));
      if (width < 0) return 0;
      if ((insides[width] as number) < 0) insides[width] = valueIn(cantOf(width), height);
      return insides[width] as number;
    };
    const rightOf = (i: number): Units => (places[i] as number) - kerf;
    const leftOf = (j: number): Units => (j < 0 ? reach : rightOf(j));
    const sidesOf = (i: number, j: number): number => (values[i] as number) + (j < 0 ? 0 : (values[j] as number));
    // Right sides with stretches of left sides, from as near to the bark last: what lies beside falls, what the cant holds rises.
    const stretches: { readonly i: number; readonly first: number; readonly last: number; readonly most: number; readonly hoped: number }[] = [];
    let likeliest: (typeof stretches)[number] | undefined;
    for (let i = 0; i < columns.count; i++) {
      const right = rightOf(i);
      if (right + reach <= 0) break;
      const most = heldTo(right, reach, band);
      for (let first = i; first >= -1; first -= TOGETHER) {
        const last = Math.max(-1, first - TOGETHER + 1);
        const beside = sidesOf(i, first);
        if (beside + most <= bound) break;
        const hoped = beside + Math.min(most, insideOf(right, leftOf(last)));
        if (hoped <= bound + 1e-9) continue;
        const stretch = { i, first, last, most, hoped };
        stretches.push(stretch);
        if (hoped > (likeliest?.hoped ?? 0)) likeliest = stretch;
      }
    }
    const hopes: { readonly hope: number; readonly exact: boolean; readonly sides: number; readonly left: Units; readonly right: Units }[] = [];
    const tryAll = ({ i, first, last, most }: (typeof stretches)[number]): void => {
      const right = rightOf(i);
      let known = 0;
      for (let j = first; j >= last; j--) {
        const left = leftOf(j);
        const inside = insideOf(right, left);
        if (inside <= known) continue; // holds nothing, or no more than with more beside it
        known = inside;
        const sides = sidesOf(i, j);
        if (sides + Math.min(inside, most) <= bound + 1e-9) continue;
        const room = heldTo(right, left, band);
        const hope = sides + Math.min(inside, room);
        bound = Math.max(bound, hope);
        if (hope > Math.max(value, enough) + 1e-9) hopes.push({ hope, exact: inside <= room, sides, left, right });
      }
    };
    if (likeliest) tryAll(likeliest);
    for (const stretch of stretches) if (stretch.hoped > bound + 1e-9) tryAll(stretch);
    hopes.sort((a, b) => b.hope - a.hope);
    let tries = 0;
    for (const { hope, exact: fits, sides, left, right } of hopes) {
      if (hope <= Math.max(value, enough) + 1e-9 || tries >= WANEY_TRIES) break;
      if (heart > 0 && Math.min(left, right) + kerf < heart) continue;
      const from = Math.max(-left, right - widestCut);
      const exact = heart === 0 && fits && Math.max(-from, right) ** 2 + Math.max(band.below, band.above) ** 2 <= leastRadius;
      if (!exact) tries++;
      const rule = acrossLog(stock, from, right);
      const found = exact ? hope : sides + layersValue(rule, cantStack(stock, rule, band));
      if (found > value + 1e-9) {
        value = found;
        plan = { kind: 'cant', left: from, right };
      }
    }
    // A cut through the band would be wider than the mill cuts; its bound still holds for lower bands.
    if (height > widestCut) return { value: 0, plan: { kind: 'columns', split: 0 }, bound };
    return { value, plan, bound: Math.max(bound, value) };
  }

  const middle = cantOf(fitting(widthClass, Math.min(1.4 * reach, widestCut)));
  return {
    worth,
    columnsFrom: (band, from) => {
      columns.build(band);
      return columns.layersFrom(from);
    },
    cantLayers: (band, left, right) => cantStack(stock, acrossLog(stock, left, right), band),
    heights: [...new Set([...columns.rowSizes(), ...middle.sizes])].filter((size) => size <= 2 * reach && size <= widestCut).sort((a, b) => a - b),
  };
}

interface Label {
  readonly at: Units;
  readonly value: number;
  readonly layer?: Layer;
  readonly from?: Label;
}

/** Layers of a cant stacked tightly from its lower face: the best by dynamic programming over the heights that occur. */
function cantStack(stock: Stock, rule: RowRule, { below, above }: Band): Layer[] {
  const queue: Label[] = [{ at: -below, value: 0 }];
  let best = queue[0] as Label;
  let frontier = -1;
  for (let next = 0; next < queue.length; next++) {
    const label = queue[next] as Label;
    if (label.value <= frontier + 1e-9) continue;
    frontier = label.value;
    if (label.value > best.value + 1e-9) best = label;
    for (const group of stock.groups) {
      const layer = { group, at: label.at };
      if (label.at + group.thickness > above) continue;
      const after: Label = { at: label.at + group.thickness + stock.kerf, value: label.value + layersValue(rule, [layer]), layer, from: label };
      let slot = queue.length;
      for (; slot > next + 1; slot--) {
        const other = queue[slot - 1] as Label;
        if (other.at < after.at || (other.at === after.at && other.value >= after.value)) break;
      }
      queue.splice(slot, 0, after);
    }
  }
  const layers: Layer[] = [];
  for (let label: Label | undefined = best; label?.layer; label = label.from) layers.push(label.layer);
  return layers.reverse();
}

/** Value of some layers under a row rule. */
export const layersValue = (rule: RowRule, layers: readonly Layer[]): number =>
  layers.reduce((sum, layer) => {
    const { far, near } = distances(layer);
    return sum + rule.value(layer.group, far, near);
  }, 0);
