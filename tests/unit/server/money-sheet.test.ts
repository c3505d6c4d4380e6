import { spawnSync } from 'node:child_process';
import { describe, expect, it } from 'vitest';
import { moneyPdf } from '~/server/documents/money-sheet.ts';

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
