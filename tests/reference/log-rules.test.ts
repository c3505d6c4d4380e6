import { describe, expect, test } from 'vitest';
import { doyleBoardFeet, internationalQuarterBoardFeet, scribnerDecimalCBoardFeet } from '~/domain/timber/log-rules.ts';
import { scribnerExceptions, scribnerFactorFrom16Ft, scribnerFactorFrom32Ft, scribnerFactorThousandths } from '~/domain/timber/data/scribner-table.ts';
import { cell, figure, readTable } from './csv.ts';

const cells = (file: string): readonly (readonly [string, number, number, number])[] =>
  readTable(file).map((row) => [
    `${cell(row, 'dib_in')} in × ${cell(row, 'length_ft')} ft`,
    figure(row, 'dib_in'),
    figure(row, 'length_ft'),
    figure(row, 'published_bf'),
  ]);

describe('International 1/4-inch, published table of E. M. Wengert', () => {
  test.each(cells('international_quarter.csv'))('%s', (_, diameterIn, lengthFt, published) => {
    expect(internationalQuarterBoardFeet(diameterIn, lengthFt)).toBe(published);
  });

  test('15 in × 16 ft is printed 160 where the formula gives 157.3', () => {
    expect(internationalQuarterBoardFeet(15, 16)).toBe(160);
  });
});

describe('Doyle, published table of even diameters (extension publication)', () => {
  test.each(cells('doyle.csv'))('%s', (_, diameterIn, lengthFt, published) => {
    expect(doyleBoardFeet(diameterIn, lengthFt)).toBe(published);
  });
});

describe('Scribner Decimal C, published table of E. M. Wengert', () => {
  test.each(cells('scribner_decimal_c_published.csv'))('%s', (_, diameterIn, lengthFt, published) => {
    expect(scribnerDecimalCBoardFeet(diameterIn, lengthFt)).toBe(published);
  });

  test.each([
    [6, 6],
    [6, 8],
    [7, 6],
  ])('%i in × %i ft is printed as half a unit, 5 bf', (diameterIn, lengthFt) => {
    expect(scribnerDecimalCBoardFeet(diameterIn, lengthFt)).toBe(5);
  });
});

describe('Scribner Decimal C data of the US Forest Service, scrib.f', () => {
  test('every factor', () => {
    for (const row of readTable('scribner_factors.csv')) {
      const applies = cell(row, 'applies_to');
      const table = applies.startsWith('all') ? scribnerFactorThousandths : applies.includes('16-31') ? scribnerFactorFrom16Ft : scribnerFactorFrom32Ft;
      expect(table[figure(row, 'dib_in')], applies).toBe(Math.round(figure(row, 'factor_bf_per_ft') * 1000));
    }
  });

  test('every exception, and no other', () => {
    const rows = readTable('scribner_exceptions.csv');
    expect(rows).toHaveLength(148);
    for (const row of rows) {
      const list = scribnerExceptions[figure(row, 'length_ft')]?.[figure(row, 'adjust_decimal_c_units') > 0 ? 'above' : 'below'];
      expect(list).toContain(figure(row, 'dib_in'));
    }
    expect(Object.values(scribnerExceptions).reduce((sum, { above, below }) => sum + above.length + below.length, 0)).toBe(148);
  });
});
