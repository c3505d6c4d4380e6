import { bench, describe } from 'vitest';
import { cutList } from '~/domain/sawing/cut-list.ts';
import { sawPlan } from '~/domain/sawing/saw-plan.ts';
import { highsSolver } from '~/server/services/solver.ts';

const sizes = [[1, 4], [1, 6], [1, 8], [2, 4], [2, 6], [4, 4]].map(([thicknessIn = 1, widthIn = 4]) => ({ thicknessIn, widthIn, lengthFt: 12 }));
const log = { smallEndIn: 30, lengthFt: 12 };
const mill = { kerfIn: 1 / 8 };

/** The yardstick is plain arithmetic of about 10 ms on a free core, so that a busy machine slows both. */
const yardstick = (): void => {
  let sum = 0;
  for (let turn = 1; turn < 4_000_000; turn++) sum += Math.sqrt(turn) / (1 + (turn % 7));
  if (!Number.isFinite(sum)) throw new Error('the yardstick broke');
};

describe('a 30-inch log with six sizes (aim: within 50 ms)', () => {
  bench('yardstick', yardstick);
  for (const pattern of ['live', 'cant', 'quartersawn', 'best'] as const) bench(pattern, () => void sawPlan({ log, mill, pattern, pieces: sizes }));
});

const solve = await highsSolver();
describe('40 logs and 12 sizes (aim: within 2 s)', () => {
  const logs = Array.from({ length: 40 }, (_, index) => ({ id: String(index), smallEndIn: 10 + ((index * 7) % 11), lengthFt: [8, 10, 12][index % 3] ?? 8 }));
  const pieces = [8, 10].flatMap((lengthFt) => sizes.map((size, index) => ({ ...size, lengthFt, id: `${lengthFt} ${index}`, count: 20 + index })));
  bench('yardstick', yardstick);
  bench('cut list', () => {
    const begun = process.cpuUsage();
    cutList({ logs, mill, pieces }, solve, { toPlan: () => process.cpuUsage(begun).user < 900_000, solverSeconds: 0.4 });
  }, { iterations: 3 });
});
