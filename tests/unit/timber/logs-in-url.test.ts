import fc from 'fast-check';
import { expect, test } from 'vitest';
import { eachLog, readLogs, writeLogs, type LogGroup } from '~/domain/timber/logs-in-url.ts';
import { logs } from './arbitraries.ts';

test('readable in the address bar', () => {
  const groups: readonly LogGroup[] = [
    { species: 'white-oak', smallEndIn: 18, largeEndIn: 20.5, lengthFt: 12.5, count: 3, defects: [{ kind: 'wedge', lengthFt: 8, angleDeg: 90 }] },
    { species: 'red-pine', smallEndIn: 14, lengthFt: 16, count: 1 },
  ];
  expect(writeLogs(groups)).toBe('white-oak_18_20.5_12.5_3!wedge-8-90~red-pine_14__16');
  expect(readLogs(writeLogs(groups))).toEqual({ ok: true, value: groups });
  expect(eachLog(groups)).toHaveLength(4);
});

test('what is written is read back to a thousandth, also through a query string', () => {
  const near = (value: unknown): unknown =>
    JSON.parse(JSON.stringify(value, (_, part: unknown) => (typeof part === 'number' ? Number(part.toFixed(3)) : part)));
  fc.assert(
    fc.property(fc.array(fc.tuple(logs, fc.integer({ min: 1, max: 50 })), { maxLength: 10 }), (some) => {
      const groups = some.map(([{ defects = [], ...log }, count]): LogGroup => ({ ...log, ...(defects.length === 0 ? {} : { defects }), count }));
      const query = new URLSearchParams({ logs: writeLogs(groups) });
      const read = readLogs(new URLSearchParams(query.toString()).get('logs') ?? '');
      expect(read.ok && near(read.value)).toEqual(near(groups));
    }),
  );
});

test.each([
  ['oak_18__12', 'logs.0.species'],
  ['white-oak_18__12~white-oak_99__12', 'logs.1.smallEndIn'],
  ['white-oak_18__400', 'logs.0.lengthFt'],
  ['white-oak_18_12_12', 'logs.0.largeEndIn'],
  ['white-oak_18__12_0', 'logs.0.count'],
  ['white-oak_18__12_1_7', 'logs.0.count'],
  ['white-oak_18__12!knot-3', 'logs.0.defects'],
  ['white-oak_18__12!wedge-3', 'logs.0.defects'],
  ['white-oak_1e1__12', 'logs.0.smallEndIn'],
  ['white-oak_18__12_600~white-oak_18__12_600', 'logs'],
])('refuses %s at %s', (text, path) => {
  expect(readLogs(text)).toMatchObject({ ok: false, problems: [{ path }] });
});

test('any text is read or refused, never thrown on', () => {
  fc.assert(fc.property(fc.string(), (text) => typeof readLogs(text).ok === 'boolean'));
});
