import { request } from 'node:http';
import { gzipSync } from 'node:zlib';
import { expect, inject, test } from 'vitest';

const origin = inject('origin');
const text = async (path: string): Promise<string> => (await fetch(new URL(path, origin))).text();

/** The files an island's script needs, followed through its imports. */
async function scriptsOf(entry: string, seen = new Map<string, string>()): Promise<Map<string, string>> {
  if (seen.has(entry)) return seen;
  const source = await text(entry);
  seen.set(entry, source);
  for (const [, path = ''] of source.matchAll(/(?:from|import)\s*"(\.\/[^"]+\.js)"/g)) await scriptsOf(new URL(path, new URL(entry, origin)).pathname, seen);
  return seen;
}

test('the estimator is a shell for everybody, and its own script is within 60 kB beyond the framework', async () => {
  const page = await text('/estimator');
  expect(page).toContain('What is in these logs?');
  const island = /component-url="([^"]+)"/.exec(page)?.[1] ?? '';
  const framework = /renderer-url="([^"]+)"/.exec(page)?.[1] ?? '';
  expect(island).toMatch(/Estimator/);
  const [own, shared] = [await scriptsOf(island), await scriptsOf(framework)];
  const bytes = [...own].filter(([path]) => !shared.has(path)).reduce((sum, [, source]) => sum + gzipSync(source).length, 0);
  console.info(`estimator script beyond the framework: ${(bytes / 1000).toFixed(1)} kB gzip`);
  expect(bytes).toBeGreaterThan(5_000);
  expect(bytes).toBeLessThan(60_000);
});

const post = (fields: Record<string, string>): Promise<Response> => fetch(new URL('/estimator/logs.pdf', origin), { method: 'POST', body: new URLSearchParams(fields), headers: { origin } });

test('the list comes as a PDF', async () => {
  const answer = await post({ logs: 'white-oak_18_20.5_12.5_3!wedge-8-90~red-pine_14__34', half: 'down', longest: '16' });
  expect(answer.status).toBe(200);
  expect(answer.headers.get('content-type')).toBe('application/pdf');
  expect(Buffer.from(await answer.arrayBuffer()).subarray(0, 5).toString()).toBe('%PDF-');
});

test('as many lists as a person prints come from one address, and no more', async () => {
  const body = new URLSearchParams({ logs: 'white-oak_18__12' }).toString();
  const { hostname, port } = new URL(origin);
  // From another address of this machine, so that nobody else's tries are used up.
  const ask = (): Promise<number> =>
    new Promise((resolve, reject) => {
      const headers = { 'content-type': 'application/x-www-form-urlencoded', 'content-length': body.length, origin, host: `${hostname}:${port}`, 'x-forwarded-for': `192.0.2.${Math.floor(Math.random() * 250)}` };
      request({ host: '127.0.0.1', port, localAddress: '127.0.0.7', path: '/estimator/logs.pdf', method: 'POST', headers }, (answer) => resolve((answer.resume(), answer.statusCode ?? 0))).once('error', reject).end(body);
    });
  const answers: number[] = [];
  for (let turn = 0; turn < 31; turn += 1) answers.push(await ask());
  expect(new Set(answers.slice(0, 30))).toEqual(new Set([200]));
  expect(answers[30]).toBe(429);
});

test.each([
  [{ logs: '' }, 'logs'],
  [{ logs: 'oak_18__12' }, 'logs.0.species'],
  [{ logs: 'white-oak_18__12', longest: '17' }, 'longest'],
])('a list that cannot be read is refused with its field: %j', async (fields, path) => {
  const answer = await post(fields as unknown as Record<string, string>);
  expect(answer.status).toBe(422);
  const { errors } = (await answer.json()) as { errors: { path: string }[] };
  expect(errors.map((error) => error.path)).toContain(path);
});
