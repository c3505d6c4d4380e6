import { moneyCsv, moneyPdf, type MoneySheet } from '../documents/money-sheet.ts';
import { problemResponse } from './problem.ts';

/** Answers a receipt or statement as `pdf` or `csv`, to be kept as a file. */
export async function sheetResponse(sheet: MoneySheet, format: string | undefined): Promise<Response> {
  const name = `skidway-${sheet.title.toLowerCase()}-${sheet.number}`;
  if (format === 'csv') return new Response(moneyCsv(sheet), { headers: { 'content-type': 'text/csv; charset=utf-8', 'content-disposition': `attachment; filename="${name}.csv"`, 'cache-control': 'private, no-store' } });
  if (format !== 'pdf') return problemResponse(404, 'There is no such document.');
  return new Response(await moneyPdf(sheet), { headers: { 'content-type': 'application/pdf', 'content-disposition': `inline; filename="${name}.pdf"`, 'cache-control': 'private, no-store' } });
}
