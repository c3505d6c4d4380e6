import { fillings } from './frontier.ts';
import type { Layer } from './layers.ts';
import type { Stock } from './pieces.ts';
import { halfChord, type Units } from './units.ts';

interface RowSize {
  readonly size: Units;
  readonly value: number;
  readonly radiusSquared: number;
}

/** How far rows may run from the middle line on either side (`below` and `above` for turned rows, left and right for flat ones). */
export interface Limits {
  readonly below: Units;
  readonly above: Units;
}

/** Where boards may have many lengths, a column is first planned with about so many of them; its rows are then filled with all. */
const LENGTHS_TRIED = 4;

/**
 * Stacks of layers outward from the pith, as a step function: from `places[i]` or nearer outward, the best stack is worth
 * `values[i]`. Rows hold boards of one length each, so the answer is exact when every thickness has one length.
 * Every place is found exactly: a layer ends where its row still just fits, or a kerf short of the next layer.
 */
export class OutwardStacks {
  private readonly rows: readonly (readonly RowSize[])[];
  private readonly edges: Float64Array[];
  private readonly edgeValues: Float64Array[];
  private readonly edgeCount: Int32Array;
  private readonly atEdge: Int32Array;
  private readonly atPlace: Int32Array;
  private readonly nextEdge: Float64Array;
  private readonly thicknesses: Int32Array;
  private readonly groupsAt = new Int16Array(8192);
  readonly places = new Float64Array(8192);
  readonly values = new Float64Array(8192);
  count = 0;

  constructor(private readonly stock: Stock) {
    const { groups, kerf, reach } = stock;
    const step = Math.max(1, Math.ceil(stock.lengthsFt.length / LENGTHS_TRIED));
    this.rows = groups.map((group) =>
      stock.radiusSquared.flatMap((radiusSquared, length) => {
        if (!stock.oneLength && length % step !== 0) return [];
        const items = group.widths.flatMap(({ width, choices }) => choices.filter((choice) => choice.length === length).map((choice) => ({ size: width, value: choice.value })));
        const { sizes, values } = fillings(items, kerf, 2 * reach);
        return sizes.map((size, index) => ({ size, value: values[index] as number, radiusSquared }));
      }),
    );
    this.edges = this.rows.map((rows) => new Float64Array(rows.length));
    this.edgeValues = this.rows.map((rows) => new Float64Array(rows.length));
    this.edgeCount = new Int32Array(groups.length);
    this.nextEdge = new Float64Array(groups.length);
    this.thicknesses = Int32Array.from(groups, ({ thickness }) => thickness);
    this.atEdge = new Int32Array(groups.length);
    this.atPlace = new Int32Array(groups.length);
  }

  /** Sizes of all rows, as they fill a run exactly. */
  rowSizes(): Units[] {
    return this.rows.flat().map((row) => row.size);
  }

  /** For each thickness: how far out a layer may end and still hold a row of a given value. */
  private findEdges({ below, above }: Limits): void {
    const shorter = Math.min(below, above);
    this.stock.groups.forEach(({ thickness }, g) => {
      const found: { edge: Units; value: number }[] = [];
      for (const { size, value, radiusSquared } of this.rows[g] as readonly RowSize[]) {
        if (size > below + above) continue;
        const edge = halfChord(radiusSquared, size <= 2 * shorter ? size / 2 : size - shorter);
        if (edge >= thickness / 2) found.push({ edge, value });
      }
      if (!this.stock.oneLength) found.sort((a, b) => b.edge - a.edge || b.value - a.value);
      const edges = this.edges[g] as Float64Array;
      let count = 0;
      let best = 0;
      for (const { edge, value } of found) {
        if (value <= best + 1e-9) continue;
        best = value;
        if (count > 0 && edges[count - 1] === edge) count--;
        edges[count] = edge;
        (this.edgeValues[g] as Float64Array)[count] = value;
        count++;
      }
      this.edgeCount[g] = count;
    });
  }

  /** Works out the stacks of layers whose rows keep within the limits, from the bark in to a layer astride the pith. */
  build(limits: Limits): void {
    this.findEdges(limits);
    const { groups, kerf } = this.stock;
    const { edges, edgeCount, atEdge, atPlace, places, values } = this;
    this.count = 0;
    atEdge.fill(-1);
    atPlace.fill(-1);
    const { nextEdge, groupsAt, edgeValues } = this;
    for (let g = 0; g < groups.length; g++) nextEdge[g] = (edgeCount[g] as number) > 0 ? ((edges[g] as Float64Array)[0] as number) : -Infinity;
    let count = 0;
    while (count < places.length) {
      let next = -1;
      let place = -Infinity;
      let edge = 0;
      for (let g = 0; g < groups.length; g++) {
        if ((edgeCount[g] as number) === 0) continue;
        const after = (atPlace[g] as number) + 1;
        const byPlace = after < count ? (places[after] as number) - kerf : -Infinity;
        const byEdge = nextEdge[g] as number;
        const candidate = byEdge > byPlace ? byEdge : byPlace;
        const t = this.thicknesses[g] as number;
        if (candidate < t / 2 || candidate - t <= place) continue;
        next = g;
        place = candidate - t;
        edge = candidate;
      }
      if (next < 0) break;
      const own = edges[next] as Float64Array;
      const most = edgeCount[next] as number;
      let atE = atEdge[next] as number;
      while (atE + 1 < most && (own[atE + 1] as number) >= edge) atE++;
      atEdge[next] = atE;
      nextEdge[next] = atE + 1 < most ? (own[atE + 1] as number) : -Infinity;
      let atP = atPlace[next] as number;
      while (atP + 1 < count && (places[atP + 1] as number) - kerf >= edge) atP++;
      atPlace[next] = atP;
      if (atE < 0) continue;
      const value = ((edgeValues[next] as Float64Array)[atE] as number) + (atP < 0 ? 0 : (values[atP] as number));
      if (count > 0 && value <= (values[count - 1] as number) + 1e-9) continue;
      places[count] = place;
      values[count] = value;
      groupsAt[count] = next;
      count++;
    }
    this.count = count;
  }

  private indexAt(from: Units): number {
    let low = 0;
    let high = this.count - 1;
    while (low <= high) {
      const middle = (low + high) >> 1;
      if ((this.places[middle] as number) >= from) low = middle + 1;
      else high = middle - 1;
    }
    return high;
  }

  /** Value of the best stack from `from` outward. */
  valueFrom(from: Units): number {
    const index = this.indexAt(from);
    return index < 0 ? 0 : (this.values[index] as number);
  }

  /** The best stacks on both sides together: one begins at `split` outward, the other at kerf − split the other way. */
  bothSides(): { readonly value: number; readonly split: Units } {
    let value = 0;
    let split = 0;
    for (let i = this.count - 1; i >= 0; i--) {
      const place = this.places[i] as number;
      const sum = (this.values[i] as number) + this.valueFrom(this.stock.kerf - place);
      if (sum > value + 1e-9) {
        value = sum;
        split = place;
      }
      if (place > this.stock.kerf) break;
    }
    return { value, split };
  }

  /** The layers of the best stack from `from` outward, nearest first. */
  layersFrom(from: Units): Layer[] {
    const layers: Layer[] = [];
    let at = from;
    for (let index = this.indexAt(at); index >= 0; index = this.indexAt(at)) {
      const group = this.stock.groups[this.groupsAt[index] as number];
      if (!group) break;
      layers.push({ group, at });
      at += group.thickness + this.stock.kerf;
    }
    return layers;
  }

  /** A copy that a later `build` does not change. */
  snapshot(): { readonly total: number; readonly valueFrom: (from: Units) => number } {
    const places = this.places.slice(0, this.count);
    const values = this.values.slice(0, this.count);
    const total = this.bothSides().value;
    const valueFrom = (from: Units): number => {
      let low = 0;
      let high = places.length - 1;
      while (low <= high) {
        const middle = (low + high) >> 1;
        if ((places[middle] as number) >= from) low = middle + 1;
        else high = middle - 1;
      }
      return high < 0 ? 0 : (values[high] as number);
    };
    return { total, valueFrom };
  }
}
