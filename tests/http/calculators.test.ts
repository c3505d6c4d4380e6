import { describe, expect, inject, test } from 'vitest';

const origin = inject('origin');

const post = (path: string, body: unknown, headers: Record<string, string> = {}): Promise<Response> =>
  fetch(new URL(path, origin), { method: 'POST', headers: { 'content-type': 'application/json', ...headers }, body: typeof body === 'string' ? body : JSON.stringify(body) });

const answer = async (path: string, body: unknown): Promise<unknown> => {
  const response = await post(path, body);
  expect(response.status).toBe(200);
  return response.json();
};

const oak = { species: 'white-oak', smallEndIn: 18, lengthFt: 12 };

describe('figures, without Origin or session', () => {
  test('76 species with exactly the promised fields', async () => {
    const species = (await (await fetch(new URL('/api/species', origin))).json()) as Record<string, unknown>[];
    expect(species).toHaveLength(76);
    expect(species.find(({ code }) => code === 'redwood')).toMatchObject({ name: 'Redwood (old growth)', group: 'softwood' });
    expect(Object.keys(species[0] ?? {}).sort()).toEqual(
      ['aliases', 'barkPct', 'code', 'greenDensityLbPerFt3', 'greenMoisturePct', 'group', 'name', 'scientificName', 'shrinkagePct', 'specificGravityGreen'],
    );
  });

  test('an estimate', async () => {
    const estimate = await answer('/api/estimate', { logs: [oak, { ...oak, smallEndIn: 16 }, { ...oak, smallEndIn: 14 }] });
    expect(estimate).toMatchObject({ totals: { boardFeet: { doyle: 330, scribnerDecimalC: 370, internationalQuarter: 400 } } });
  });

  test('a tally', async () => {
    expect(await answer('/api/tally', { rule: 'hardwood', pieces: [{ thicknessIn: 1.25, widthIn: 6.5, lengthFt: 12, count: 8 }] })).toEqual({
      pieces: [{ surfaceMeasureSqFt: 52, boardFeet: 65 }],
      totalBoardFeet: 65,
    });
  });

  test('a standing tree, Mesavage and Girard', async () => {
    expect(await answer('/api/tree-volume', { rule: 'doyle', dbhIn: 14, logs16ft: 2.5 })).toEqual({ boardFeet: 84 });
  });

  test('drying', async () => {
    const dried = await answer('/api/drying', { species: 'white-oak', temperatureF: 70, relativeHumidityPct: 65, thicknessIn: 1, widthIn: 8, grain: 'flat' });
    expect(dried).toMatchObject({ airDryingDays: { from: 80, to: 250 } });
    expect((dried as { equilibriumMoisturePct: number }).equilibriumMoisturePct).toBeCloseTo(12, 1);
  });

  test('the description of the endpoints knows them', async () => {
    const { paths } = (await (await fetch(new URL('/api/openapi.json', origin))).json()) as { paths: Record<string, unknown> };
    for (const path of ['/api/species', '/api/estimate', '/api/tally', '/api/tree-volume', '/api/drying']) expect(paths).toHaveProperty([path]);
  });
});

describe('bad input is answered beside its field', () => {
  test.each<[string, unknown, number, string]>([
    ['/api/estimate', { logs: [{ ...oak, species: 'oak' }] }, 422, 'logs.0.species'],
    ['/api/estimate', { logs: [oak], colour: 1 }, 422, 'colour'],
    ['/api/estimate', { logs: [{ ...oak, largeEndIn: 12 }] }, 422, 'logs.0.largeEndIn'],
    ['/api/estimate', { logs: [{ ...oak, smallEndIn: 1e999 }] }, 422, 'logs.0.smallEndIn'],
    ['/api/estimate', '{', 400, ''],
    ['/api/estimate', 'null', 422, ''],
    ['/api/tally', { rule: 'hardwood', pieces: [{ thicknessIn: 1, widthIn: -1, lengthFt: 8, count: 1 }] }, 422, 'pieces.0.widthIn'],
    ['/api/tree-volume', { rule: 'doyle', dbhIn: 14.5, logs16ft: 2 }, 422, 'dbhIn'],
    ['/api/tree-volume', { rule: 'doyle', dbhIn: 14, logs16ft: 2.25 }, 422, 'logs16ft'],
    ['/api/drying', { species: 'white-spruce', temperatureF: 70, relativeHumidityPct: 65, thicknessIn: 1, widthIn: 8, grain: 'flat' }, 422, 'species'],
  ])('%s %j', async (path, body, status, field) => {
    const response = await post(path, body);
    expect(response.status).toBe(status);
    expect(response.headers.get('content-type')).toContain('application/problem+json');
    const { errors } = (await response.json()) as { errors: { path: string; message: string }[] };
    expect(errors.map((error) => error.path)).toContain(field);
    expect(errors.every(({ message }) => message !== '')).toBe(true);
  });

  test('a foreign page may not ask', async () => {
    expect((await post('/api/estimate', { logs: [oak] }, { origin: 'https://elsewhere.example' })).status).toBe(403);
  });
});
