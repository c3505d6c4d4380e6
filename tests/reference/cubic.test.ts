import { expect, test } from 'vitest';
import { cubicFeetOf, huber, newton, smalian, smalianCubicMetres } from '~/domain/timber/cubic.ts';
import { cell, figure, readTable, sure } from './csv.ts';

const rows = readTable('cubic_examples.csv').filter((row) => !cell(row, 'formula').startsWith('frustum'));

test.each(rows.map((row) => [`${cell(row, 'formula')} of ${cell(row, 'small_d')}, ${cell(row, 'large_d')} × ${cell(row, 'length')} ${cell(row, 'units')}${sure(cell(row, 'seen_or_memory'))}`, row] as const))(
  '%s',
  (_, row) => {
    const [small, large, middle, length] = ['small_d', 'large_d', 'mid_d', 'length'].map((column) => figure(row, column)) as [number, number, number, number];
    const formula = cell(row, 'formula');
    const metric = cell(row, 'units') === 'cm,m';
    const worked = formula === 'Huber' ? huber(middle, length) : formula === 'Newton' ? newton(small, middle, large, length) : metric ? smalianCubicMetres(small, large, length) : smalian(small, large, length);
    // 0.002727 is the constant cut to four figures: 12.9151 against 12.9154.
    expect(worked).toBeCloseTo(figure(row, 'computed'), formula.includes('0.002727') ? 2 : metric ? 5 : 3);
  },
);

// D. R. Larsen, Univ. Missouri, prints the frustum of a cone, which Newton's formula gives exactly for a straight taper.
test.each([[10, 12, 16, 10.5883]])('the frustum of a cone %d to %d in × %d ft by Newton with the mean in the middle', (small, large, lengthFt, published) => {
  expect(cubicFeetOf(small, large, lengthFt).newton).toBeCloseTo(published, 3);
});
