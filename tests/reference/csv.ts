import { readFileSync } from 'node:fs';
import { fileURLToPath } from 'node:url';
import Papa from 'papaparse';

export type Row = Readonly<Record<string, string>>;

/** Reads a file of published values as rows by heading. */
export function readTable(file: string): readonly Row[] {
  const path = fileURLToPath(new URL(`./data/${file}`, import.meta.url));
  const { data, errors } = Papa.parse<Record<string, string>>(readFileSync(path, 'utf8'), { header: true, skipEmptyLines: true });
  if (errors.length > 0) throw new Error(`${file}: ${errors[0]?.message ?? 'unreadable'}`);
  return data;
}

/** A column that must be there. */
export function cell(row: Row, column: string): string {
  const value = row[column];
  if (value === undefined) throw new Error(`There is no column "${column}".`);
  return value;
}

/** A column as a number. */
export const figure = (row: Row, column: string): number => Number(cell(row, column));

/** A number, or null for an empty cell. */
export const figureOrNull = (row: Row, column: string): number | null => (cell(row, column) === '' ? null : figure(row, column));

/** ` (from memory)` for rows that were not seen in print. */
export const sure = (text: string): string => (/memory/.test(text) ? ' (from memory)' : /constructed/.test(text) ? ' (constructed)' : '');
