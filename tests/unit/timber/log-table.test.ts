import { readFileSync } from 'node:fs';
import { fileURLToPath } from 'node:url';
import Papa from 'papaparse';
import { expect, test } from 'vitest';
import fc from 'fast-check';
import { readLogTable, writeLogTable } from '~/domain/timber/log-table.ts';
import type { LogGroup } from '~/domain/timber/logs-in-url.ts';
import { workingsOf } from '~/domain/timber/workings.ts';
import { logs } from './arbitraries.ts';

const golden = (name: string): string => fileURLToPath(new URL(`./golden/${name}`, import.meta.url));
const rowsOf = (text: string): string[][] => Papa.parse<string[]>(text).data;

test('a landowner’s table, read and written again, is the golden file', () => {
  const table = readLogTable(rowsOf(readFileSync(golden('landowner.csv'), 'utf8')));
  expect(table.problems).toEqual([]);
  expect(table.unused).toEqual(['Colour']);
  const written = Papa.unparse(writeLogTable(table.logs).map((row) => [...row]), { newline: '\n' });
  expect(`${written}\n`).toBe(readFileSync(golden('estimated.csv'), 'utf8'));
  expect(readLogTable(rowsOf(written)).logs).toEqual(readLogTable(rowsOf(readFileSync(golden('estimated.csv'), 'utf8'))).logs);
});

test('what is written is read back, defects and all', () => {
  const near = (value: unknown): unknown =>
    JSON.parse(JSON.stringify(value, (_, part: unknown) => (typeof part === 'number' ? Number(part.toFixed(3)) : part)));
  fc.assert(
    fc.property(fc.array(fc.tuple(logs, fc.integer({ min: 1, max: 9 })), { minLength: 1, maxLength: 8 }), (some) => {
      const groups = some.map(([{ defects = [], ...log }, count]): LogGroup => ({ ...log, ...(defects.length === 0 ? {} : { defects }), count }));
      const table = readLogTable(rowsOf(Papa.unparse(writeLogTable(groups).map((row) => [...row]))));
      expect(table.problems).toEqual([]);
      expect(near(table.logs)).toEqual(near(groups));
    }),
  );
});

test('errors name the line and the column, and what can be read is kept', () => {
  const table = readLogTable(rowsOf('species,small end,length\nred oak,14,12\nwhite oak,eighteen,12\n\nwhite oak,18,120\nwhite oak,18,12'));
  expect(table.logs).toHaveLength(1);
  expect(table.problems.map(({ line, column }) => [line, column])).toEqual([
    [2, 'species'],
    [3, 'small end'],
    [5, 'length'],
  ]);
  expect(table.problems[0]?.message).toContain('Northern red oak');
});

test('without headings three columns are species, small end, length', () => {
  expect(readLogTable(rowsOf('white oak,18,12\nblack cherry;;'.replace(';;', ',12 1/2,8'))).logs).toEqual([
    { species: 'white-oak', smallEndIn: 18, lengthFt: 12, count: 1 },
    { species: 'black-cherry', smallEndIn: 12.5, lengthFt: 8, count: 1 },
  ]);
});

test('units of the heading, and bark taken off a diameter over bark', () => {
  const [log] = readLogTable(rowsOf('wood\tDOB (cm)\tLength (m)\nwhite oak\t50\t4')).logs;
  expect(log?.smallEndIn).toBeCloseTo(50 / 2.54 / Math.sqrt(1.16), 10);
  expect(log?.lengthFt).toBeCloseTo(4 / 0.3048, 10);
});

test.each([[''], ['hello'], ['species,length\nwhite oak,12'], ['small end,length\n18,12'], ['a,b,c,d,e,f\n1,2,3,4,5,6']])('"%s" is refused in words', (text) => {
  const table = readLogTable(rowsOf(text));
  expect(table.logs).toEqual([]);
  expect(table.problems.length).toBeGreaterThan(0);
});

test('any table is read or refused, never thrown on', () => {
  fc.assert(fc.property(fc.array(fc.array(fc.string(), { maxLength: 6 }), { maxLength: 6 }), (rows) => readLogTable(rows).logs.length >= 0));
});

test('every figure has its formula, numbers and source', () => {
  const workings = workingsOf({ species: 'white-oak', smallEndIn: 18, lengthFt: 12, defects: [{ kind: 'wedge', lengthFt: 6, angleDeg: 90 }] });
  expect(workings.find(({ figure }) => figure === 'Doyle')?.numbers).toBe('(18 − 4)² × 12 ÷ 16 = 147 → 147 bf');
  expect(workings.find(({ figure }) => figure === 'Scribner Decimal C')?.numbers).toBe('12 × 13.29 = 159.48 → 160 bf');
  expect(workings.every(({ formula, numbers, source }) => formula !== '' && numbers !== '' && source !== '')).toBe(true);
  fc.assert(
    fc.property(logs, (log) => {
      expect(JSON.stringify(workingsOf(log))).not.toMatch(/NaN|undefined|Infinity/);
    }),
  );
});
