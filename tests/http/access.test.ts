import { readdirSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import { beforeAll, describe, expect, inject, it } from 'vitest';
import { root } from '../../src/launch/setup.mjs';
import type { AccessWorld } from '../support/access-world.ts';
import type { Browser } from '../support/browser.ts';
import { routes, type Method } from './access-table.ts';

let world: AccessWorld;
let askers: readonly (keyof AccessWorld['browsers'])[];

beforeAll(async () => {
  Object.assign(process.env, inject('productEnvironment'));
  const made = await import('../support/access-world.ts');
  ({ askers } = made);
  world = await made.makeAccessWorld(inject('origin'));
}, 300_000);

const files = readdirSync(join(root, 'src/pages'), { recursive: true, encoding: 'utf8' }).filter((file) => /\.(astro|ts)$/.test(file)).sort();

describe('the table', () => {
  it('has every file of src/pages, and no other', () => {
    expect(Object.keys(routes).sort()).toEqual(files);
  });

  it.each(files)('%s: every method that it takes', (file) => {
    const source = readFileSync(join(root, 'src/pages', file), 'utf8');
    const taken = file.endsWith('.ts') ? [...source.matchAll(/^export const (GET|POST|PUT|PATCH|DELETE)\b/gm)].map(([, method]) => method ?? '') : ['GET', ...(/method\s*[!=]==?\s*'POST'/.test(source) ? ['POST'] : [])];
    const { path: _path, body: _body, ...methods } = routes[file] ?? { path: () => '' };
    expect(Object.keys(methods).sort()).toEqual([...new Set(taken)].sort());
  });
});

async function answerTo(browser: Browser, path: string, method: Method, body: Readonly<Record<string, string>>): Promise<string> {
  const answer = method === 'GET' ? await browser.get(path) : path.startsWith('/api/') ? await browser.send(method, path, body) : await browser.post(path, body);
  await answer.arrayBuffer();
  return answer.status === 303 && (answer.headers.get('location') ?? '').startsWith('/sign-in?next=') ? 'in' : String(answer.status);
}

/** What each asker is answered, in the order of the table. Deeds are tried one after the other. */
async function answers(path: string, method: Method, body: Readonly<Record<string, string>> = {}): Promise<string> {
  if (method === 'GET') return (await Promise.all(askers.map((asker) => answerTo(world.browsers[asker], path, method, body)))).join(' ');
  const said: string[] = [];
  for (const asker of askers) said.push(await answerTo(world.browsers[asker], path, method, body));
  return said.join(' ');
}

describe('who is answered what: visitor, other landowner, owner, other sawyer, chosen sawyer, moderator without and with second factor', () => {
  const rows = Object.entries(routes).flatMap(([file, { path, body, ...methods }]) => (Object.entries(methods) as [Method, string][]).map(([method, expected]) => ({ file, method, expected, path, body })));
  it.each(rows)('$method $file', async ({ method, expected, path, body }) => {
    expect(await answers(path(world), method, body?.(world))).toBe(expected);
  });
});
