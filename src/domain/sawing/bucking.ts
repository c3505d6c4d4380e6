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
export const STEPS_PER_FT = 12;

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

/** A log that may be cut from a stem: from step `from` to step `top`, its trim at the top. */
export interface CutBetween extends LogShape {
  readonly from: number;
  readonly top: number;
  readonly largeEndIn: number;
  /**
   * The straight log that lies in the stem's wood all along, its large end less than its own where the butt flares; without the trim,
   * in which no board lies.
   */
  readonly straight: LogShape & { readonly largeEndIn: number };
}

/** A stem in steps of an inch from the butt, with the rules of its cuts. */
export interface StemSteps {
  readonly lengthFt: number;
  /** The last whole inch. */
  readonly end: number;
  readonly trim: number;
  /** Lengths within the mill's longest, ft, rising. */
  readonly lengthsFt: readonly number[];
  /** Where a bad stretch ends and a log may begin, rising. */
  readonly clearFrom: readonly number[];
  /** Diameter to the smaller 1/8 in. */
  readonly diameterIn: (step: number) => number;
  /** The log of a length that begins at a step; null when it passes the top, holds a bad stretch or has too small an end. */
  readonly cut: (from: number, lengthFt: number) => CutBetween | null;
}

/** Prepares a stem for cutting at whole inches. */
export function stemSteps(stem: Stem, { lengthsFt, trimIn, longestFt = Infinity, shortestEndIn = 4 }: BuckingRules): StemSteps {
  const lengthFt = stem.measures.reduce((most, { fromButtFt }) => Math.max(most, fromButtFt), 0);
  const end = Math.floor(lengthFt * STEPS_PER_FT + 1e-9);
  const at = Array.from({ length: end + 1 }, (_, step) => Math.floor(diameterAt(stem, step / STEPS_PER_FT) * 8 + 1e-9) / 8);
  const leaveOut = (stem.leaveOut ?? []).map(({ fromFt, toFt }) => [fromFt * STEPS_PER_FT, toFt * STEPS_PER_FT] as const);
  const kinks = stem.measures.map(({ fromButtFt, diameterIn }) => [fromButtFt * STEPS_PER_FT, diameterIn] as const);
  const trim = Math.ceil(trimIn);
  const diameterIn = (step: number): number => at[step] ?? 0;
  // The largest end of a log that tapers straight to its small end and nowhere leaves the wood.
  const straightTo = (from: number, top: number): number => {
    const small = diameterIn(top);
    const large = kinks.reduce((least, [place, diameter]) => (place <= from || place >= top ? least : Math.min(least, small + ((diameter - small) * (top - from)) / (top - place))), diameterIn(from));
    return Math.max(small, Math.floor(large * 8 + 1e-9) / 8);
  };
  return {
    lengthFt, end, trim, diameterIn,
    lengthsFt: [...new Set(lengthsFt)].filter((feet) => feet > 0 && feet + trimIn / 12 <= longestFt + 1e-9).sort((a, b) => a - b),
    clearFrom: leaveOut.map(([, to]) => Math.ceil(to - 1e-9)).filter((step) => step < end).sort((a, b) => a - b),
    cut: (from, feet) => {
      const top = from + Math.round(feet * STEPS_PER_FT) + trim;
      if (from < 0 || top > end || leaveOut.some(([low, high]) => low < top - 1e-9 && high > from + 1e-9)) return null;
      const largeEndIn = diameterIn(from);
      const smallEndIn = Math.min(diameterIn(top), largeEndIn);
      if (smallEndIn < shortestEndIn) return null;
      const nominal = top - trim;
      return { from, top, smallEndIn, largeEndIn, lengthFt: feet, straight: { smallEndIn: diameterIn(nominal), largeEndIn: straightTo(from, nominal), lengthFt: feet } };
    },
  };
}

/**
 * Where to cut a stem to length for the most value: exact over every cut at a whole inch, by dynamic programming from the butt.
 * Wood may be left out anywhere; a log never holds a stretch to leave out, and carries its trim at the top.
 * @param worth what a log is worth: by a log rule, or by its best sawing plan for the sizes wanted, its large end the straight one. It is asked for each place and
 *   length once, with diameters to the nearest smaller 1/8 in.
 */
export function buck(stem: Stem, rules: BuckingRules, worth: (log: LogShape) => number): Bucked {
  const { lengthFt, end, trim, lengthsFt, cut } = stemSteps(stem, rules);
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
    for (const feet of lengthsFt) {
      const found = cut(step, feet);
      if (!found) continue;
      const { from, top, straight, ...log } = found;
      const own = worthOf({ ...log, largeEndIn: Math.max(log.smallEndIn, straight.largeEndIn) });
      // Of two ways that are worth the same, the one that begins nearer the butt and has the longer log.
      if (own > 0 && own + (best[top] as number) > value - 1e-9) {
        value = own + (best[top] as number);
        taken[step] = { ...log, fromButtFt: from / STEPS_PER_FT, value: own };
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
  return { logs, value: best[0] ?? 0, leftFt: leftOver(lengthFt, logs, trim) };
}

/** What of a stem is in no log, ft; the trim of a log is in it. @param trim steps */
export const leftOver = (stemFt: number, logs: readonly { readonly lengthFt: number }[], trim: number): number => Math.max(0, stemFt - logs.reduce((sum, log) => sum + log.lengthFt + trim / STEPS_PER_FT, 0));
