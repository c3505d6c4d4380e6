import fc from 'fast-check';
import { beforeAll, describe, expect, it } from 'vitest';
import { cutSheet } from '~/domain/sawing/cut-sheet.ts';
import { quarterWords } from '~/domain/sawing/cut-words.ts';
import { greenSize } from '~/domain/sawing/green-size.ts';
import { listingPlan, tallyBoardFeet } from '~/domain/sawing/listing-plan.ts';
import { sawPlan } from '~/domain/sawing/saw-plan.ts';
import { leastLogFor } from '~/domain/sawing/shortfall.ts';
import { soundCore } from '~/domain/sawing/sound-core.ts';
import type { Solver } from '~/domain/sawing/solver.ts';
import { highsSolver } from '~/server/services/solver.ts';
import { faults } from './check-plan.ts';

let solve: Solver;
beforeAll(async () => {
  solve = await highsSolver();
});
const patience = (turns: number) => {
  let left = turns;
  return { toPlan: () => left-- > 0, solverSeconds: 2 };
};
const mill = { kerfIn: 0.125 };
const log = (id: string, smallEndIn: number, lengthFt = 8.5) => ({ id, smallEndIn, lengthFt, defects: [] });
const jacketLengths = (lengthFt: number) => [0, 2, 4].map((less) => Math.floor(lengthFt) - less);

describe('the boards of a listing', () => {
  it('fills what the cut list leaves with jacket boards, all sound', () => {
    const asked = fc.record({ smallEndIn: fc.integer({ min: 32, max: 72 }).map((n) => n / 4), widthIn: fc.constantFrom(4, 6, 8), thicknessIn: fc.constantFrom(1.25, 2, 4), count: fc.integer({ min: 1, max: 5 }) });
    fc.assert(fc.property(asked, ({ smallEndIn, widthIn, thicknessIn, count }) => {
      const pieces = [{ id: 'a', thicknessIn, widthIn, lengthFt: 8, count }];
      const plan = listingPlan({ logs: [log('one', smallEndIn)], mill, pieces }, solve, patience(6));
      const [one] = plan.logs;
      if (!one?.core) throw new Error('no sound wood');
      const sizes = [{ thicknessIn, widthIn, lengthFt: 8 }, { thicknessIn: 1.125, value: 1 / 1.125, lengthsFt: jacketLengths(8.5) }];
      const of = one.use === 'jacket' ? one.plan.boards.map((board) => ({ ...board, piece: 1 })) : one.plan.boards;
      const { boardFeet, value } = one.plan;
      expect(faults({ log: one.core, mill, pattern: one.plan.pattern, pieces: sizes }, { ...one.plan, boards: of, upperBoundValue: Math.max(value, boardFeet) })).toEqual([]);
      expect(tallyBoardFeet(plan, pieces)).toBeGreaterThan(0);
    }), { numRuns: 15 });
  }, 60_000);

  it('names what is short and the log that would mend it', () => {
    const plan = listingPlan({ logs: [log('one', 8)], mill: { kerfIn: 0.25 }, pieces: [{ id: 'beam', thicknessIn: 8, widthIn: 8, lengthFt: 8, count: 1 }, { id: 'slat', thicknessIn: 1, widthIn: 4, lengthFt: 8, count: 3 }] }, solve, patience(6));
    expect(plan.list?.covered).toEqual([{ id: 'beam', made: 0, short: 1 }, { id: 'slat', made: 3, short: 0 }]);
    expect(plan.shortfalls.map(({ id }) => id)).toEqual(['beam']);
    expect(plan.shortfalls[0]?.mend.join(' ')).toContain('12 in at the small end');
    expect(leastLogFor({ thicknessIn: 8, widthIn: 8, lengthFt: 8 }, 1, 8, { mill })).toBe(12);
  });

  it('says when a thinner kerf would leave less short, with time of its own to look', () => {
    const pieces = [{ id: 'a', thicknessIn: 1, widthIn: 4, lengthFt: 8, count: 60 }];
    const asked = { logs: [log('one', 12)], mill: { kerfIn: 0.375 }, pieces };
    const spent = { toPlan: () => false, solverSeconds: 2 };
    const { list, thinner } = listingPlan(asked, solve, { ...patience(8), anew: () => patience(8) });
    expect(thinner?.boardFeetShort).toBeLessThan((list?.boardFeetShort ?? 0) - 8);
    expect(thinner?.boardFeetShort).toBeLessThan(listingPlan({ ...asked, mill: { kerfIn: 3 / 32 } }, solve, spent).list?.boardFeetShort ?? 0);
  });

  it('leaves out what a sweep or rot takes', () => {
    expect(soundCore({ smallEndIn: 12, lengthFt: 8, defects: [{ kind: 'sweep', departureIn: 3 }] })).toMatchObject({ smallEndIn: 9, largeEndIn: 10 });
    expect(soundCore({ smallEndIn: 12, lengthFt: 8, heartDefectIn: 4, defects: [] })?.heartDefectIn).toBe(4);
    expect(soundCore({ smallEndIn: 6, lengthFt: 8, heartDefectIn: 8, defects: [] })).toBeNull();
  });
});

describe('a cut sheet', () => {
  it('gives heights over the bark until the flat lies on the bed', () => {
    const [one] = listingPlan({ logs: [log('one', 16, 12)], mill, pieces: [{ id: 'a', thicknessIn: 6, widthIn: 6, lengthFt: 12, count: 1 }] }, solve, patience(6)).logs;
    if (!one?.core) throw new Error('no sound wood');
    const sheet = cutSheet(one.core, one.core, one.plan, 1.05);
    expect(sheet.pithHeightIn).toBeCloseTo((17.5 / 2) * 1.05, 9);
    expect(sheet.raiseSmallEndIn).toBeCloseTo(0.75 * 1.05, 9);
    const lift = sheet.pithHeightIn - 17.5 / 2;
    sheet.cuts.forEach((cut, index) => expect(cut.heightIn - (one.plan.cuts[index]?.heightIn ?? 0)).toBeCloseTo(cut.onBark ? lift : 0, 9));
    expect(sheet.cuts[0]).toMatchObject({ onBark: true, turnByDeg: 0 });
    expect(sheet.cuts.filter((cut) => cut.turnByDeg === 180).every((cut) => !cut.onBark)).toBe(true);
  });
});

describe('the cut sheet of a quartered log', () => {
  it('quarters it on its bark, and says how its quarters are blocked up', () => {
    const core = { smallEndIn: 18, lengthFt: 10 };
    const plan = sawPlan({ log: core, mill, pattern: 'quartersawn', pieces: [{ thicknessIn: 1 }] });
    const { cuts, pithHeightIn } = cutSheet(core, core, plan, 1.05);
    const quarters = cuts.filter(({ kind }) => kind === 'quarter');
    // 18 in and ⅛ in a foot of taper: the large end is 19¼ in. Half a kerf under the pith, over the bark, both times.
    expect(quarters.map(({ heightIn, onBark }) => [heightIn, onBark])).toEqual([[pithHeightIn - 0.0625, true], [pithHeightIn - 0.0625, true]]);
    expect(cuts.filter(({ kind }) => kind !== 'quarter').every(({ onBark }) => !onBark)).toBe(true);
    expect(quarterWords(cuts, 19.25)).toContain('9 5/8 in over the bed');
    // The boards of the quarter on the right lie on both sides of its middle, so their cuts do of the height said.
    const first = plan.boards.filter((board) => !board.turned && board.xIn > 0);
    const cutsOfIt = cuts.filter(({ kind }, index) => kind === 'board' && cuts.slice(0, index).filter(({ turnByDeg }) => turnByDeg !== 0).length === 3);
    expect(cutsOfIt.map(({ heightIn }) => heightIn - 9.625).every((at) => first.some(({ yIn }) => Math.abs(yIn - mill.kerfIn - at) < 1e-6))).toBe(true);
    expect(quarterWords([{ kind: 'board' }], 19.25)).toBe('');
  });
});

describe('green sizes', () => {
  it('are as written full-sawn, and dressed green size plus planing for a store size', () => {
    expect(greenSize({ thicknessIn: 2, widthIn: 4, sizing: 'full-sawn' })).toEqual({ thicknessIn: 2, widthIn: 4 });
    // PS 20: a nominal 2 × 4 is at least 1 9/16 × 3 9/16 green; 1/8 in of planing.
    expect(greenSize({ thicknessIn: 2, widthIn: 4, sizing: 'store-size' })).toEqual({ thicknessIn: 1.6875, widthIn: 3.6875 });
    expect(greenSize({ thicknessIn: 2.25, widthIn: 4, sizing: 'store-size' })).toEqual({ thicknessIn: 2.25, widthIn: 4 });
  });
});
