import { describe, expect, test } from 'vitest';
import { dressedSoftwood, surfacedHardwood, type LumberClass } from '~/domain/timber/sizes.ts';
import { cell, figure, readTable, sure } from './csv.ts';

const rows = readTable('sizes_ps20.csv');

describe('Nominal and dressed sizes, American Softwood Lumber Standard PS 20', () => {
  const softwood = rows.filter((row) => ['boards', 'dimension'].includes(cell(row, 'class')));
  test.each(softwood.map((row) => [`${cell(row, 'class')}, ${cell(row, 'face')} ${cell(row, 'nominal')} in`, row] as const))('%s', (_, row) => {
    const lumber: LumberClass = cell(row, 'class') === 'boards' ? 'board' : 'dimension';
    const face = cell(row, 'face') === 'thickness' ? 'thickness' : 'width';
    expect(dressedSoftwood(face, figure(row, 'nominal_in'), lumber)).toEqual({ dryIn: figure(row, 'dry_in'), greenIn: figure(row, 'green_in') });
  });

  test.each([
    [5, 4.5, 4.5],
    [6, 5.5, 5.5],
    [7, 6.25, 6.5],
    [15, 14.25, 14.5],
    [16, 15, 15.5],
  ])('timber of %i in: ½, ¾ or 1 in off dry, ½ in off green', (nominalIn, dryIn, greenIn) => {
    expect(dressedSoftwood('width', nominalIn, 'timber')).toEqual({ dryIn, greenIn });
  });

  test('a size the standard does not list has no dressed size', () => {
    expect(dressedSoftwood('width', 13, 'dimension')).toBeNull();
  });
});

describe('Hardwood surfaced two sides', () => {
  const hardwood = rows.filter((row) => cell(row, 'class').startsWith('hardwood'));
  test.each(hardwood.map((row) => [`${cell(row, 'nominal')}${sure(cell(row, 'seen_or_memory'))}`, row] as const))('%s', (_, row) => {
    const [over = 0, under = 1] = cell(row, 'nominal').split('/').map(Number);
    expect(surfacedHardwood(over / under)).toBe(figure(row, 'dry_in'));
  });
});
