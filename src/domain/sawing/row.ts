import type { Choice, ThicknessGroup } from './pieces.ts';
import type { Units } from './units.ts';

/** A board in a row, by its near edge along the row. */
export interface RowBoard {
  readonly choice: Choice;
  readonly at: Units;
}

// Labels of the search below, kept between calls: the function is not re-entrant and never calls back.
let places: Float64Array = new Float64Array(4096);
let values: Float64Array = new Float64Array(4096);
let parents: Int32Array = new Int32Array(4096);
let order: Int32Array = new Int32Array(4096);
let taken: (Choice | undefined)[] = [];
let starts: Float64Array = new Float64Array(4096);

function grow(): void {
  const size = places.length * 2;
  const copy = <T extends Float64Array | Int32Array>(from: T, to: T): T => (to.set(from), to);
  places = copy(places, new Float64Array(size));
  values = copy(values, new Float64Array(size));
  starts = copy(starts, new Float64Array(size));
  parents = copy(parents, new Int32Array(size));
  order = copy(order, new Int32Array(size));
}

/** Puts a label among those still waiting (`order[from … waiting-1]`, place and value both rising); drops what is beaten. */
function insert(label: number, from: number, waiting: number): number {
  const place = places[label] as number;
  const value = values[label] as number;
  let low = from - 1; // the label being extended beats nothing: it ends sooner and is worth less
  let high = waiting - 1;
  while (low < high) {
    const middle = (low + high + 1) >> 1;
    if ((places[order[middle] as number] as number) <= place) low = middle;
    else high = middle - 1;
  }
  if (low >= from && (values[order[low] as number] as number) >= value - 1e-12) return waiting;
  const slot = low >= from && places[order[low] as number] === place ? low : low + 1;
  let beaten = slot;
  while (beaten < waiting && (values[order[beaten] as number] as number) <= value + 1e-12) beaten++;
  if (beaten !== slot + 1) order.copyWithin(slot + 1, beaten, waiting);
  order[slot] = label;
  return waiting - (beaten - slot) + 1;
}

/**
 * The most valuable row of boards of one thickness, side by side with a kerf between, where a board of length `i` must lie
 * within `low[i] … high[i]`. Exact: pushed towards the low end, every board starts at its own limit or a kerf past its
 * neighbour, and of two partial rows the one that ends sooner and is worth as much is kept.
 * @param boards when given, receives the boards of the best row.
 * @returns the row's value; 0 when nothing fits.
 */
export function bestRow(group: ThicknessGroup, low: ArrayLike<number>, high: ArrayLike<number>, kerf: Units, boards?: RowBoard[]): number {
  let count = 1;
  let waiting = 1; // labels in `order`, by place
  let best = 0;
  let bestLabel = -1;
  let furthest = -Infinity;
  for (let i = 0; i < high.length; i++) furthest = Math.max(furthest, high[i] as number);
  places[0] = -1e15;
  values[0] = 0;
  parents[0] = -1;
  order[0] = 0;
  for (let next = 0; next < waiting; next++) {
    const label = order[next] as number;
    const value = values[label] as number;
    const place = places[label] as number;
    if (label > 0 && value + group.density * (furthest + kerf - place) <= best + 1e-12) continue; // too little room left to win
    for (let w = group.widths.length - 1; w >= 0; w--) {
      const { width, choices } = group.widths[w] as (typeof group.widths)[number];
      for (const choice of choices) {
        const limit = low[choice.length] as number;
        const start = limit > place ? limit : place;
        const end = start + width;
        if (end > (high[choice.length] as number)) continue;
        const sum = value + choice.value;
        const after = end + kerf;
        if (sum > best + 1e-12 || (after + group.narrowest <= furthest && sum + group.density * (furthest + kerf - after) > best + 1e-12)) {
          if (count + 1 >= places.length) grow();
          places[count] = after;
          values[count] = sum;
          parents[count] = label;
          starts[count] = start;
          taken[count] = choice;
          if (sum > best + 1e-12) {
            best = sum;
            bestLabel = count;
          }
          if (after + group.narrowest <= furthest) waiting = insert(count, next + 1, waiting);
          count++;
        }
        if (limit <= place) break; // the rest of this width is shorter and worth less from the same start
      }
    }
  }
  if (boards) {
    for (let label = bestLabel; label > 0; label = parents[label] as number) boards.push({ choice: taken[label] as Choice, at: starts[label] as number });
    boards.reverse();
  }
  return best;
}

/** Moves a row that lies against its low limits to the middle of its play. */
export function centred(row: readonly RowBoard[], high: ArrayLike<number>): RowBoard[] {
  const play = row.reduce((least, board) => Math.min(least, (high[board.choice.length] as number) - board.at - board.choice.width), Infinity);
  const shift = row.length === 0 ? 0 : Math.floor(play / 2);
  return row.map((board) => ({ ...board, at: board.at + shift }));
}

/** Moves every board of a row as far towards the high end as it goes. */
export function pushedOut(row: readonly RowBoard[], high: ArrayLike<number>, kerf: Units): RowBoard[] {
  let limit = Infinity;
  return [...row]
    .reverse()
    .map((board) => {
      const at = Math.min(limit, high[board.choice.length] as number) - board.choice.width;
      limit = at - kerf;
      return { ...board, at };
    })
    .reverse();
}
