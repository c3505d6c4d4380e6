import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { logsOfStem, planStem } from '~/domain/sawing/stem-plan.ts';
import { estimateLog } from '~/domain/timber/estimate.ts';
import { readLogs, writeLogs } from '~/domain/timber/logs-in-url.ts';
import { readStemPage } from '~/schemas/stem-page.ts';

const stem = { species: 'white-oak', bark: 'inside', at0: '0', across0: '24', at1: '40', across1: '12', trim: '5', smallest: '8', by: 'internationalQuarter' };
const page = (fields: Record<string, string>, lengths: readonly string[] = ['8', '12', '16']) => readStemPage(new URLSearchParams([...Object.entries(fields), ...lengths.map((feet): [string, string] => ['lengths', feet])]));
const paths = (fields: Record<string, string>, lengths?: readonly string[]) => page({ ...stem, ...fields }, lengths).problems.map(({ path }) => path);

describe('the address of the stem page', () => {
  it('has neither plan nor problem before anything is asked', () => {
    const blank = readStemPage(new URLSearchParams());
    expect(blank).toMatchObject({ asked: null, problems: [], lengths: ['8', '10', '12', '16'] });
    expect([blank.said('trim'), blank.said('at0')]).toEqual(['5', '0']);
  });

  it('is read with fractions, feet and inches, metres, and the bark taken off', () => {
    const { asked } = page({ ...stem, bark: 'over', across0: '24 1/2', at1: "40' 6\"", across1: '30 cm', longest: '5 m' });
    expect(asked?.stem.measures[1]?.fromButtFt).toBeCloseTo(40.5, 9);
    expect(asked?.stem.measures[0]?.diameterIn).toBeCloseTo(24.5 / Math.sqrt(1.16), 9);
    expect(asked?.rules.longestFt).toBeCloseTo(5 / 0.3048, 9);
  });

  it.each<[path: string, fields: Record<string, string>, lengths?: readonly string[]]>([
    ['species', { species: 'oak' }],
    ['across1', { across1: '' }],
    ['across1', { across1: 'wide' }],
    ['across1', { across1: '30' }],
    ['at2', { at2: '', across2: '10' }],
    ['at1', { at1: '0' }],
    ['at1', { at1: '400' }],
    ['to0', { from0: '9', to0: '8' }],
    ['to0', { from0: '9' }],
    ['lengths', {}, []],
    ['lengths', {}, ['7']],
    ['trim', { trim: '-1' }],
    ['smallest', { smallest: '0' }],
    ['longest', { longest: 'long' }],
    ['by', { by: 'sawmill' }],
    ['by', { by: 'boards', at1: '101' }],
    ['by', { by: 'list', at1: '101', 'p0-thickness': '1', 'p0-width': '6', 'p0-length': '8' }],
    ['p0-thickness', { by: 'list' }],
    ['p1-width', { by: 'list', 'p1-thickness': '5/4', 'p1-length': '8', 'p1-count': '3' }],
    ['p2-count', { by: 'list', 'p2-thickness': '5/4', 'p2-width': '6', 'p2-length': '8', 'p2-count': '0' }],
  ])('names %s when it cannot be used: %j', (path, fields, lengths) => {
    expect(paths(fields, lengths)).toContain(path);
  });

  it('reads the cut list only when the stem is cut for it, blank rows left out', () => {
    const rows = { 'p0-label': 'Joists', 'p0-thickness': '2', 'p0-width': '6', 'p0-length': '10', 'p0-count': '4', 'p0-sizing': 'store-size', 'p3-thickness': '5/4', 'p3-width': '8', 'p3-length': '8 ft', 'p3-kind': 'slab' };
    const { asked } = page({ ...stem, by: 'list', ...rows });
    expect(asked?.pieces).toMatchObject([{ id: '1', label: 'Joists', count: 4, kind: 'board', green: { thicknessIn: 1.6875 } }, { id: '2', thicknessIn: 1.25, count: 1, kind: 'slab' }]);
    expect(page({ ...stem, ...rows }).asked?.pieces).toEqual([]);
  });

  it('is read or refused whatever stands in it', () => {
    fc.assert(fc.property(fc.dictionary(fc.constantFrom('species', 'at0', 'across0', 'at1', 'across1', 'from0', 'to0', 'trim', 'smallest', 'longest', 'by'), fc.string()), (fields) => {
      const read = page({ ...stem, ...fields });
      expect(read.asked === null).toBe(read.problems.length > 0);
    }));
  });
});

describe('a planned stem', () => {
  const read = page(stem).asked;
  if (!read || read.by === 'list') throw new Error('the stem of the check cannot be read');
  const asked = { ...read, by: read.by };
  const { best, oneLength } = planStem(asked);

  it('is worth what its logs scale by themselves, and no less than any single length', () => {
    const logs = logsOfStem(best, 'white-oak', asked.rules.trimIn);
    expect(logs.length).toBeGreaterThan(1);
    expect(logs.reduce((sum, log) => sum + estimateLog(log).boardFeet.internationalQuarter, 0)).toBe(best.value);
    expect(best.value).toBeGreaterThanOrEqual(oneLength?.value ?? Infinity);
    expect(best.logs[0]?.fromButtFt).toBe(0);
  });

  it('by its boards is worth what they are, and no less than the boards of the best by scale', () => {
    const byBoards = planStem({ ...asked, by: 'boards' });
    expect(byBoards.best.logs.reduce((sum, log) => sum + log.value, 0)).toBeCloseTo(byBoards.best.value, 9);
    expect(byBoards.best.value).toBeGreaterThanOrEqual(byBoards.oneLength?.value ?? Infinity);
    // A mill saws about what International ¼ says (tests/unit/sawing/published.test.ts).
    expect(byBoards.best.value / best.value).toBeGreaterThan(0.85);
    expect(byBoards.best.value / best.value).toBeLessThan(1.3);
  });

  it('goes to the estimator and a listing by the address', () => {
    const logs = logsOfStem(best, 'white-oak', asked.rules.trimIn);
    const listed = readLogs(writeLogs(logs));
    expect(listed.ok && listed.value.map(({ lengthFt }) => Math.floor(lengthFt))).toEqual(best.logs.map(({ lengthFt }) => lengthFt));
  });
});
