import { beforeAll, describe, expect, it } from 'vitest';
import { sawPlan } from '~/domain/sawing/saw-plan.ts';
import type { Solver } from '~/domain/sawing/solver.ts';
import { highsSolver } from '~/server/services/solver.ts';
import { cantByTrying, type GridLog, liveBySolver, quartersByTrying } from './grid.ts';

let solve: Solver;
beforeAll(async () => {
  solve = await highsSolver();
});

/** Straight logs, so that the grid's boards all run the whole length. */
const planOf = (log: GridLog, pattern: 'live' | 'cant' | 'quartersawn') =>
  sawPlan({ log: { smallEndIn: 2 * log.radiusIn, largeEndIn: 2 * log.radiusIn, lengthFt: log.lengthFt }, mill: { kerfIn: log.kerfIn }, pattern, pieces: log.pieces.map((piece) => ({ ...piece, lengthFt: log.lengthFt })) });

const small: readonly GridLog[] = [
  { radiusIn: 3, kerfIn: 0.125, lengthFt: 8, pieces: [{ thicknessIn: 1, widthIn: 3 }, { thicknessIn: 1, widthIn: 4 }, { thicknessIn: 2, widthIn: 4, value: 1.2 }] },
  { radiusIn: 3.5, kerfIn: 0.25, lengthFt: 8, pieces: [{ thicknessIn: 1, widthIn: 2 }, { thicknessIn: 1, widthIn: 5, value: 1.3 }] },
  { radiusIn: 4, kerfIn: 0.25, lengthFt: 10, pieces: [{ thicknessIn: 1, widthIn: 3 }, { thicknessIn: 1.5, widthIn: 4, value: 0.9 }, { thicknessIn: 4, widthIn: 4, value: 1.4 }] },
  { radiusIn: 4.25, kerfIn: 0.125, lengthFt: 8, pieces: [{ thicknessIn: 2, widthIn: 4 }, { thicknessIn: 1, widthIn: 4, value: 1.05 }] },
];
const large: readonly GridLog[] = [8, 15].map((radiusIn): GridLog => ({ radiusIn, kerfIn: 0.125, lengthFt: 12, pieces: [{ thicknessIn: 1, widthIn: 4 }, { thicknessIn: 1, widthIn: 6, value: 1.1 }, { thicknessIn: 2, widthIn: 6, value: 1.2 }, { thicknessIn: 4, widthIn: 4, value: 0.9 }] }));

describe('a plan against others made without it', () => {
  it.each([...small, ...large])('through and through is no worse than an independent solver on a grid: radius $radiusIn in', (log) => {
    const other = liveBySolver(log, log.radiusIn > 6 ? 1 / 8 : 1 / 16, solve);
    const { value, upperBoundValue } = planOf(log, 'live');
    console.info(`live, ${2 * log.radiusIn} in: ${value.toFixed(2)} against ${other.toFixed(2)} on the grid, ratio ${(value / other).toFixed(4)}`);
    expect(value).toBeGreaterThanOrEqual(other - 1e-6);
    expect(value).toBeCloseTo(upperBoundValue, 6);
  }, 60_000);

  it.each([...small, ...large])('quartersawn is no worse than every stack of a quarter on a grid: radius $radiusIn in', (log) => {
    const other = quartersByTrying(log, 1 / 16);
    const { value, upperBoundValue } = planOf(log, 'quartersawn');
    console.info(`quartersawn, ${2 * log.radiusIn} in: ${value.toFixed(2)} against ${other.toFixed(2)} on the grid, bound ${upperBoundValue.toFixed(2)}`);
    expect(value).toBeGreaterThanOrEqual(other - 1e-6);
    expect(upperBoundValue).toBeGreaterThanOrEqual(value - 1e-9);
  });

  it.each(small)('round a cant is no worse than every way on a grid: radius $radiusIn in', (log) => {
    const other = cantByTrying(log, 1 / 2);
    const { value, upperBoundValue } = planOf(log, 'cant');
    console.info(`cant, ${2 * log.radiusIn} in: ${value.toFixed(2)} against ${other.toFixed(2)} on the grid, bound ${upperBoundValue.toFixed(2)}`);
    expect(value).toBeGreaterThanOrEqual(other - 1e-6);
    expect(upperBoundValue).toBeGreaterThanOrEqual(value - 1e-9);
  });
});
