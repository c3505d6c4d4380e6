import { expect, test } from 'vitest';
import { weightPerFootLb } from '~/domain/timber/weight.ts';
import { cell, figure, readTable } from './csv.ts';

// Three cells of the print are cut off where others are rounded (79.52 printed 79), so a pound either way is right.
test.each(readTable('green_log_weight.csv').map((row) => [`${cell(row, 'species')} ${cell(row, 'dib_in')} in`, row] as const))(
  '%s a foot, US National Park Service, Safety for Tree Workers',
  (_, row) => {
    const published = figure(row, 'lb_per_ft_of_log_published');
    const worked = weightPerFootLb(figure(row, 'green_lb_per_ft3'), figure(row, 'dib_in'));
    expect(Math.abs(worked - published)).toBeLessThan(0.6);
  },
);
