import { describe, expect, it } from 'vitest';
import { sawPlan } from '~/domain/sawing/saw-plan.ts';
import { scaleLog } from '~/domain/timber/log-scale.ts';

/**
 * The International rule is built on boards of 1 in with 1/16 in for shrinkage and 1/4 in of kerf, and ½ in of taper in 4 ft
 * (US Forest Service, National Volume Estimator Library; its tables are `reference/international_quarter.csv`). A plan of the same
 * boards has to come near it. The Doyle rule takes 4 in off every diameter, so mills over-run it, most on small logs
 * (`reference/doyle.csv`).
 */
const yieldOf = (smallEndIn: number, kerfIn = 1 / 4): number =>
  sawPlan({ log: { smallEndIn, lengthFt: 16 }, mill: { kerfIn }, pattern: 'live', pieces: [{ thicknessIn: 1 + 1 / 16, value: 1 / (1 + 1 / 16), lengthsFt: [16, 14, 12, 10, 8, 6, 4] }] }).value;
const scaleOf = (smallEndIn: number) => scaleLog({ smallEndIn, lengthFt: 16 }).boardFeet;

describe('plans of one-inch boards and the published rules', () => {
  it('comes near the International rule at its own kerf', () => {
    for (const inches of [8, 10, 12, 14, 16, 20, 24, 28]) {
      const ratio = yieldOf(inches) / scaleOf(inches).internationalQuarter;
      expect(ratio, `${inches} in`).toBeGreaterThan(0.88);
      expect(ratio, `${inches} in`).toBeLessThan(1.15);
    }
  });

  it('over-runs Doyle twice over at 8 in, by less and less as logs grow', () => {
    const overrun = [8, 12, 16, 20, 28].map((inches) => yieldOf(inches) / scaleOf(inches).doyle);
    expect(overrun[0]).toBeGreaterThan(2);
    overrun.slice(1).forEach((each, index) => expect(each).toBeLessThan(overrun[index] ?? 0));
    expect(overrun.at(-1)).toBeGreaterThan(0.95);
    expect(overrun.at(-1)).toBeLessThan(1.25);
  });

  it('gains from a thinner kerf about what the wood saved is: an eighth in an inch and a quarter, less what does not make a board', () => {
    const gains = [12, 16, 20, 24].map((inches) => yieldOf(inches, 1 / 8) / yieldOf(inches, 1 / 4) - 1);
    const mean = gains.reduce((sum, gain) => sum + gain, 0) / gains.length;
    expect(mean).toBeGreaterThan(0.04);
    expect(mean).toBeLessThan(0.14);
  });
});
