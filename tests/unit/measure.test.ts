import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { convertLength, formatFeet, formatFeetInches, formatFraction, formatInches, formatMetric, parseLengthFt, parseLengthIn, parseNumber, type LengthUnit } from '~/domain/measure.ts';

const read = (text: string): number | null => {
  const result = parseLengthIn(text);
  return result.ok ? result.value : null;
};

describe('reading', () => {
  test.each<[string, number]>([
    ['12 3/8', 12.375],
    ['12-3/8', 12.375],
    ['12 - 3/8', 12.375],
    ['12⅜', 12.375],
    ['12 ⅜"', 12.375],
    ['3/8', 0.375],
    ['5/4', 1.25],
    ['.5', 0.5],
    ['12,5', 12.5],
    ['1,200', 1200],
    ['1,200.5', 1200.5],
    ['14.25 in', 14.25],
    ['14 inches', 14],
    ["1' 6\"", 18],
    ['1’ 6”', 18],
    ["1'6", 18],
    ["1'-6 1/2\"", 18.5],
    ['1 ft 6 in', 18],
    ['1 foot, 6 inches', 18],
    ['1ft6in.', 18],
    ["6''", 6],
    ['2 ft', 24],
    ['30 cm', 30 / 2.54],
    ['30cm', 30 / 2.54],
    ['300 mm', 300 / 25.4],
    ['2 m 40 cm', 240 / 2.54],
    ['2 m 40', 240 / 2.54],
  ])('%s', (text, inches) => {
    expect(read(text)).toBeCloseTo(inches, 10);
  });

  test.each(['', ' ', 'twelve', '12 8', '6 in 1 ft', '1/0', '12 stone', '-4', '--', '1.2.3', '1,2,3', '12 3/8 4', '4"4"'])('refuses "%s" beside its field', (text) => {
    expect(parseLengthIn(text, 'in', 'logs.0.smallEndIn')).toMatchObject({ ok: false, problems: [{ path: 'logs.0.smallEndIn' }] });
  });

  test('a bare number is feet where feet are asked for', () => {
    expect(parseLengthFt('12')).toEqual({ ok: true, value: 12 });
    expect(parseLengthFt('12 ft 6 in')).toEqual({ ok: true, value: 12.5 });
    expect(parseLengthFt('150 in')).toEqual({ ok: true, value: 12.5 });
  });

  test('numbers alone', () => {
    expect([parseNumber('1,200'), parseNumber('12,5'), parseNumber('2½'), parseNumber('x'), parseNumber('-3')]).toEqual([1200, 12.5, 2.5, null, null]);
  });
});

describe('printing', () => {
  test.each<[number, string]>([
    [12.375, '12 3/8 in'],
    [0.5, '1/2 in'],
    [0, '0 in'],
    [11.99, '12 in'],
    [0.01, '0 in'],
    [-1.5, '−1 1/2 in'],
  ])('%d', (inches, text) => {
    expect(formatInches(inches)).toBe(text);
  });

  test('feet and inches carry over', () => {
    expect([formatFeet(12.5), formatFeet(11.9999), formatFeetInches(6.25), formatFeet(8)]).toEqual(['12 ft 6 in', '12 ft', '6 1/4 in', '8 ft']);
  });

  test('metric', () => {
    expect([formatMetric(14.75), formatMetric(144)]).toEqual(['37.5 cm', '3.66 m']);
  });
});

describe('properties', () => {
  test('what is printed to 1/16 is read back within 1/32', () => {
    fc.assert(
      fc.property(fc.double({ min: 0, max: 500, noNaN: true }), (inches) => {
        expect(Math.abs((read(formatInches(inches)) ?? Number.NaN) - inches)).toBeLessThanOrEqual(1 / 32 + 1e-9);
        expect(Math.abs((read(formatFeetInches(inches)) ?? Number.NaN) - inches)).toBeLessThanOrEqual(1 / 32 + 1e-9);
      }),
    );
  });

  test('there and back through another unit changes nothing', () => {
    const unit = fc.constantFrom<LengthUnit>('in', 'ft', 'mm', 'cm', 'm');
    fc.assert(
      fc.property(fc.double({ min: 0.001, max: 10_000, noNaN: true }), unit, unit, (value, from, to) => {
        expect(convertLength(convertLength(value, from, to), to, from) / value).toBeCloseTo(1, 12);
      }),
    );
  });

  test('any text is read as a finite length or refused', () => {
    const text = fc.oneof(fc.string(), fc.stringMatching(/^[0-9 ./,'"-]{0,12}(in|ft|cm|m)?$/));
    fc.assert(
      fc.property(text, (typed) => {
        const result = parseLengthIn(typed);
        expect(result.ok ? Number.isFinite(result.value) && result.value >= 0 : result.problems.length).toBeTruthy();
      }),
      { numRuns: 1000 },
    );
  });

  test('no number prints as NaN', () => {
    fc.assert(
      fc.property(fc.double(), (value) => {
        for (const text of [formatFraction(value), formatFeetInches(value), formatMetric(value)]) expect(text).not.toMatch(/NaN|undefined|Infinity/);
      }),
    );
  });
});
