import { describe, expect, it } from 'vitest';
import { boxedHeart, freeOfHeart, largestBoxedHeartIn } from '~/domain/sawing/heart-timber.ts';
import { liveEdgeSlabs } from '~/domain/sawing/slabs.ts';
import { faults } from './check-plan.ts';

const log = { smallEndIn: 16, largeEndIn: 18, lengthFt: 12 };
const mill = { kerfIn: 0.125 };
const timber = { thicknessIn: 8, widthIn: 8, lengthFt: 12 };
const pieces = [{ thicknessIn: 1.125, lengthFt: 12 }];

describe('timbers', () => {
  it('box the heart in the middle of one timber, with boards from all four sides', () => {
    const plan = boxedHeart({ log, mill, timber, pieces });
    expect(faults({ log, mill, pattern: 'cant', pieces: [...pieces, timber] }, plan)).toEqual([]);
    expect(plan.boards[0]).toMatchObject({ xIn: -4, yIn: -4, thicknessIn: 8, widthIn: 8 });
    const sides = [plan.boards.some((b) => !b.turned && b.yIn >= 4), plan.boards.some((b) => !b.turned && b.yIn < -4), plan.boards.some((b) => b.turned && b.xIn >= 4), plan.boards.some((b) => b.turned && b.xIn < -4)];
    expect(sides).toEqual([true, true, true, true]);
    expect(plan.cuts.map((cut) => cut.turnDeg)).toEqual(expect.arrayContaining([0, 180, 90, 270]));
  });

  it('free of heart centre keep clear of the pith', () => {
    const plan = freeOfHeart({ log: { ...log, smallEndIn: 22, largeEndIn: 24 }, mill, timber: { thicknessIn: 6, widthIn: 8, lengthFt: 12, value: 2 }, pieces });
    expect(plan.boards.filter((board) => board.thicknessIn === 6).length).toBeGreaterThan(1);
    for (const board of plan.boards) {
      const [wide, high] = board.turned ? [board.thicknessIn, board.widthIn] : [board.widthIn, board.thicknessIn];
      const x = board.xIn > 0 ? board.xIn : Math.min(0, board.xIn + wide);
      const y = board.yIn > 0 ? board.yIn : Math.min(0, board.yIn + high);
      expect(Math.hypot(x, y)).toBeGreaterThanOrEqual(1 - 1e-9);
    }
  });

  it('too large for the log or the mill are refused in words', () => {
    expect(boxedHeart({ log, mill, timber: { ...timber, widthIn: 16 }, pieces }).reason).toContain('too small');
    expect(boxedHeart({ log, mill, timber: { ...timber, lengthFt: 14 }, pieces }).reason).toContain('longer');
    expect(boxedHeart({ log, mill: { kerfIn: 0.125, widestCutIn: 12 }, timber, pieces }).reason).toContain('wider cuts');
    expect(largestBoxedHeartIn(log)).toBe(11);
  });
});

describe('live-edge slabs', () => {
  it('have two faces, grow towards the butt, and keep the pith in the middle of one', () => {
    const slabs = liveEdgeSlabs(log, 0.125, 2.25);
    expect(slabs).toHaveLength(5);
    const heart = slabs.find((slab) => slab.bottomIn < 0 && slab.bottomIn + slab.thicknessIn > 0);
    expect(heart?.bottomIn).toBe(-1.125);
    expect(heart?.narrowFaceIn.small).toBeCloseTo(2 * Math.sqrt(64 - 1.125 ** 2), 9);
    for (const slab of slabs) {
      expect(slab.wideFaceIn.small).toBeGreaterThanOrEqual(slab.narrowFaceIn.small);
      expect(slab.narrowFaceIn.large).toBeGreaterThan(slab.narrowFaceIn.small);
      expect(slab.meanFaceSqFt).toBeCloseTo((slab.wideFaceIn.middle + slab.narrowFaceIn.middle) / 2, 9); // 12 ft long
    }
    slabs.slice(1).forEach((slab, index) => expect(slab.bottomIn - (slabs[index]?.bottomIn ?? 0)).toBeCloseTo(2.375, 9));
  });
});
