import Papa from 'papaparse';
import { openPaper } from './paper.ts';

export interface SheetColumn {
  readonly heading: string;
  /** Part of the page's width; the parts of a sheet sum to 1. */
  readonly part: number;
  readonly figure?: boolean;
}

/** A receipt or statement, worded; the same for paper and for a spreadsheet. */
export interface MoneySheet {
  readonly title: string;
  readonly number: string;
  /** Who it is for, from when, and so on: label and value. */
  readonly facts: readonly (readonly [label: string, value: string])[];
  readonly columns: readonly SheetColumn[];
  readonly rows: readonly (readonly string[])[];
  readonly totals: readonly (readonly string[])[];
  readonly notes: readonly string[];
}

const LEFT = 54;
const WIDTH = 504;

/** The sheet on Letter paper; the headings stand again on every page, with the number and the page's own at the foot. */
export function moneyPdf(sheet: MoneySheet): Promise<Uint8Array<ArrayBuffer>> {
  const { paper, done } = openPaper(`${sheet.title} ${sheet.number}`);
  const row = (texts: readonly string[], bold: boolean): void => {
    paper.font(bold ? 'bold' : 'plain').fontSize(9);
    const widths = sheet.columns.map(({ part }) => part * WIDTH - 8);
    const tall = Math.max(...texts.map((text, index) => paper.heightOfString(text, { width: widths[index] ?? 0 })));
    if (paper.y + tall > paper.page.height - 90) {
      paper.addPage();
      row(sheet.columns.map(({ heading }) => heading), true);
      paper.font(bold ? 'bold' : 'plain').fontSize(9);
    }
    const top = paper.y;
    let x = LEFT;
    sheet.columns.forEach((column, index) => {
      paper.text(texts[index] ?? '', x, top, { width: widths[index] ?? 0, align: column.figure ? 'right' : 'left' });
      x += column.part * WIDTH;
    });
    const foot = top + tall + 3;
    paper.moveTo(LEFT, foot).lineTo(LEFT + WIDTH, foot).lineWidth(bold ? 1 : 0.4).stroke();
    paper.x = LEFT;
    paper.y = foot + 5;
  };
  paper.font('bold').fontSize(20).text(sheet.title);
  paper.moveDown(0.3).fontSize(9.5);
  for (const [label, value] of [['Number', sheet.number] as const, ...sheet.facts]) paper.font('bold').text(`${label}: `, { continued: true }).font('plain').text(value);
  paper.moveDown(0.8);
  row(sheet.columns.map(({ heading }) => heading), true);
  for (const texts of sheet.rows) row(texts, false);
  for (const texts of sheet.totals) row(texts, true);
  paper.moveDown(0.6).font('plain').fontSize(9);
  for (const note of sheet.notes) paper.text(note, LEFT, paper.y, { width: WIDTH }).moveDown(0.4);
  const { start, count } = paper.bufferedPageRange();
  for (let page = start; page < start + count; page += 1) {
    paper.switchToPage(page);
    paper.page.margins.bottom = 0;
    paper.fontSize(8).text(`${sheet.title} ${sheet.number} · page ${page + 1} of ${count}`, LEFT, paper.page.height - 40, { width: WIDTH, align: 'right', lineBreak: false });
  }
  paper.end();
  return done;
}

/** What a spreadsheet would take for a formula; an amount by itself is none. */
const FORMULA = /^(?!-?\$?[\d,]+(?:\.\d+)?$)[=+\-@\t\r\n＝＋－＠]/;

/** The sheet for a spreadsheet: the facts, an empty line, then headings and rows. What could be taken for a formula is escaped. */
export function moneyCsv(sheet: MoneySheet): string {
  const facts = [[sheet.title, sheet.number], ...sheet.facts.map((fact) => [...fact])];
  return `${Papa.unparse([...facts, [], sheet.columns.map(({ heading }) => heading), ...sheet.rows, ...sheet.totals], { escapeFormulae: FORMULA, newline: '\r\n' })}\r\n`;
}
