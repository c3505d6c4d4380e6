import { bench, describe } from 'vitest';
import { estimateLogs, type LogInput } from '~/domain/timber/estimate.ts';
import { speciesCodes } from '~/domain/timber/species.ts';
import { tallyBoards } from '~/domain/timber/tally.ts';
import { workingsOf } from '~/domain/timber/workings.ts';
import { estimateRequest } from '~/schemas/estimate.ts';
import { emptyDraft, readDraft } from '~/islands/estimator/draft.ts';

const logs: readonly LogInput[] = Array.from({ length: 1000 }, (_, index) => ({
  species: speciesCodes[index % speciesCodes.length] ?? 'white-oak',
  smallEndIn: 4 + (index % 56),
  lengthFt: 4 + (index % 37),
  defects: [{ kind: 'interiorRot', widthIn: 4, heightIn: 3, lengthFt: 4 }, { kind: 'sweep', departureIn: 3 }],
}));

/** The baseline of each group is what the same data costs to carry: written as JSON and read back. */
const carried = (data: unknown) => () => void JSON.parse(JSON.stringify(data));

describe('1,000 logs with two defects each (aim: within 50 ms)', () => {
  bench('carried as JSON', carried(logs));
  bench('checked and estimated', () => void estimateLogs(estimateRequest.parse({ logs })));
});

describe('2,000 rows of boards', () => {
  const pieces = Array.from({ length: 2000 }, (_, index) => ({ thicknessIn: 1 + (index % 4) / 4, widthIn: 4 + (index % 40) / 4, lengthFt: 6 + (index % 11), count: 1 + (index % 5) }));
  bench('carried as JSON', carried(pieces));
  bench('tallied by the hardwood rule', () => void tallyBoards('hardwood', pieces));
});

describe('one log as it is typed (aim: within a frame, 16 ms)', () => {
  const draft = { ...emptyDraft, species: 'white-oak', small: '18 3/8', length: '12 ft 6 in' };
  bench('carried as JSON', carried(draft));
  bench('read and worked out with its workings', () => {
    const { log } = readDraft(draft, 'us');
    if (log) workingsOf(log);
  });
});
