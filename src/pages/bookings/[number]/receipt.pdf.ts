import type { APIRoute } from 'astro';
import { now } from '~/server/clock.ts';
import { numberDocument } from '~/server/commands/number-document.ts';
import { receiptSheet } from '~/server/documents/money-sheets.ts';
import { notFound, signedOut } from '~/server/errors.ts';
import { sheetResponse } from '~/server/http/sheet-response.ts';
import { moneyOfBooking } from '~/server/queries/money-of-booking.ts';

/** The receipt of a signed booking, for the side that asks. */
export const GET: APIRoute = async ({ params, locals: { viewer } }) => {
  if (!viewer) throw signedOut();
  const money = await moneyOfBooking(viewer, Number(params['number']));
  if (!money.settlement) throw notFound('receipt');
  const content = { settlement: money.settlement, side: money.side, landowner: money.landownerName, sawyer: money.sawyerName, fee: money.feeBasisPoints };
  const number = await numberDocument({ accountId: viewer.id, kind: 'receipt', subject: String(money.number), content }, now());
  return sheetResponse(receiptSheet(money, number), 'pdf');
};
