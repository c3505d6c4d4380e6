import { describe, expect, it } from 'vitest';
import type { PieceRead } from '~/domain/listing/rows.ts';
import { againstList } from '~/domain/timber/against-list.ts';

const piece = (change: Partial<PieceRead>): PieceRead => ({ label: 'Top', thicknessIn: 1.25, widthIn: 8, lengthFt: 10, count: 6, sizing: 'full-sawn', forDwelling: false, kind: 'board', ...change });
const row = (thicknessIn: number, widthIn: number, lengthFt: number, count: number) => ({ kind: 'board' as const, logId: null, thicknessIn, widthIn, lengthFt, count });

describe('the cut list against the dry boards', () => {
  it('counts what was sawn of it, longer boards too, and shrinks it across and through', () => {
    const [top] = againstList([piece({})], [row(1.25, 8, 12, 4), row(1.25, 8, 8, 3), row(1, 8, 12, 9)], () => 'white-oak', 8);
    expect(top?.made).toBe(4);
    expect(againstList([piece({ widthIn: 6 })], [row(1.25, 8, 12, 4), row(1, 8, 12, 9), row(1.25, 8, 8, 3)], () => 'white-oak', 8)[0]).toMatchObject({ made: 0, wider: 4 });
    // White oak 10.5 % across, 5.6 % through (Wood Handbook); 22/30 of it at 8 %: 8 × (1 − 0.077) = 7.384; 1.25 × (1 − 0.0410667) = 1.1987.
    expect(top?.dry?.widthIn).toBeCloseTo(7.384, 3);
    expect(top?.dry?.thicknessIn).toBeCloseTo(1.1987, 4);
    expect([top?.finished, top?.toPlane]).toEqual([null, null]);
  });
  it('leaves the planer something of a store size when dry', () => {
    const [stud] = againstList([piece({ label: 'Stud', thicknessIn: 2, widthIn: 4, sizing: 'store-size' })], [row(2, 4, 10, 6)], () => 'eastern-white-pine', 15);
    // A 2 × 4 is 1 1/2 × 3 1/2 dry (PS 20).
    expect(stud?.finished).toEqual({ thicknessIn: 1.5, widthIn: 3.5 });
    expect(stud?.made).toBe(6);
    for (const face of [stud?.toPlane?.thicknessIn, stud?.toPlane?.widthIn]) {
      expect(face).toBeGreaterThan(0);
      expect(face).toBeLessThan(0.25);
    }
  });
  it('says nothing was made of it while nothing was', () => {
    const [top] = againstList([piece({})], [], () => 'black-walnut', 8);
    expect(top?.made).toBe(0);
    expect(top?.green).toEqual({ thicknessIn: 1.25, widthIn: 8 });
  });
});
