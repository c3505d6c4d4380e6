import { readdirSync, readFileSync } from 'node:fs';
import { dirname, join, relative, resolve } from 'node:path';
import { fileURLToPath } from 'node:url';
import { describe, expect, it } from 'vitest';
import { operations } from '~/schemas/operations.ts';

const root = fileURLToPath(new URL('../..', import.meta.url));

/** Each room and the rooms it may import at run time (the table of DEVELOPERS.md). A longer path is the more particular room. */
const rooms: Readonly<Record<string, readonly string[]>> = {
  'src/domain': ['src/domain'],
  'src/schemas': ['src/schemas', 'src/domain'],
  'src/server/models': ['src/server/models', 'src/server/db.ts', 'src/domain'],
  'src/server/services': ['src/server/services', 'src/server/env.ts', 'src/server/errors.ts', 'src/server/log.ts', 'src/domain'],
  'src/server/queries': ['src/server', 'src/domain', 'src/schemas'],
  'src/server/commands': ['src/server', 'src/domain', 'src/schemas', 'src/emails'],
  'src/server': ['src/server', 'src/domain', 'src/schemas', 'src/emails'],
  'src/emails': ['src/emails', 'src/domain'],
  'src/components': ['src/components', 'src/domain', 'src/schemas', 'src/islands', 'src/styles', 'src/layouts'],
  'src/layouts': ['src/layouts', 'src/components', 'src/islands/day/register.ts', 'src/domain', 'src/styles', 'fonts'],
  'src/islands': ['src/islands', 'src/domain', 'src/schemas', 'src/components'],
  'src/pages': ['src/pages', 'src/layouts', 'src/components', 'src/islands', 'src/domain', 'src/schemas', 'src/styles', 'src/server'],
  'src/middleware.ts': ['src/server', 'src/domain'],
  'src/launch': ['src/launch', 'db/postgres.mjs'],
  'src/styles': ['src/styles', 'fonts'],
  db: ['db', 'src/server', 'src/domain', 'src/schemas', 'src/emails', 'src/launch'],
  'fakes/stripe': ['fakes/stripe'],
  'fakes/s3': ['fakes/s3'],
  'fakes/mail': ['fakes/mail'],
};

/** Particular refusals inside what a room may otherwise use. */
const refusals: readonly { readonly from: RegExp; readonly to: RegExp; readonly why: string }[] = [
  { from: /^src\/server\/queries\/(?!health\.ts)/, to: /^src\/server\/(commands|services)\/(?!mail\.ts|places)/, why: 'queries only read' },
  { from: /^src\/pages\//, to: /^src\/server\/models\//, why: 'pages read through queries' },
  { from: /^src\/pages\/(?!api\/)/, to: /^src\/server\/services\//, why: 'pages do not call services' },
  { from: /^src\/islands\//, to: /\.astro$/, why: 'islands are React' },
  { from: /^src\/(?!server\/|pages\/|middleware|emails\/)/, to: /^src\/server\//, why: 'only the server, pages and middleware reach the server' },
  { from: /^src\/server\/jobs\/|^src\/server\/commands\//, to: /^src\/pages\//, why: 'nothing below imports pages' },
];

function* filesIn(folder: string): Generator<string> {
  for (const entry of readdirSync(join(root, folder), { withFileTypes: true })) {
    const path = `${folder}/${entry.name}`;
    if (entry.isDirectory()) yield* filesIn(path);
    else if (/\.(ts|tsx|mjs|astro)$/.test(entry.name)) yield path;
  }
}

/** What a file imports at run time from this repository, as paths from its root. Types alone bind nothing. */
function importsOf(file: string): string[] {
  const text = readFileSync(join(root, file), 'utf8');
  const found = [...text.matchAll(/^(?:import|export)\s+(?!type\b)(?:([^'";]*?)\s+from\s+)?['"]([^'"]+)['"]/gm), ...text.matchAll(/()\bimport\(\s*['"]([^'"]+)['"]/g)];
  return found
    .filter(([, names]) => !names || !/^\{[^}]*\}$/.test(names.trim()) || names.replace(/[{}]/g, '').split(',').some((name) => name.trim() !== '' && !name.trim().startsWith('type ')))
    .map(([, , target]) => (target ?? '').replace(/\?.*$/, ''))
    .filter((target) => target.startsWith('.') || target.startsWith('~/'))
    .map((target) => (target.startsWith('~/') ? `src/${target.slice(2)}` : relative(root, resolve(root, dirname(file), target))));
}

const roomOf = (file: string): string | undefined => Object.keys(rooms).filter((room) => file === room || file.startsWith(`${room}/`)).sort((a, b) => b.length - a.length)[0];
const files = ['src', 'db', 'fakes'].flatMap((folder) => [...filesIn(folder)]);

describe('the import table', () => {
  it('covers every file', () => {
    expect(files.filter((file) => roomOf(file) === undefined && file !== 'src/env.d.ts')).toEqual([]);
  });

  it('is kept', () => {
    const broken = files.flatMap((file) => {
      const room = roomOf(file);
      if (!room) return [];
      return importsOf(file)
        .filter((target) => !(rooms[room] ?? []).some((allowed) => target === allowed || target.startsWith(`${allowed}/`)) || refusals.some(({ from, to }) => from.test(file) && to.test(target)))
        .map((target) => `${file} imports ${target}`);
    });
    expect(broken).toEqual([]);
  });
});

describe('pure rooms', () => {
  it('ask no clock, no network and no process', () => {
    const impure = [...filesIn('src/domain')].filter((file) => {
      const code = readFileSync(join(root, file), 'utf8').replace(/\/\*[\s\S]*?\*\/|\/\/.*$/gm, '');
      return /new Date\(\)|Date\.now\(|\bfetch\(|\bprocess\.|Math\.random\(|from 'node:/.test(code);
    });
    expect(impure).toEqual([]);
  });
});

describe('the list of endpoints', () => {
  it('has every file of pages/api, and nothing else', () => {
    const routes = [...filesIn('src/pages/api')].flatMap((file) => {
      const path = file.replace(/^src\/pages/, '').replace(/\.ts$/, '').replace(/\/index$/, '').replace(/\[(\w+)\]/g, '{$1}');
      return [...readFileSync(join(root, file), 'utf8').matchAll(/^export const (GET|POST|PUT|PATCH|DELETE)\b/gm)].map(([, method]) => `${(method ?? '').toLowerCase()} ${path}`);
    });
    expect(operations.map(({ method, path }) => `${method} ${path}`).sort()).toEqual(routes.sort());
  });
});
