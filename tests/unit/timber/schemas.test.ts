import { describe, expect, test } from 'vitest';
import { estimateAnswer, estimateRequest } from '~/schemas/estimate.ts';
import { dryingAnswer, dryingRequest } from '~/schemas/drying.ts';
import { speciesAnswer } from '~/schemas/species.ts';
import { tallyAnswer, tallyRequest } from '~/schemas/tally.ts';
import { treeVolumeRequest } from '~/schemas/tree-volume.ts';
import { dryBoard } from '~/domain/timber/drying.ts';
import { estimateLogs } from '~/domain/timber/estimate.ts';
import { speciesList } from '~/domain/timber/species.ts';
import { tallyBoards } from '~/domain/timber/tally.ts';

const log = { species: 'white-oak', smallEndIn: 18, lengthFt: 12 };

describe('refused, with the path to the field', () => {
  test.each<[string, unknown, string]>([
    ['no logs', { logs: [] }, 'logs'],
    ['too many logs', { logs: Array.from({ length: 1001 }, () => log) }, 'logs'],
    ['an unknown field', { logs: [{ ...log, colour: 'red' }] }, 'logs.0'],
    ['an unknown field at the top', { logs: [log], rule: 'doyle' }, ''],
    ['an unknown species', { logs: [{ ...log, species: 'oak' }] }, 'logs.0.species'],
    ['a text for a number', { logs: [{ ...log, smallEndIn: '18' }] }, 'logs.0.smallEndIn'],
    ['a small end out of the tables', { logs: [log, { ...log, smallEndIn: 3.9 }] }, 'logs.1.smallEndIn'],
    ['a length out of the tables', { logs: [{ ...log, lengthFt: 40.1 }] }, 'logs.0.lengthFt'],
    ['a large end below the small end', { logs: [{ ...log, largeEndIn: 17 }] }, 'logs.0.largeEndIn'],
    ['a number beyond numbers', { logs: [{ ...log, lengthFt: Number.POSITIVE_INFINITY }] }, 'logs.0.lengthFt'],
    ['an unknown defect', { logs: [{ ...log, defects: [{ kind: 'knot' }] }] }, 'logs.0.defects.0.kind'],
    ['a defect without its length', { logs: [{ ...log, defects: [{ kind: 'section' }] }] }, 'logs.0.defects.0.lengthFt'],
    ['a wrong setting', { logs: [log], longestScalingLengthFt: 18 }, 'longestScalingLengthFt'],
    ['nothing', null, ''],
  ])('%s', (_, body, path) => {
    const result = estimateRequest.safeParse(body);
    expect(result.success).toBe(false);
    expect(result.error?.issues.map((issue) => issue.path.join('.'))).toContain(path);
    expect(result.error?.issues.every((issue) => issue.message !== '')).toBe(true);
  });

  test.each<[string, { safeParse: (body: unknown) => { success: boolean } }, unknown]>([
    ['a count of nothing', tallyRequest, { rule: 'hardwood', pieces: [{ thicknessIn: 1, widthIn: 6, lengthFt: 8, count: 0 }] }],
    ['half a board', tallyRequest, { rule: 'hardwood', pieces: [{ thicknessIn: 1, widthIn: 6, lengthFt: 8, count: 1.5 }] }],
    ['an unknown rule', tallyRequest, { rule: 'plywood', pieces: [{ thicknessIn: 1, widthIn: 6, lengthFt: 8, count: 1 }] }],
    ['a third rule for trees', treeVolumeRequest, { rule: 'scribnerDecimalC', dbhIn: 20, logs16ft: 2 }],
    ['air wetter than wet', dryingRequest, { species: 'white-oak', temperatureF: 70, relativeHumidityPct: 101, thicknessIn: 1, widthIn: 8, grain: 'flat' }],
  ])('%s', (_, schema, body) => {
    expect(schema.safeParse(body).success).toBe(false);
  });
});

test('answers are what the schemas say', () => {
  estimateAnswer.parse(estimateLogs(estimateRequest.parse({ logs: [log] })));
  speciesAnswer.parse(speciesList);
  tallyAnswer.parse(tallyBoards('hardwood', tallyRequest.parse({ rule: 'hardwood', pieces: [{ thicknessIn: 1, widthIn: 6, lengthFt: 8, count: 3 }] }).pieces));
  const dried = dryBoard(dryingRequest.parse({ species: 'white-oak', temperatureF: 70, relativeHumidityPct: 45, thicknessIn: 1, widthIn: 8, grain: 'quarter' }));
  expect(dried.ok).toBe(true);
  if (dried.ok) dryingAnswer.parse(dried.value);
});
