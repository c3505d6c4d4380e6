import { boardFeetByRule } from '../timber/log-rules.ts';
import { wholeFeet, wholeInches } from '../timber/rounding.ts';
import { type Board, section } from './board.ts';
import { buck, type BuckedLog, type BuckingRules, type CutBetween, leftOver, type Stem, STEPS_PER_FT, type StemSteps, stemSteps } from './bucking.ts';
import { cutList, type CutListAnswer, type CutListRequest, type Patience, type Together, type WantedPiece } from './cut-list.ts';
import { cutsOf } from './cuts.ts';
import { mends, namedByPiece } from './listing-plan.ts';
import { type LogShape, radiusAt } from './log-shape.ts';
import type { Mill } from './pieces.ts';
import type { SawPlan } from './saw-plan.ts';
import type { Shortfall } from './shortfall.ts';
import type { Solver } from './solver.ts';

export interface StemListRequest {
  readonly stem: Stem;
  readonly rules: BuckingRules;
  readonly mill: Mill;
  /** Green sizes. */
  readonly pieces: readonly WantedPiece[];
}

/** A log of a stem with its boards for the list; without a plan where the list does not need it. */
export interface StemLog extends BuckedLog {
  /** The straight log in it that was planned. */
  readonly core: LogShape | null;
  readonly plan: SawPlan | null;
}

export interface StemListPlan {
  /** From the butt up: those of the list, and what the rest of the stem gives by its scale. */
  readonly logs: readonly StemLog[];
  readonly list: Omit<CutListAnswer, 'plans'>;
  readonly shortfalls: readonly Shortfall[];
  /** In no log, ft. */
  readonly leftFt: number;
  /**
   * Whether the bound speaks for every cut of the stem; otherwise for logs that begin at the butt, at another log's end or where a
   * bad stretch or the wood too thick for the mill ends.
   */
  readonly everyCut: boolean;
}

/** Of the lengths allowed, the least that holds each piece: a longer log that begins at the same place gives no more boards, as it tapers no less. */
function usefulLengths(lengthsFt: readonly number[], pieces: readonly WantedPiece[]): number[] {
  const useful = new Set(pieces.flatMap((piece) => lengthsFt.find((feet) => feet >= piece.lengthFt - 1e-9) ?? []));
  return lengthsFt.filter((feet) => useful.has(feet));
}

/**
 * Logs that may be cut, each from the butt, from another log's end or from where a bad stretch ends; also from where a stem that is
 * too thick for the mill's cut is so no more.
 */
function waysToCut({ end, cut, clearFrom, diameterIn }: StemSteps, lengthsFt: readonly number[], { widestCutIn = Infinity }: Mill): CutBetween[] {
  const thin = diameterIn(0) <= widestCutIn ? [] : Array.from({ length: end }, (_, step) => step).filter((step) => diameterIn(step) <= widestCutIn).slice(0, 1);
  const places = new Set([0, ...clearFrom, ...thin]);
  const ways: CutBetween[] = [];
  for (let from = 0; from < end; from++) {
    if (!places.has(from)) continue;
    for (const feet of lengthsFt) {
      const found = cut(from, feet);
      if (!found) continue;
      ways.push(found);
      places.add(found.top);
    }
  }
  return ways;
}

/** Moved towards the butt a log gets no thinner, so that none of these is missed: where the stem tapers no less towards its top, and the mill cuts through its butt. */
function tapersEvenly({ measures }: Stem): boolean {
  const places = [...measures].sort((a, b) => a.fromButtFt - b.fromButtFt);
  const tapers = places.slice(1).map(({ fromButtFt, diameterIn }, index) => {
    const before = places[index];
    return before ? (before.diameterIn - diameterIn) / (fromButtFt - before.fromButtFt) : 0;
  });
  return tapers.every((taper, index) => taper >= (tapers[index - 1] ?? 0) - 1e-9);
}

/** Of ways that lie across the same inch only one may be taken. */
function overlaps(ways: readonly CutBetween[]): Together[] {
  const edges = [...new Set(ways.map(({ from }) => from))].sort((a, b) => a - b);
  return edges.map((edge) => ({ ids: ways.flatMap(({ from, top }, index) => (from <= edge && top > edge ? [String(index)] : [])), most: 1 }));
}

/** Whether boards planned in a thicker log lie in this one too. */
function holds(log: LogShape, boards: readonly Board[]): boolean {
  return boards.every((board) => {
    const { left, right, bottom, top } = section(board);
    return Math.hypot(Math.max(Math.abs(left), Math.abs(right)), Math.max(Math.abs(bottom), Math.abs(top))) <= radiusAt(log, board.startFt) + 1e-9;
  });
}

interface Taken {
  readonly way: CutBetween;
  readonly boards: readonly Board[];
  readonly plan: SawPlan;
}

/** The same logs as far up the stem as their boards allow, so that the thick wood is left for others. */
function movedUp(taken: readonly Taken[], { end, cut }: StemSteps): Taken[] {
  let above = end;
  return [...taken].reverse().map((each) => {
    const { way, boards } = each;
    for (let from = above - (way.top - way.from); from > way.from; from--) {
      const higher = cut(from, way.lengthFt);
      if (!higher || !holds(higher.straight, boards)) continue;
      above = from;
      return { ...each, way: higher };
    }
    above = way.from;
    return each;
  }).reverse();
}

const international = ({ smallEndIn, lengthFt }: LogShape): number => boardFeetByRule('internationalQuarter', wholeInches(smallEndIn), wholeFeet(lengthFt));

/** The same logs as near the butt as they go, so that what is left is left in one piece. */
function movedDown(taken: readonly Taken[], { cut }: StemSteps): Taken[] {
  let below = 0;
  return taken.map((each) => {
    const { way, boards } = each;
    for (let from = below; from < way.from; from++) {
      const lower = cut(from, way.lengthFt);
      if (!lower || !holds(lower.straight, boards)) continue;
      below = lower.top;
      return { ...each, way: lower };
    }
    below = way.top;
    return each;
  });
}

/** The logs of the list in their places, and the rest of the stem cut for its scale. */
function withRest({ stem, rules, mill }: StemListRequest, { lengthFt, trim }: StemSteps, taken: readonly Taken[]): { readonly logs: readonly StemLog[]; readonly leftFt: number; readonly rest: number } {
  const used = taken.map(({ way }) => ({ fromFt: way.from / STEPS_PER_FT, toFt: way.top / STEPS_PER_FT }));
  const rest = buck({ ...stem, leaveOut: [...(stem.leaveOut ?? []), ...used] }, rules, international);
  const listed = taken.map(({ way, boards, plan }): StemLog => ({ smallEndIn: way.smallEndIn, largeEndIn: way.largeEndIn, lengthFt: way.lengthFt, fromButtFt: way.from / STEPS_PER_FT, value: plan.boardFeet, core: way.straight, plan: { ...plan, boards, cuts: cutsOf(way.straight, mill.kerfIn, boards, plan.pattern === 'quartersawn') } }));
  const logs = [...listed, ...rest.logs.map((log): StemLog => ({ ...log, core: null, plan: null }))].sort((a, b) => a.fromButtFt - b.fromButtFt);
  return { logs, leftFt: leftOver(lengthFt, logs, trim), rest: rest.value };
}

/**
 * Where to cut a stem so that its logs give a cut list: least board feet short first, then least log volume. Every way to cut is
 * offered as a log of its own to the choice of plans, and of those that overlap one is taken; so cuts and plans are chosen together,
 * under a bound for both. Where these logs may stand higher or lower, they stand so that the rest of the stem, cut for its scale, is worth most.
 */
export function stemForList(request: StemListRequest, solve: Solver, patience: Patience): StemListPlan {
  const { stem, rules, mill, pieces } = request;
  const steps = stemSteps(stem, rules);
  const ways = waysToCut(steps, usefulLengths(steps.lengthsFt, pieces), mill);
  const logs = ways.map((way, index) => ({ ...way.straight, id: String(index) }));
  const asked: CutListRequest = { logs, mill, pieces, together: overlaps(ways) };
  const { plans, ...list } = cutList(asked, solve, patience);
  const named = namedByPiece(plans, pieces);
  const taken = ways.flatMap((way, index): Taken[] => {
    const plan = plans[index];
    const boards = named.get(String(index)) ?? [];
    return plan && boards.length > 0 ? [{ way, boards, plan }] : [];
  }).sort((a, b) => a.way.from - b.way.from);
  // Of the places where these logs may lie, those whose rest is worth most.
  const { logs: cut, leftFt } = [movedUp(taken, steps), taken, movedDown(taken, steps)].map((places) => withRest(request, steps, places)).reduce((best, each) => (each.rest > best.rest ? each : best));
  const longest = Math.max(0, ...steps.lengthsFt);
  // What would mend a shortfall is said of logs as they are allowed here.
  const mendable: CutListRequest = { ...asked, logs: logs.length > 0 ? logs : [{ id: '', smallEndIn: 0, lengthFt: longest }] };
  return { logs: cut, list, shortfalls: mends(mendable, list.covered.filter(({ short }) => short > 0)), leftFt, everyCut: tapersEvenly(stem) && steps.diameterIn(0) <= (mill.widestCutIn ?? Infinity) };
}
