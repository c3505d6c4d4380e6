import { expect, test } from 'vitest';
import { estimateLogs, type LogInput } from '~/domain/timber/estimate.ts';
import { speciesCodes } from '~/domain/timber/species.ts';
import { tallyBoards } from '~/domain/timber/tally.ts';
import { workingsOf } from '~/domain/timber/workings.ts';
import { estimateRequest } from '~/schemas/estimate.ts';
import { emptyDraft, readDraft } from '~/islands/estimator/draft.ts';

/** The best of several runs, ms: what the work costs when nothing else has the processor. */
function bestOf(runs: number, work: () => unknown): number {
  let best = Number.POSITIVE_INFINITY;
  for (let run = 0; run < runs; run += 1) {
    const started = performance.now();
    work();
    best = Math.min(best, performance.now() - started);
  }
  return best;
}

const logs: readonly LogInput[] = Array.from({ length: 1000 }, (_, index) => ({
  species: speciesCodes[index % speciesCodes.length] ?? 'white-oak',
  smallEndIn: 4 + (index % 56),
  lengthFt: 4 + (index % 37),
  defects: [{ kind: 'interiorRot', widthIn: 4, heightIn: 3, lengthFt: 4 }, { kind: 'sweep', departureIn: 3 }],
}));

test('1,000 logs with defects are checked and estimated in under 50 ms', () => {
  const ms = bestOf(10, () => estimateLogs(estimateRequest.parse({ logs })));
  console.info(`1,000 logs: ${ms.toFixed(1)} ms`);
  expect(ms).toBeLessThan(50);
});

test('2,000 rows are tallied in under 20 ms', () => {
  const pieces = Array.from({ length: 2000 }, (_, index) => ({ thicknessIn: 1 + (index % 4) / 4, widthIn: 4 + (index % 40) / 4, lengthFt: 6 + (index % 11), count: 1 + (index % 5) }));
  expect(bestOf(10, () => tallyBoards('hardwood', pieces))).toBeLessThan(20);
});

test('what is typed becomes figures with their workings in well under a frame', () => {
  const draft = { ...emptyDraft, species: 'white-oak', small: '18 3/8', length: '12 ft 6 in' };
  const ms = bestOf(20, () => {
    const { log } = readDraft(draft, 'us');
    return log && workingsOf(log);
  });
  expect(ms).toBeLessThan(8);
});
