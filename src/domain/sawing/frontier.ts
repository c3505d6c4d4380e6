import type { Units } from './units.ts';

/** A best-value-for-its-size list: sizes and values both rise. */
export interface Frontier {
  readonly sizes: readonly Units[];
  readonly values: readonly number[];
}

/**
 * Every worthwhile filling of a straight run with items and a kerf between (an unbounded knapsack, exact): for each size that
 * gains something, the most valuable filling that fits in it.
 */
export function fillings(items: readonly { readonly size: Units; readonly value: number }[], kerf: Units, longest: Units): Frontier {
  const useful = items.filter((item) => item.size <= longest && item.value > 0);
  const best = new Map<Units, number>();
  const queue: Units[] = []; // sizes reached, rising; those before `next` are done
  let next = 0;
  const offer = (size: Units, value: number): void => {
    const known = best.get(size);
    if (known === undefined) {
      let low = next;
      let high = queue.length;
      while (low < high) {
        const middle = (low + high) >> 1;
        if ((queue[middle] as Units) > size) high = middle;
        else low = middle + 1;
      }
      queue.splice(low, 0, size);
    }
    if (known === undefined || value > known) best.set(size, value);
  };
  for (const item of useful) offer(item.size, item.value);
  const sizes: Units[] = [];
  const values: number[] = [];
  let most = 0;
  while (next < queue.length) {
    const size = queue[next++] as Units;
    const value = best.get(size) as number;
    if (value <= most + 1e-9) continue;
    most = value;
    sizes.push(size);
    values.push(value);
    for (const item of useful) if (size + kerf + item.size <= longest) offer(size + kerf + item.size, value + item.value);
  }
  return { sizes, values };
}

/** Index of the largest size that fits in `room`, or -1. */
export function fitting({ sizes }: Frontier, room: Units): number {
  let low = 0;
  let high = sizes.length - 1;
  while (low <= high) {
    const middle = (low + high) >> 1;
    if ((sizes[middle] as Units) <= room) low = middle + 1;
    else high = middle - 1;
  }
  return high;
}

/** The most valuable filling that fits in `room`. */
export function valueIn(frontier: Frontier, room: Units): number {
  const index = fitting(frontier, room);
  return index < 0 ? 0 : (frontier.values[index] as number);
}
