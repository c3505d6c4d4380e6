import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { buck, diameterAt, type Stem } from '~/domain/sawing/bucking.ts';
import type { LogShape } from '~/domain/sawing/log-shape.ts';

/** A worth that favours neither length nor place by itself. */
const cubic = ({ smallEndIn, lengthFt }: LogShape): number => smallEndIn ** 2 * lengthFt - 60;

/** Every way to cut a stem, tried one by one on the same inches. */
function exhaustive(stem: Stem, lengthsFt: readonly number[], trimIn: number, step: number, end: number): number {
  let best = 0;
  if (step < end) best = exhaustive(stem, lengthsFt, trimIn, step + 1, end);
  for (const feet of lengthsFt) {
    const top = step + feet * 12 + trimIn;
    if (top > end || (stem.leaveOut ?? []).some(({ fromFt, toFt }) => fromFt * 12 < top && toFt * 12 > step)) continue;
    const eighth = (at: number): number => Math.floor(diameterAt(stem, at / 12) * 8 + 1e-9) / 8;
    best = Math.max(best, cubic({ smallEndIn: eighth(top), lengthFt: feet }) + exhaustive(stem, lengthsFt, trimIn, top, end));
  }
  return best;
}

describe('bucking', () => {
  it('is as good as every way tried', () => {
    const stem = fc.record({
      measures: fc.tuple(fc.integer({ min: 14, max: 22 }), fc.integer({ min: 9, max: 14 }), fc.integer({ min: 5, max: 9 })).map(([a, b, c]) => [{ fromButtFt: 0, diameterIn: a }, { fromButtFt: 4, diameterIn: b }, { fromButtFt: 8, diameterIn: c }]),
      leaveOut: fc.array(fc.integer({ min: 0, max: 7 }).map((fromFt) => ({ fromFt, toFt: fromFt + 0.5 })), { maxLength: 1 }),
    });
    fc.assert(fc.property(stem, (tree) => {
      const { value, logs } = buck(tree, { lengthsFt: [3, 4], trimIn: 4 }, cubic);
      expect(value).toBeCloseTo(exhaustive(tree, [3, 4], 4, 0, 96), 6);
      expect(logs.reduce((sum, log) => sum + log.value, 0)).toBeCloseTo(value, 6);
    }), { numRuns: 12 });
  });

  it('keeps to the mill’s longest log, the trim and what is to be left out', () => {
    const stem: Stem = { measures: [{ fromButtFt: 0, diameterIn: 24 }, { fromButtFt: 40, diameterIn: 12 }], leaveOut: [{ fromFt: 14, toFt: 16 }] };
    const { logs, leftFt } = buck(stem, { lengthsFt: [8, 10, 12, 16], trimIn: 5, longestFt: 13 }, cubic);
    expect(logs.every((log) => log.lengthFt <= 12)).toBe(true);
    logs.forEach((log, index) => {
      const top = log.fromButtFt + log.lengthFt + 5 / 12;
      expect(top <= 14 + 1e-9 || log.fromButtFt >= 16 - 1e-9).toBe(true);
      expect(top).toBeLessThanOrEqual((logs[index + 1]?.fromButtFt ?? 40) + 1e-9);
    });
    expect(leftFt).toBeGreaterThanOrEqual(2);
  });

  it('gives nothing where nothing can be cut', () => {
    expect(buck({ measures: [{ fromButtFt: 0, diameterIn: 10 }, { fromButtFt: 6, diameterIn: 8 }] }, { lengthsFt: [8], trimIn: 4 }, cubic)).toEqual({ logs: [], value: 0, leftFt: 6 });
    expect(buck({ measures: [] }, { lengthsFt: [8], trimIn: 4 }, cubic).logs).toEqual([]);
  });
});
