import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { Board } from '~/domain/sawing/board.ts';
import { cutLines } from '~/domain/sawing/cut-lines.ts';
import { sawPlan, type SawPlan } from '~/domain/sawing/saw-plan.ts';

/** A board's extent along the upright of the log turned so far: clockwise, so that at 90° the right side is up. */
function extent(board: Board, turnDeg: number): readonly [low: number, high: number] {
  const [wide, high] = board.turned ? [board.thicknessIn, board.widthIn] : [board.widthIn, board.thicknessIn];
  const turn = (turnDeg * Math.PI) / 180;
  const along = [[0, 0], [wide, 0], [0, high], [wide, high]].map(([x = 0, y = 0]) => (board.xIn + x) * Math.sin(turn) + (board.yIn + y) * Math.cos(turn));
  return [Math.min(...along), Math.max(...along)];
}

/** Saws the drawing by its lines, in order: what a line cuts through, and what a pass takes off. */
function sawn(log: { readonly smallEndIn: number; readonly lengthFt: number }, plan: SawPlan): { readonly cutThrough: number; readonly boardPassesWithout: number } {
  let left = [...plan.boards];
  let [cutThrough, boardPassesWithout] = [0, 0];
  for (const { order, turnDeg, fromPithIn } of cutLines(log, plan.cuts)) {
    cutThrough += left.filter((board) => { const [low, high] = extent(board, turnDeg); return low < fromPithIn - 1e-3 && high > fromPithIn + 1e-3; }).length;
    const stays = left.filter((board) => extent(board, turnDeg)[0] < fromPithIn - 1e-3);
    if (plan.cuts.find((cut) => cut.order === order)?.kind === 'board' && stays.length === left.length) boardPassesWithout += 1;
    left = stays;
  }
  return { cutThrough, boardPassesWithout };
}

describe('the lines of the cuts in the drawing', () => {
  it('stand where the heights say, of a log sawn through and through', () => {
    // 12 in at the small end, no taper over 8 ft: the pith lies 6 in over the bed. A surface 2 in over the bed lies 4 in under the pith.
    expect(cutLines({ smallEndIn: 12, largeEndIn: 12, lengthFt: 8 }, [{ order: 1, turnDeg: 0, heightIn: 8.5, kind: 'slab' }, { order: 2, turnDeg: 0, heightIn: 2, kind: 'board' }]).map(({ fromPithIn }) => fromPithIn)).toEqual([2.5, -4]);
  });

  it('count from the flat that lies on the bed, after each turn', () => {
    // Pith 6 in over the bed. Face at 10: 4 over the pith. Turned over it lies on that face: the opposite face 8 over it is 4 past the pith.
    // A quarter round, on bark: 9 is 3 past the pith; opposite it 6 over that side is 3 past it. Laid back: 2 over the lower face is 2 below the pith.
    const cuts = ([[0, 10, 'face'], [180, 8, 'face'], [90, 9, 'face'], [270, 6, 'face'], [0, 2, 'board']] as const).map(([turnDeg, heightIn, kind], index) => ({ order: index + 1, turnDeg, heightIn, kind }));
    expect(cutLines({ smallEndIn: 12, largeEndIn: 12, lengthFt: 8 }, cuts).map(({ turnDeg, fromPithIn }) => [turnDeg, fromPithIn])).toEqual([[0, 4], [180, 4], [90, 3], [270, 3], [0, -2]]);
  });

  it('never run through a board that is still in the log, and every board pass takes one off', () => {
    fc.assert(
      fc.property(fc.integer({ min: 32, max: 88 }), fc.constantFrom('live' as const, 'cant' as const), fc.constantFrom(4, 6, 8, undefined), fc.constantFrom(1, 1.125, 2), (quarters, pattern, widthIn, thicknessIn) => {
        const log = { smallEndIn: quarters / 4, lengthFt: 10 };
        const plan = sawPlan({ log, mill: { kerfIn: 0.125 }, pattern, pieces: [{ thicknessIn, widthIn }, { thicknessIn: 4, widthIn: 4, count: 1, value: 3 }], effort: 10 });
        expect(sawn(log, plan)).toEqual({ cutThrough: 0, boardPassesWithout: 0 });
      }),
      { numRuns: 60 },
    );
  });

  it('show the halving and quartering of a quartered log through its pith', () => {
    const log = { smallEndIn: 20, lengthFt: 10 };
    const plan = sawPlan({ log, mill: { kerfIn: 0.125 }, pattern: 'quartersawn', pieces: [{ thicknessIn: 1 }] });
    expect(cutLines(log, plan.cuts).map(({ turnDeg, fromPithIn }) => [turnDeg, fromPithIn])).toEqual([[45, -0.0625], [135, -0.0625]]);
  });
});
