import { spawnSync } from 'node:child_process';
import { describe, expect, it } from 'vitest';
import { moneyCsv, moneyPdf } from '~/server/documents/money-sheet.ts';

/** The text of a PDF as Debian's poppler reads it. */
const textOf = (pdf: Uint8Array): string => spawnSync('pdftotext', ['-layout', '-', '-'], { input: pdf, encoding: 'utf8' }).stdout;

describe('a money sheet on paper', () => {
  it('has true minus signs and the names of people as they write them', async () => {
    const text = textOf(await moneyPdf({
      title: 'Receipt', number: 'R-1', facts: [['Sawyer', 'Łukasz Żőrğů']], columns: [{ heading: 'For', part: 0.7 }, { heading: 'Amount', part: 0.3, figure: true }],
      rows: [['Sawing, 434 bf × $0.45', '$195.30']], totals: [['Fee (5 %)', '−$14.02']], notes: ['Trim is ½ in; the mill’s kerf ¼ in.'],
    }));
    for (const said of ['Łukasz Żőrğů', '434 bf × $0.45', '−$14.02', '½ in; the mill’s kerf ¼ in']) expect(text).toContain(said);
  });
});

describe('a money sheet for a spreadsheet', () => {
  const cell = (text: string): string => moneyCsv({ title: 'Earnings', number: 'E-1', facts: [], columns: [{ heading: 'Job', part: 1 }], rows: [[text]], totals: [], notes: [] }).split('\r\n')[3] ?? '';

  it.each(['=1+HYPERLINK("https://elsewhere.example/")', '-2+3', '+1*2', '-.5+A1', '-$1+A1', '@SUM(A1)', '=A1', '＝1+1', '-5, booking 7'])('makes no formula of what a person named %s', (title) => {
    expect(cell(title).replace(/^"/, '')).toMatch(/^'/);
  });

  it.each(['-$14.02', '−$14.02', '$1,250.00', '-5', 'Oak - four logs'])('leaves %s as it is', (text) => {
    expect(cell(text).replaceAll('"', '')).toBe(text);
  });
});
