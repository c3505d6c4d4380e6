import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { sawPlan, type SawPlanRequest } from '~/domain/sawing/saw-plan.ts';
import { faults } from './check-plan.ts';

const opt = <T>(arbitrary: fc.Arbitrary<T>): fc.Arbitrary<T | undefined> => fc.option(arbitrary, { nil: undefined });
const thousandths = (low: number, high: number): fc.Arbitrary<number> => fc.integer({ min: Math.round(low * 1000), max: Math.round(high * 1000) }).map((n) => n / 1000);

const request = fc
  .record({
    smallEndIn: thousandths(4, 16),
    taperIn: opt(thousandths(0, 6)),
    lengthFt: fc.integer({ min: 8, max: 40 }).map((n) => n / 2),
    heartDefectIn: opt(thousandths(0.5, 5)),
    kerfIn: fc.oneof(fc.constantFrom(0.09375, 0.125, 0.25), thousandths(0.05, 0.4)),
    widestCutIn: opt(thousandths(8, 24)),
    widestBoardIn: opt(thousandths(4, 20)),
    waneAllowanceIn: opt(thousandths(0, 1)),
    pattern: fc.constantFrom('live', 'cant', 'quartersawn', 'best'),
    pieces: fc.array(
      fc.record({
        thicknessIn: fc.oneof(fc.constantFrom(1, 1.125, 1.25, 2, 4), thousandths(0.5, 6)),
        widthIn: opt(fc.oneof(fc.constantFrom(4, 6, 8), thousandths(1, 12))),
        lengthFt: opt(fc.integer({ min: 4, max: 16 })),
        value: opt(thousandths(0.2, 3)),
        count: opt(fc.integer({ min: 0, max: 6 })),
      }),
      { minLength: 1, maxLength: 3 },
    ),
  })
  .map(({ smallEndIn, taperIn, lengthFt, heartDefectIn, kerfIn, widestCutIn, widestBoardIn, waneAllowanceIn, pattern, pieces }): SawPlanRequest => ({
    log: { smallEndIn, largeEndIn: taperIn === undefined ? undefined : smallEndIn + taperIn, lengthFt, heartDefectIn },
    mill: { kerfIn, widestCutIn, widestBoardIn },
    pattern: pattern as SawPlanRequest['pattern'],
    pieces,
    waneAllowanceIn,
    effort: 12,
  }));

describe('a saw plan', () => {
  it('keeps every board in the wood, a kerf apart, of an asked size, within its counts and under its bound', () => {
    fc.assert(fc.property(request, (asked) => { expect(faults(asked, sawPlan(asked))).toEqual([]); }), { numRuns: Number(process.env.SAW_RUNS ?? 250) });
  }, 300_000);
});
