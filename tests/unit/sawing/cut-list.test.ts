import fc from 'fast-check';
import { beforeAll, describe, expect, it } from 'vitest';
import { cutList, type CutListRequest, type Patience } from '~/domain/sawing/cut-list.ts';
import { cubicFeet } from '~/domain/sawing/log-shape.ts';
import type { Solver } from '~/domain/sawing/solver.ts';
import { highsSolver } from '~/server/services/solver.ts';
import { faults } from './check-plan.ts';

let solve: Solver;
beforeAll(async () => {
  solve = await highsSolver();
});

/** A number of things planned, so that an answer does not hang on the clock. */
const planning = (turns: number): Patience => {
  let left = turns;
  return { toPlan: () => left-- > 0, solverSeconds: 2 };
};

/** What is wrong with an answer, by its own figures. */
function wrong(asked: CutListRequest, turns = 12): string[] {
  const answer = cutList(asked, solve, planning(turns));
  const found: string[] = [];
  const say = (ok: boolean, words: string): void => void (ok || found.push(words));
  say(answer.plans.length === asked.logs.length && answer.plans.every((plan, index) => plan.logId === asked.logs[index]?.id), 'not a plan for every log');
  answer.plans.forEach((plan, index) => {
    const log = asked.logs[index];
    if (log) found.push(...faults({ log, mill: asked.mill, pattern: asked.pattern ?? 'best', pieces: sizes(asked), waneAllowanceIn: asked.waneAllowanceIn }, plan));
  });
  const boards = answer.plans.flatMap((plan) => plan.boards);
  sizes(asked).forEach((size) => {
    const same = asked.pieces.filter((piece) => piece.thicknessIn === size.thicknessIn && piece.widthIn === size.widthIn && piece.lengthFt === size.lengthFt).map((piece) => piece.id);
    const covered = answer.covered.filter(({ id }) => same.includes(id));
    const made = boards.filter((board) => board.thicknessIn === size.thicknessIn && board.widthIn === size.widthIn && board.lengthFt === size.lengthFt).length;
    say(covered.reduce((sum, each) => sum + each.made, 0) === made, 'made is not what the plans hold');
  });
  answer.covered.forEach((each, index) => say(each.made >= 0 && each.short >= 0 && each.made + each.short === asked.pieces[index]?.count, 'made and short are not the count'));
  const short = answer.covered.reduce((sum, each, index) => sum + each.short * bf(asked.pieces[index]), 0);
  say(Math.abs(short - answer.boardFeetShort) < 1e-6, 'board feet short do not add up');
  say(answer.boundBoardFeetShort <= answer.boardFeetShort + 1e-6, 'a bound over the answer');
  say(Math.abs(answer.gapBoardFeet - (answer.boardFeetShort - answer.boundBoardFeetShort)) < 1e-6, 'the gap is not the gap');
  say(!answer.provenBest || answer.gapBoardFeet < 1e-6, 'proven best with a gap');
  return found;
}

const bf = (piece: CutListRequest['pieces'][number] | undefined): number => (piece ? (piece.thicknessIn * piece.widthIn * piece.lengthFt) / 12 : 0);
const sizes = ({ pieces }: CutListRequest) => [...new Map(pieces.map(({ thicknessIn, widthIn, lengthFt }) => [`${thicknessIn} ${widthIn} ${lengthFt}`, { thicknessIn, widthIn, lengthFt }])).values()];

const request: fc.Arbitrary<CutListRequest> = fc
  .record({
    logs: fc.array(fc.record({ smallEndIn: fc.integer({ min: 16, max: 56 }).map((n) => n / 4), lengthFt: fc.constantFrom(8, 10, 12), heartDefectIn: fc.option(fc.constantFrom(1, 2, 3), { nil: undefined }) }), { minLength: 1, maxLength: 4 }),
    kerfIn: fc.constantFrom(0.094, 0.125, 0.25),
    widestCutIn: fc.option(fc.constantFrom(10, 14), { nil: undefined }),
    pattern: fc.constantFrom('live', 'cant', 'quartersawn', 'best', undefined),
    waneAllowanceIn: fc.constantFrom(undefined, 0, 0.5),
    pieces: fc.array(fc.record({ thicknessIn: fc.constantFrom(1, 1.125, 2, 4), widthIn: fc.constantFrom(3, 4, 6, 8), lengthFt: fc.constantFrom(4, 8, 10), count: fc.integer({ min: 1, max: 20 }) }), { minLength: 1, maxLength: 4 }),
  })
  .map(({ logs, kerfIn, widestCutIn, pattern, waneAllowanceIn, pieces }): CutListRequest => ({
    logs: logs.map((log, index) => ({ id: `log ${index}`, ...log })),
    mill: { kerfIn, widestCutIn },
    pattern,
    waneAllowanceIn,
    pieces: pieces.map((piece, index) => ({ id: `piece ${index}`, ...piece })),
  }));

const logs = (...inches: number[]): CutListRequest['logs'] => inches.map((smallEndIn, index) => ({ id: `log ${index + 1}`, smallEndIn, lengthFt: 8 }));
const mill = { kerfIn: 0.125 };

describe('a cut list over many logs', () => {
  it('makes sound plans whose boards are what it says is made', () => {
    fc.assert(fc.property(request, (asked) => { expect(wrong(asked)).toEqual([]); }), { numRuns: Number(process.env.LIST_RUNS ?? 25) });
  }, 300_000);

  it('takes the smallest log that makes the list, and proves it', () => {
    const answer = cutList({ logs: logs(18, 9, 12), mill, pieces: [{ id: 'shelf', thicknessIn: 1, widthIn: 6, lengthFt: 8, count: 4 }] }, solve, planning(20));
    expect(answer).toMatchObject({ boardFeetShort: 0, boundBoardFeetShort: 0, provenBest: true, covered: [{ id: 'shelf', made: 4, short: 0 }] });
    expect(answer.plans.map((plan) => plan.boards.length)).toEqual([0, 4, 0]);
    expect(answer.plans[0]?.reason).toContain('Not needed');
    expect(cubicFeet({ smallEndIn: 9, lengthFt: 8 })).toBeLessThan(cubicFeet({ smallEndIn: 12, lengthFt: 8 }));
  });

  it('is right where every way can be tried: single boards of one layer', () => {
    // A log of 4.2 in holds one board of 1 × 4 in and no second beside it that is as wide; two logs, three wanted: one stays short.
    const answer = cutList({ logs: [{ id: 'a', smallEndIn: 4.2, largeEndIn: 4.2, lengthFt: 8 }, { id: 'b', smallEndIn: 4.2, largeEndIn: 4.2, lengthFt: 8 }], mill, pattern: 'live', pieces: [{ id: 'slat', thicknessIn: 1, widthIn: 4, lengthFt: 8, count: 3 }] }, solve, planning(20));
    expect(answer).toMatchObject({ covered: [{ id: 'slat', made: 2, short: 1 }], provenBest: true });
    expect(answer.boardFeetShort).toBeCloseTo(8 / 3, 6);
  });

  it('says that none fits: wider than any log, longer than any log, kerf beyond the wood', () => {
    const none = (piece: { thicknessIn: number; widthIn: number; lengthFt: number }, kerfIn = 0.125): void => {
      const answer = cutList({ logs: logs(12, 14), mill: { kerfIn }, pieces: [{ id: 'piece', ...piece, count: 2 }] }, solve, planning(5));
      expect(answer).toMatchObject({ covered: [{ made: 0, short: 2 }], provenBest: true, surplusBoardFeet: 0 });
      expect(answer.plans.every((plan) => plan.boards.length === 0 && (plan.reason ?? '').length > 10)).toBe(true);
    };
    none({ thicknessIn: 1, widthIn: 60, lengthFt: 8 });
    none({ thicknessIn: 1, widthIn: 6, lengthFt: 16 });
    none({ thicknessIn: 20, widthIn: 20, lengthFt: 8 }, 2);
  });

  it('takes a kerf thicker than the board, and ten thousand pieces', () => {
    const thick = { logs: logs(12), mill: { kerfIn: 1.5 }, pieces: [{ id: 'slat', thicknessIn: 0.5, widthIn: 4, lengthFt: 8, count: 10_000 }] };
    expect(wrong(thick)).toEqual([]);
    const answer = cutList(thick, solve, planning(5));
    expect(answer.covered[0]?.made).toBeGreaterThan(3);
    expect(answer.covered[0]?.short).toBeGreaterThan(9_900);
  });

  it('takes no more plans than there are logs, whatever a solver stopped short of an answer says', () => {
    const hasty: Solver = (model) => ({ proven: false, cost: 0, columns: model.columns.map(() => 9), prices: model.rows.map(() => 0) });
    const asked: CutListRequest = { logs: logs(9, 9), mill, pieces: [{ id: 'shelf', thicknessIn: 1, widthIn: 6, lengthFt: 8, count: 40 }] };
    const answer = cutList(asked, hasty, planning(20));
    const boards = answer.plans.reduce((sum, plan) => sum + plan.boards.length, 0);
    expect(boards).toBeGreaterThan(0);
    expect(answer.covered).toEqual([{ id: 'shelf', made: boards, short: 40 - boards }]);
    expect(answer.surplusBoardFeet).toBe(0);
  });

  it('keeps to the mill’s longest log', () => {
    const answer = cutList({ logs: logs(12), mill: { kerfIn: 0.125, longestFt: 6 }, pieces: [{ id: 'slat', thicknessIn: 1, widthIn: 4, lengthFt: 4, count: 1 }] }, solve, planning(5));
    expect(answer.plans[0]?.reason).toContain('6 ft');
    expect(answer.provenBest).toBe(true);
  });
});
