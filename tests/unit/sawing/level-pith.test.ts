import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { levelPith } from '~/domain/sawing/level-pith.ts';

describe('levelling the pith', () => {
  it('raises the small end of a tapered log by half the difference of the diameters', () => {
    // 18 in and 21 in across, round: the pith lies 9 and 10 1/2 in above the bed.
    expect(levelPith(9, 10.5)).toEqual({ raise: 'small end', byIn: 1.5 });
  });

  it('says which end is low when the pith is off centre', () => expect(levelPith(11, 8.75)).toEqual({ raise: 'large end', byIn: 2.25 }));
  it('leaves a log that is level', () => expect(levelPith(9, 9.03)).toEqual({ raise: 'neither', byIn: 0 }));

  it('makes both heights equal, whatever they were', () => {
    fc.assert(
      fc.property(fc.double({ min: 1, max: 40, noNaN: true }), fc.double({ min: 1, max: 40, noNaN: true }), (small, large) => {
        const { raise, byIn } = levelPith(small, large);
        const after = [small + (raise === 'small end' ? byIn : 0), large + (raise === 'large end' ? byIn : 0)] as const;
        expect(Math.abs(after[0] - after[1])).toBeLessThan(1 / 16);
      }),
    );
  });
});
