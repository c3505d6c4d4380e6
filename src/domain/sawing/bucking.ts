import type { LogShape } from './log-shape.ts';

/** A felled stem, measured inside bark at some places from the butt. */
export interface Stem {
  readonly measures: readonly { readonly fromButtFt: number; readonly diameterIn: number }[];
  /** Stretches that no log may hold: a crotch, rot, a metal spike. */
  readonly leaveOut?: readonly { readonly fromFt: number; readonly toFt: number }[];
}

export interface BuckingRules {
  /** Lengths that logs may have, ft, without trim. */
  readonly lengthsFt: readonly number[];
  /** Left on every log over its length, in (common practice 4–6 in). */
  readonly trimIn: number;
  /** The mill's longest log, ft, trim and all. */
  readonly longestFt?: number | undefined;
  readonly shortestEndIn?: number | undefined;
}

export interface BuckedLog {
  readonly fromButtFt: number;
  /** Without trim. */
  readonly lengthFt: number;
  /** Where the saw goes, trim and all. */
  readonly smallEndIn: number;
  readonly largeEndIn: number;
  readonly value: number;
}

export interface Bucked {
  readonly logs: readonly BuckedLog[];
  readonly value: number;
  /** Not in any log, ft. */
  readonly leftFt: number;
}

/** The saw's places along the stem: every whole inch. */
const STEPS_PER_FT = 12;

/** Diameter of a stem at a height, straight between measures; past the last one nothing is known. */
export function diameterAt(stem: Stem, fromButtFt: number): number {
  const measures = [...stem.measures].sort((a, b) => a.fromButtFt - b.fromButtFt);
  const above = measures.findIndex((each) => each.fromButtFt >= fromButtFt - 1e-9);
  const high = measures[above];
  if (!high) return 0;
  const low = measures[above - 1] ?? high;
  const span = high.fromButtFt - low.fromButtFt;
  return span <= 0 ? high.diameterIn : low.diameterIn + ((high.diameterIn - low.diameterIn) * (fromButtFt - low.fromButtFt)) / span;
}

/**
 * Where to cut a stem to length for the most value: exact over every cut at a whole inch, by dynamic programming from the butt.
 * Wood may be left out anywhere; a log never holds a stretch to leave out, and carries its trim at the top.
 * @param worth what a log is worth: by a log rule, or by its best sawing plan for the sizes wanted. It is asked for each place and
 *   length once, with diameters to the nearest smaller 1/8 in.
 */
export function buck(stem: Stem, { lengthsFt, trimIn, longestFt = Infinity, shortestEndIn = 4 }: BuckingRules, worth: (log: LogShape) => number): Bucked {
  const lengthFt = stem.measures.reduce((most, { fromButtFt }) => Math.max(most, fromButtFt), 0);
  const end = Math.floor(lengthFt * STEPS_PER_FT + 1e-9);
  const at = Array.from({ length: end + 1 }, (_, step) => Math.floor(diameterAt(stem, step / STEPS_PER_FT) * 8 + 1e-9) / 8);
  const leaveOut = (stem.leaveOut ?? []).map(({ fromFt, toFt }) => [fromFt * STEPS_PER_FT, toFt * STEPS_PER_FT] as const);
  const trim = Math.ceil(trimIn);
  const lengths = [...new Set(lengthsFt)].filter((feet) => feet > 0 && feet + trimIn / 12 <= longestFt + 1e-9).sort((a, b) => a - b);
  const known = new Map<string, number>();
  const worthOf = (log: LogShape): number => {
    const key = `${log.smallEndIn} ${log.largeEndIn ?? ''} ${log.lengthFt}`;
    const found = known.get(key) ?? worth(log);
    known.set(key, found);
    return found;
  };
  // The best that the wood from each place up gives, from the top down.
  const best = new Float64Array(end + 1);
  const taken: (BuckedLog | undefined)[] = [];
  for (let step = end - 1; step >= 0; step--) {
    let value = best[step + 1] as number;
    for (const feet of lengths) {
      const nominal = Math.round(feet * STEPS_PER_FT);
      const top = step + nominal + trim;
      if (top > end || leaveOut.some(([from, to]) => from < top - 1e-9 && to > step + 1e-9)) continue;
      const smallEndIn = Math.min(at[top] as number, at[step] as number);
      if (smallEndIn < shortestEndIn) continue;
      const log = { smallEndIn, largeEndIn: at[step] as number, lengthFt: feet };
      const own = worthOf(log);
      // Of two ways that are worth the same, the one that begins nearer the butt and has the longer log.
      if (own > 0 && own + (best[top] as number) > value - 1e-9) {
        value = own + (best[top] as number);
        taken[step] = { ...log, fromButtFt: step / STEPS_PER_FT, value: own };
      }
    }
    best[step] = value;
  }
  const logs: BuckedLog[] = [];
  for (let step = 0; step < end; ) {
    const log = taken[step];
    if (!log) {
      step += 1;
      continue;
    }
    logs.push(log);
    step += Math.round(log.lengthFt * STEPS_PER_FT) + trim;
  }
  const used = logs.reduce((sum, log) => sum + log.lengthFt + trim / STEPS_PER_FT, 0);
  return { logs, value: best[0] ?? 0, leftFt: Math.max(0, lengthFt - used) };
}
