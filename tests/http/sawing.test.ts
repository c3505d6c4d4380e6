import { describe, expect, inject, test } from 'vitest';
import { sawPlanRequest } from '~/schemas/saw-plan.ts';
import type { CutListAnswer } from '~/domain/sawing/cut-list.ts';
import type { SawPlan } from '~/domain/sawing/saw-plan.ts';

const origin = inject('origin');
const post = (path: string, body: unknown): Promise<Response> =>
  fetch(new URL(path, origin), { method: 'POST', headers: { 'content-type': 'application/json' }, body: JSON.stringify(body) });

const log = { smallEndIn: 16, lengthFt: 12 };
const asked = { log, mill: { kerfIn: 0.125 }, pattern: 'best', pieces: [{ thicknessIn: 1, widthIn: 6, lengthFt: 12 }] };

describe('a saw plan over HTTP, without Origin or session', () => {
  test('boards, value, bound and cuts', async () => {
    expect(sawPlanRequest.safeParse(asked).success).toBe(true);
    const response = await post('/api/saw-plan', asked);
    expect(response.status).toBe(200);
    const plan = (await response.json()) as SawPlan;
    expect(plan.boards.length).toBeGreaterThan(10);
    expect(plan.boardFeet).toBeCloseTo(plan.boards.length * 6, 9);
    expect(plan.value).toBeLessThanOrEqual(plan.upperBoundValue);
    expect(plan.cuts[0]).toMatchObject({ order: 1, turnDeg: 0, kind: 'slab' });
    expect(Object.keys(plan).sort()).toEqual(['boardFeet', 'boards', 'cuts', 'pattern', 'upperBoundValue', 'value']);
  });

  test('a log longer than the mill takes has no boards, and says why', async () => {
    const plan = (await (await post('/api/saw-plan', { ...asked, mill: { kerfIn: 0.125, longestFt: 10 } })).json()) as SawPlan;
    expect(plan).toMatchObject({ boards: [], boardFeet: 0, value: 0 });
    expect(plan.reason).toContain('10 ft');
  });

  test.each([
    [{ ...asked, pieces: [] }, 'pieces'],
    [{ ...asked, pieces: Array.from({ length: 21 }, () => ({ thicknessIn: 1 })) }, 'pieces'],
    [{ ...asked, pieces: [{ thicknessIn: 1, count: 0 }] }, 'pieces.0.count'],
    [{ ...asked, mill: { kerfIn: 0 } }, 'mill.kerfIn'],
    [{ ...asked, log: { ...log, largeEndIn: 12 } }, 'log.largeEndIn'],
    [{ ...asked, colour: 'red' }, 'colour'],
  ])('bad input is refused beside its field', async (body, path) => {
    const response = await post('/api/saw-plan', body);
    expect(response.status).toBe(422);
    expect(((await response.json()) as { errors: { path: string }[] }).errors.map((error) => error.path)).toContain(path);
  });
});

describe('a cut list over HTTP', () => {
  const list = { logs: [{ id: 'butt', smallEndIn: 16, lengthFt: 12 }, { id: 'top', smallEndIn: 10, lengthFt: 8 }], mill: { kerfIn: 0.125 }, pieces: [{ id: 'bench', thicknessIn: 2, widthIn: 6, lengthFt: 8, count: 4 }] };

  test('plans, what is covered, bound and gap', async () => {
    const response = await post('/api/cut-list', list);
    expect(response.status).toBe(200);
    const answer = (await response.json()) as CutListAnswer;
    expect(Object.keys(answer).sort()).toEqual(['boardFeetShort', 'boundBoardFeetShort', 'covered', 'gapBoardFeet', 'plans', 'provenBest', 'surplusBoardFeet']);
    expect(answer.covered).toEqual([{ id: 'bench', made: 4, short: 0 }]);
    expect(answer.plans.map((plan) => plan.logId)).toEqual(['butt', 'top']);
    expect(answer.plans.flatMap((plan) => plan.boards)).toHaveLength(4);
  });

  test.each([
    [{ ...list, pieces: [{ ...list.pieces[0], count: 0 }] }, 'pieces.0.count'],
    [{ ...list, pieces: [list.pieces[0], list.pieces[0]] }, 'pieces.1.id'],
    [{ ...list, logs: [] }, 'logs'],
    [{ ...list, pieces: [{ id: 'x', thicknessIn: 1, widthIn: 6, count: 1 }] }, 'pieces.0.lengthFt'],
  ])('bad input is refused beside its field', async (body, path) => {
    const response = await post('/api/cut-list', body);
    expect(response.status).toBe(422);
    expect(((await response.json()) as { errors: { path: string }[] }).errors.map((error) => error.path)).toContain(path);
  });
});

describe('a stem cut for a list, as a page', () => {
  const address = (fields: Readonly<Record<string, string>>): URL => {
    const url = new URL('/estimator/stem', origin);
    for (const [name, value] of Object.entries({ species: 'white-oak', bark: 'inside', at0: '0', across0: '20', at1: '30', across1: '12', trim: '5', smallest: '8', by: 'list', lengths: '8', ...fields })) url.searchParams.append(name, value);
    return url;
  };

  test('shows each piece made or short, with what would mend it, without a script', async () => {
    const response = await fetch(address({ 'p0-label': 'Shelves', 'p0-thickness': '1', 'p0-width': '6', 'p0-length': '8', 'p0-count': '4', 'p1-label': 'Joists', 'p1-thickness': '2', 'p1-width': '6', 'p1-length': '12', 'p1-count': '2' }));
    expect(response.status).toBe(200);
    const page = await response.text();
    expect(page).toContain('24 bf of your list short');
    expect(page).toContain('4 of 4 made');
    expect(page).toMatch(/One more log, at least \d+ in at the small end and 12 ft long/);
    expect(page).toContain('The longest log here is 8 ft');
  });

  test('is refused beside the field that is wrong, with all that was typed', async () => {
    const response = await fetch(address({ 'p0-label': 'Shelves', 'p0-thickness': 'thick', 'p0-width': '6', 'p0-length': '8' }));
    expect(response.status).toBe(422);
    const page = await response.text();
    expect(page).toMatch(/id="p0-thickness-error"|p0-thickness/);
    expect(page).toContain('value="thick"');
  });
});
