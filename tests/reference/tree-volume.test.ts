import { expect, test } from 'vitest';
import { logsInTable, diametersInTable, treeVolume, type TreeVolumeRule } from '~/domain/timber/tree-volume.ts';
import { good } from '~/domain/result.ts';
import { cell, figure, readTable } from './csv.ts';

const rules: Readonly<Record<string, TreeVolumeRule>> = { Doyle: 'doyle', 'International 1/4-inch': 'internationalQuarter' };

test.each(Object.entries(rules))('every cell of %s, form class 78, Mesavage and Girard', (name, rule) => {
  const rows = readTable('tree_volume_form_class_78.csv').filter((row) => cell(row, 'log_rule') === name);
  expect(rows).toHaveLength(281);
  for (const row of rows) {
    expect(treeVolume({ rule, dbhIn: figure(row, 'dbh_in'), logs16ft: figure(row, 'logs_16ft') })).toEqual(good({ boardFeet: figure(row, 'volume_bf') }));
  }
  expect(diametersInTable(rule).reduce((sum, dbhIn) => sum + logsInTable(rule, dbhIn).length, 0)).toBe(281);
});

test.each([
  [9, 1, 'dbhIn'],
  [10.5, 1, 'dbhIn'],
  [10, 4, 'logs16ft'],
  [20, 1.25, 'logs16ft'],
  [20, 0, 'logs16ft'],
])('%d in with %d logs is outside the table', (dbhIn, logs16ft, path) => {
  expect(treeVolume({ rule: 'doyle', dbhIn, logs16ft })).toMatchObject({ ok: false, problems: [{ path }] });
});
