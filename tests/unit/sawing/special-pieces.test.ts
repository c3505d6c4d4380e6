import fc from 'fast-check';
import { beforeAll, describe, expect, it } from 'vitest';
import { section } from '~/domain/sawing/board.ts';
import { FOHC_CLEAR_IN } from '~/domain/sawing/heart-timber.ts';
import { listingPlan, type ListingPlan } from '~/domain/sawing/listing-plan.ts';
import { radiusAt } from '~/domain/sawing/log-shape.ts';
import { dedicate, type KindPiece, leastLogOf, planFor } from '~/domain/sawing/special-pieces.ts';
import type { Solver } from '~/domain/sawing/solver.ts';
import { highsSolver } from '~/server/services/solver.ts';

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
const plan = (logs: Parameters<typeof log>[], pieces: readonly KindPiece[]): ListingPlan => listingPlan({ logs: logs.map((each) => log(...each)), mill, pieces }, solve, patience(6));

/** What is wrong with the boards of a plan, each by its own corners. */
function faultsOf({ logs }: ListingPlan, pieces: readonly KindPiece[], kerfIn: number): string[] {
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
      const wanted = asked.map((piece, index): KindPiece => ({ ...piece, id: String(index), lengthFt: 8 }));
      const made = plan(inches.map((smallEndIn, index) => [String(index), smallEndIn]), wanted);
      expect(faultsOf(made, wanted, mill.kerfIn)).toEqual([]);
      for (const [index, { kind, count }] of wanted.entries()) {
        const { made: said, short } = made.list?.covered[index] ?? { made: -1, short: -1 };
        expect(said + short).toBe(count);
        // Boards of one size ask for the same boards; kinds have their own.
        if (kind !== 'board') expect(made.logs.reduce((sum, { use, plan: { boards } }) => use !== 'cut-list' ? sum : sum + boards.filter((board) => board.piece === index).length, 0)).toBe(said);
      }
    }), { numRuns: 25 });
  }, 120_000);

  it('take the smallest log that boxes a timber, and leave the others to the boards', () => {
    const wanted: readonly KindPiece[] = [{ id: 'post', kind: 'boxed-heart', thicknessIn: 8, widthIn: 8, lengthFt: 10, count: 1 }, { id: 'shelf', thicknessIn: 1.125, widthIn: 6, lengthFt: 8, count: 4 }];
    const { list, logs, shortfalls } = plan([['large', 20], ['small', 12], ['thin', 9]], wanted);
    expect(list?.covered).toEqual([{ id: 'post', made: 1, short: 0 }, { id: 'shelf', made: 4, short: 0 }]);
    expect(logs.find(({ id }) => id === 'small')?.plan.boards.filter(({ piece }) => piece === 0)).toHaveLength(1);
    expect(logs.find(({ id }) => id === 'small')?.plan.boards.some(({ piece }) => piece === 2)).toBe(true);
    expect(shortfalls).toEqual([]);
  });

  it('name the log that would mend what is short, and never claim a proof', () => {
    const wanted: readonly KindPiece[] = [{ id: 'slab', kind: 'slab', thicknessIn: 2.5, widthIn: 18, lengthFt: 8, count: 2 }];
    const { list, shortfalls } = plan([['one', 12]], wanted);
    const least = leastLogOf(wanted[0] as KindPiece, mill) ?? 0;
    expect(list).toMatchObject({ boardFeetShort: 60, provenBest: false });
    expect(shortfalls).toEqual([{ id: 'slab', short: 2, mend: [`More logs, each at least ${least} in at the small end and 8 ft long.`] }]);
    expect(planFor({ smallEndIn: least, lengthFt: 8 }, mill, wanted[0] as KindPiece, 1).boards).toHaveLength(1);
    expect(planFor({ smallEndIn: least - 1, lengthFt: 8 }, mill, wanted[0] as KindPiece, 1).boards).toEqual([]);
  });

  it('keep to the mill: its longest log, widest cut and widest board', () => {
    const slab: KindPiece = { id: 's', kind: 'slab', thicknessIn: 2, widthIn: 10, lengthFt: 8, count: 9 };
    const core = { smallEndIn: 20, lengthFt: 10 };
    const open = planFor(core, mill, slab, 9).boards.length;
    expect(open).toBeGreaterThan(2);
    expect(planFor(core, { ...mill, longestFt: 9 }, slab, 9).boards).toEqual([]);
    const narrow = planFor(core, { ...mill, widestCutIn: 16 }, slab, 9).boards;
    expect(narrow.length).toBeLessThan(open);
    expect(planFor(core, { ...mill, widestBoardIn: 7 }, { ...slab, kind: 'boxed-heart', thicknessIn: 8, widthIn: 8 }, 1).reason).toContain('widest board');
    expect(planFor({ ...core, heartDefectIn: 3 }, mill, { ...slab, kind: 'boxed-heart', thicknessIn: 8, widthIn: 8 }, 1).reason).toContain('rotten heart');
  });

  it('of five thousand slabs and two hundred logs are planned at once', () => {
    const logs = Array.from({ length: 200 }, (_, index) => ({ id: String(index), core: { smallEndIn: 10 + (index % 14), lengthFt: 10 } }));
    const { taken, made } = dedicate(logs, mill, [{ id: 's', kind: 'slab', thicknessIn: 2, widthIn: 8, lengthFt: 8, count: 5000 }]);
    expect(taken.length).toBe(200);
    expect(made[0]).toBe(taken.reduce((sum, { plan: { boards } }) => sum + boards.length, 0));
  });
});
