import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { cutPieces, type BoardAtHand, type PieceToCut } from '~/domain/timber/cut-pieces.ts';

const board = (id: string, lengthIn: number, count = 1): BoardAtHand => ({ id, lengthIn, count });
const piece = (id: string, lengthIn: number, count = 1): PieceToCut => ({ id, lengthIn, count });

/** Tries every way to give every single piece to a board or to none. */
function exhaustive(boards: readonly BoardAtHand[], pieces: readonly PieceToCut[], kerfIn: number): { madeIn: number; usedIn: number } {
  const rooms = boards.flatMap(({ lengthIn, count }) => Array.from({ length: count }, () => lengthIn));
  const each = pieces.flatMap(({ lengthIn, count }) => Array.from({ length: count }, () => lengthIn));
  const held = rooms.map((): number[] => []);
  let best = { madeIn: 0, usedIn: 0 };
  const go = (at: number): void => {
    if (at === each.length) {
      const madeIn = held.flat().reduce((sum, length) => sum + length, 0);
      const usedIn = rooms.reduce((sum, room, index) => sum + ((held[index]?.length ?? 0) > 0 ? room : 0), 0);
      if (madeIn > best.madeIn + 1e-9 || (Math.abs(madeIn - best.madeIn) < 1e-9 && usedIn < best.usedIn)) best = { madeIn, usedIn };
      return;
    }
    go(at + 1);
    for (const [index, room] of rooms.entries()) {
      const here = held[index] ?? [];
      const needed = [...here, each[at] ?? 0].reduce((sum, length) => sum + length, 0) + kerfIn * here.length;
      if (needed > room + 1e-9) continue;
      here.push(each[at] ?? 0);
      go(at + 1);
      here.pop();
    }
  };
  go(0);
  return best;
}

describe('cutting boards to pieces', () => {
  it('takes the shorter boards when they do', () => {
    // 2 legs of 29 in and 1 rail of 40 in, saw 1/8 in: 29 + 1/8 + 29 = 58 1/8 in from the 60; 40 from the 48; the 96 stays whole.
    const plan = cutPieces([board('a', 96), board('b', 60), board('c', 48)], [piece('leg', 29, 2), piece('rail', 40)], 0.125);
    expect(plan).toMatchObject({ short: [], madeIn: 98, usedIn: 108, provenBest: true });
    expect(plan.boards).toEqual([
      { boardId: 'c', lengthIn: 48, pieces: ['rail'], offcutIn: 7.875 },
      { boardId: 'b', lengthIn: 60, pieces: ['leg', 'leg'], offcutIn: 1.75 },
    ]);
  });

  it('names what no board is left for', () => {
    expect(cutPieces([board('a', 50)], [piece('top', 60), piece('shelf', 24, 3)], 0.125)).toMatchObject({ short: [{ id: 'top', count: 1 }, { id: 'shelf', count: 1 }], madeIn: 48 });
  });

  it('counts no cut at the end of a board that is just long enough', () => {
    expect(cutPieces([board('a', 96)], [piece('slat', 96)], 0.125)).toMatchObject({ short: [], boards: [{ offcutIn: 0 }] });
    expect(cutPieces([board('a', 96)], [piece('half', 48, 2)], 0.125).short).toEqual([{ id: 'half', count: 1 }]);
  });

  it('agrees with trying everything', () => {
    const length = fc.integer({ min: 8, max: 60 });
    fc.assert(
      fc.property(fc.array(length, { minLength: 1, maxLength: 4 }), fc.array(fc.tuple(length, fc.integer({ min: 1, max: 2 })), { minLength: 1, maxLength: 3 }), fc.constantFrom(0, 0.125, 0.25), (rooms, wanted, kerfIn) => {
        const boards = rooms.map((room, index) => board(`b${index}`, room));
        const pieces = wanted.map(([long, count], index) => piece(`p${index}`, long, count));
        const { madeIn, usedIn, provenBest } = cutPieces(boards, pieces, kerfIn);
        expect({ madeIn, usedIn, provenBest }).toEqual({ ...exhaustive(boards, pieces, kerfIn), provenBest: true });
      }),
      { numRuns: 200 },
    );
  });
});
