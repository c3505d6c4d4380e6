import fc from 'fast-check';
import { beforeAll, describe, expect, it } from 'vitest';
import { section } from '~/domain/sawing/board.ts';
import { FOHC_CLEAR_IN } from '~/domain/sawing/heart-timber.ts';
import { listingPlan, type ListingPlan } from '~/domain/sawing/listing-plan.ts';
import type { WantedPiece } from '~/domain/sawing/cut-list.ts';
import { cubicFeet, radiusAt } from '~/domain/sawing/log-shape.ts';
import { kindPlans } from '~/domain/sawing/kind-plans.ts';
import { leastLogOf, planFor, slabsIn } from '~/domain/sawing/special-pieces.ts';
import type { Solver } from '~/domain/sawing/solver.ts';
import { highsSolver } from '~/server/services/solver.ts';
import { replayed } from './check-plan.ts';

let solve: Solver;
beforeAll(async () => {
  solve = await highsSolver();
});
const patience = (turns: number) => {
  let left = turns;
  return { toPlan: () => left-- > 0, solverSeconds: 2 };
};
const mill = { kerfIn: 0.125 };
const log = (id: string, smallEndIn: number, lengthFt = 10.5) => ({ id, smallEndIn, lengthFt, defects: [] });
const plan = (logs: Parameters<typeof log>[], pieces: readonly WantedPiece[]): ListingPlan => listingPlan({ logs: logs.map((each) => log(...each)), mill, pieces }, solve, patience(6));

/** What is wrong with the boards of a plan, each by its own corners. */
function faultsOf({ logs }: ListingPlan, pieces: readonly WantedPiece[], kerfIn: number): string[] {
  return logs.flatMap(({ core, use, plan: { boards } }) => {
    if (!core) return [];
    const boxes = boards.map((board) => ({ board, ...section(board) }));
    const found = boxes.flatMap(({ board, left, right, bottom, top }) => {
      const kind = use === 'cut-list' ? (pieces[board.piece]?.kind ?? 'board') : 'board';
      const corner = Math.hypot(Math.max(Math.abs(left), Math.abs(right)), Math.max(Math.abs(bottom), Math.abs(top)));
      const near = Math.hypot(left > 0 ? left : Math.min(0, right), bottom > 0 ? bottom : Math.min(0, top));
      return [
        ...(corner > radiusAt(core, board.startFt) + 1e-6 ? [`${kind} out of the wood`] : []),
        ...(kind === 'boxed-heart' && (Math.abs(left + right) > 1e-6 || Math.abs(bottom + top) > 1e-6) ? ['the heart is not in the middle'] : []),
        ...(kind === 'free-of-heart' && near < FOHC_CLEAR_IN - 1e-6 ? [`${near} from the pith`] : []),
        ...(kind === 'slab' && bottom < kerfIn - 1e-6 && top > 1e-6 - kerfIn && Math.abs(bottom + top) > 1e-6 ? ['the pith is split between two slabs'] : []),
        ...(kind === 'slab' && board.widthIn < (pieces[board.piece]?.widthIn ?? 0) - 0.125 ? ['a slab too narrow'] : []),
      ];
    });
    const touching = boxes.flatMap((a, index) => boxes.slice(index + 1).filter((b) => Math.max(b.left - a.right, a.left - b.right, b.bottom - a.top, a.bottom - b.top) < kerfIn - 1e-6).map(() => 'boards closer than the kerf'));
    return [...found, ...touching];
  });
}

describe('timbers and slabs in a cut list', () => {
  it('lie as their kind asks, in the wood, a kerf apart, and are counted as they stand in the plans', () => {
    const kinds = fc.constantFrom('board', 'boxed-heart', 'free-of-heart', 'slab');
    const pieces = fc.array(fc.record({ kind: kinds, thicknessIn: fc.constantFrom(2, 2.5, 4, 6), widthIn: fc.constantFrom(4, 6, 8, 12), count: fc.integer({ min: 1, max: 4 }) }), { minLength: 1, maxLength: 3 });
    const logs = fc.array(fc.integer({ min: 8, max: 26 }), { minLength: 1, maxLength: 4 });
    fc.assert(fc.property(logs, pieces, (inches, asked) => {
      const wanted = asked.map((piece, index): WantedPiece => ({ ...piece, id: String(index), lengthFt: 8 }));
      const made = plan(inches.map((smallEndIn, index) => [String(index), smallEndIn]), wanted);
      expect(faultsOf(made, wanted, mill.kerfIn)).toEqual([]);
      for (const { core, plan: sawn } of made.logs) if (core && sawn.pattern !== 'quartersawn') expect(replayed({ log: core, mill }, sawn)).toEqual([]);
      for (const [index, { kind, count }] of wanted.entries()) {
        const { made: said, short } = made.list?.covered[index] ?? { made: -1, short: -1 };
        expect(said + short).toBe(count);
        // Boards of one size ask for the same boards; kinds have their own.
        if (kind !== 'board') expect(made.logs.reduce((sum, { use, plan: { boards } }) => use !== 'cut-list' ? sum : sum + boards.filter((board) => board.piece === index).length, 0)).toBe(said);
      }
    }), { numRuns: 15 });
  }, 120_000);

  it('take the smallest log that boxes a timber, and leave the others to the boards', () => {
    const wanted: readonly WantedPiece[] = [{ id: 'post', kind: 'boxed-heart', thicknessIn: 8, widthIn: 8, lengthFt: 10, count: 1 }, { id: 'shelf', thicknessIn: 1.125, widthIn: 6, lengthFt: 8, count: 4 }];
    const { list, logs, shortfalls } = plan([['large', 20], ['small', 12], ['thin', 9]], wanted);
    expect(list?.covered).toEqual([{ id: 'post', made: 1, short: 0 }, { id: 'shelf', made: 4, short: 0 }]);
    expect(logs.find(({ id }) => id === 'small')?.plan.boards.filter(({ piece }) => piece === 0)).toHaveLength(1);
    // What the small log gives beside the post is made of it as well; the large one is not needed.
    expect(logs.find(({ id }) => id === 'small')?.plan.boards.some(({ piece }) => piece === 1)).toBe(true);
    expect(logs.find(({ id }) => id === 'large')?.use).toBe('jacket');
    expect(shortfalls).toEqual([]);
  });

  it('name the log that would mend what is short, and prove that none fits', () => {
    const wanted: readonly WantedPiece[] = [{ id: 'slab', kind: 'slab', thicknessIn: 2.5, widthIn: 18, lengthFt: 8, count: 2 }];
    const { list, shortfalls } = plan([['one', 12]], wanted);
    const least = leastLogOf(wanted[0] as WantedPiece, mill) ?? 0;
    expect(list).toMatchObject({ boardFeetShort: 60, provenBest: true });
    expect(shortfalls).toEqual([{ id: 'slab', short: 2, mend: [`More logs, each at least ${least} in at the small end and 8 ft long.`] }]);
    expect(planFor({ smallEndIn: least, lengthFt: 8 }, mill, wanted[0] as WantedPiece, 1).boards).toHaveLength(1);
    expect(planFor({ smallEndIn: least - 1, lengthFt: 8 }, mill, wanted[0] as WantedPiece, 1).boards).toEqual([]);
  });

  it('keep to the mill: its longest log, widest cut and widest board', () => {
    const slab: WantedPiece = { id: 's', kind: 'slab', thicknessIn: 2, widthIn: 10, lengthFt: 8, count: 9 };
    const core = { smallEndIn: 20, lengthFt: 10 };
    const open = planFor(core, mill, slab, 9).boards.length;
    expect(open).toBeGreaterThan(2);
    expect(planFor(core, { ...mill, longestFt: 9 }, slab, 9).boards).toEqual([]);
    const narrow = planFor(core, { ...mill, widestCutIn: 16 }, slab, 9).boards;
    expect(narrow.length).toBeLessThan(open);
    // No face of these is a wider cut at the large end than the mill makes.
    for (const { yIn } of narrow) for (const face of [yIn, yIn + 2]) expect(2 * Math.sqrt((21.25 / 2) ** 2 - face ** 2)).toBeLessThanOrEqual(16);
    expect(planFor(core, { ...mill, widestBoardIn: 7 }, { ...slab, kind: 'boxed-heart', thicknessIn: 8, widthIn: 8 }, 1).reason).toContain('widest board');
    expect(planFor({ ...core, heartDefectIn: 3 }, mill, { ...slab, kind: 'boxed-heart', thicknessIn: 8, widthIn: 8 }, 1).reason).toContain('rotten heart');
  });

  it('come with boards from the same log: one log makes a post and the shelves', () => {
    const wanted: readonly WantedPiece[] = [{ id: 'post', kind: 'boxed-heart', thicknessIn: 6, widthIn: 6, lengthFt: 10, count: 1 }, { id: 'shelf', thicknessIn: 1.125, widthIn: 6, lengthFt: 8, count: 4 }];
    const { list } = plan([['one', 13]], wanted);
    expect(list).toMatchObject({ boardFeetShort: 0, provenBest: true });
    const slabs = plan([['one', 16]], [{ id: 'top', kind: 'slab', thicknessIn: 2.5, widthIn: 12, lengthFt: 10, count: 2 }, { id: 'slat', thicknessIn: 1, widthIn: 4, lengthFt: 10, count: 4 }]);
    expect(slabs.list).toMatchObject({ boardFeetShort: 0, provenBest: true });
  });

  it('leave as little short, from as little log, as every way of giving logs to them', () => {
    const kinds = fc.constantFrom('boxed-heart' as const, 'slab' as const);
    const pieces = fc.array(fc.record({ kind: kinds, thicknessIn: fc.constantFrom(2, 3, 4), widthIn: fc.constantFrom(6, 8, 10), lengthFt: fc.constantFrom(8, 12), count: fc.integer({ min: 1, max: 4 }) }), { minLength: 1, maxLength: 3 });
    const logs = fc.array(fc.record({ smallEndIn: fc.integer({ min: 7, max: 18 }), lengthFt: fc.constantFrom(8, 12) }), { minLength: 1, maxLength: 4 });
    let proven = 0;
    fc.assert(fc.property(logs, pieces, (shapes, asked) => {
      const wanted = asked.map((piece, index): WantedPiece => ({ ...piece, id: String(index) }));
      const feet = wanted.map(({ thicknessIn, widthIn, lengthFt }) => (thicknessIn * widthIn * lengthFt) / 12);
      const most = shapes.map((core) => wanted.map((piece) => (piece.kind === 'slab' ? slabsIn(core, mill, piece).length : planFor(core, mill, piece, 1).boards.length)));
      // Every way: each log is left, or given to one of the pieces.
      let [short, used] = [Infinity, Infinity];
      const give = (log: number, left: readonly number[], volume: number): void => {
        const core = shapes[log];
        if (!core) {
          const missing = left.reduce((sum, count, index) => sum + Math.max(0, count) * (feet[index] ?? 0), 0);
          if (missing < short - 1e-6 || (missing < short + 1e-6 && volume < used - 1e-6)) [short, used] = [missing, volume];
          return;
        }
        give(log + 1, left, volume);
        wanted.forEach((_, piece) => {
          const gives = most[log]?.[piece] ?? 0;
          if (gives > 0) give(log + 1, left.map((count, index) => (index === piece ? count - gives : count)), volume + cubicFeet(core));
        });
      };
      give(0, wanted.map(({ count }) => count), 0);
      const { list, logs: planned } = listingPlan({ logs: shapes.map((shape, index) => ({ ...shape, id: String(index), defects: [] })), mill, pieces: wanted }, solve, patience(40));
      expect(list?.boardFeetShort).toBeLessThanOrEqual(short + 1e-6);
      expect(list?.boundBoardFeetShort).toBeLessThanOrEqual(short + 1e-6);
      expect(list?.boardFeetShort).toBeCloseTo(short, 6);
      const volume = planned.reduce((sum, { core, use }) => (use === 'cut-list' && core ? sum + cubicFeet(core) : sum), 0);
      if (list?.provenBest) {
        proven += 1;
        expect(volume).toBeLessThanOrEqual(used + 1e-6);
      }
    }), { numRuns: 15 });
    expect(proven).toBeGreaterThan(7);
  }, 120_000);

  it('are worth no more than the bound of their log, whatever prices they were planned at', () => {
    const kinds = fc.constantFrom('board' as const, 'boxed-heart' as const, 'free-of-heart' as const, 'slab' as const);
    const size = fc.record({ kind: kinds, thicknessIn: fc.constantFrom(1, 2, 4, 6), widthIn: fc.constantFrom(4, 6, 8), lengthFt: fc.constantFrom(6, 10) });
    const asked = fc.record({
      log: fc.record({ smallEndIn: fc.integer({ min: 7, max: 20 }), lengthFt: fc.constant(10), heartDefectIn: fc.constantFrom(undefined, 1.5) }),
      widestCutIn: fc.constantFrom(undefined, 12),
      pattern: fc.constantFrom('live' as const, 'cant' as const, 'best' as const, 'quartersawn' as const),
      sizes: fc.array(fc.tuple(size, fc.constantFrom(0, 0.5, 1, 3), fc.constantFrom(0, 1, 2)), { minLength: 1, maxLength: 4 }),
    });
    fc.assert(fc.property(asked, ({ log: core, widestCutIn, pattern, sizes }) => {
      const at = (price: 1 | 2) => kindPlans({ log: core, mill: { kerfIn: 0.125, widestCutIn }, pattern, effort: 12, sizes: sizes.map((each) => ({ ...each[0], value: each[price] })) });
      for (const [here, there] of [[1, 2], [2, 1]] as const) {
        const { bound } = at(here);
        for (const { boards } of at(there).plans) {
          // A slab counts at the size that was asked for.
          const worth = boards.reduce((sum, { piece }) => { const each = sizes[piece]; return each ? sum + (each[here] * each[0].thicknessIn * each[0].widthIn * each[0].lengthFt) / 12 : Infinity; }, 0);
          expect(worth).toBeLessThanOrEqual(bound + 1e-6);
        }
      }
    }), { numRuns: 30 });
  }, 120_000);

  it('of five thousand slabs and two hundred logs are planned without more time than is given', () => {
    const logs = Array.from({ length: 200 }, (_, index) => ({ id: String(index), smallEndIn: 10 + (index % 14), lengthFt: 10, defects: [] }));
    const { list } = listingPlan({ logs, mill, pieces: [{ id: 's', kind: 'slab', thicknessIn: 2, widthIn: 8, lengthFt: 8, count: 5000 }] }, solve, patience(0));
    const most = logs.reduce((sum, core) => sum + slabsIn(core, mill, { kind: 'slab', thicknessIn: 2, widthIn: 8, lengthFt: 8 }).length, 0);
    expect(list).toMatchObject({ covered: [{ made: most, short: 5000 - most }], provenBest: true });
  });
});
