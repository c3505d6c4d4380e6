import type { APIRoute } from 'astro';
import { periodField } from '~/schemas/period.ts';
import { now } from '~/server/clock.ts';
import { numberDocument } from '~/server/commands/number-document.ts';
import { paymentsSheet } from '~/server/documents/money-sheets.ts';
import { signedOut } from '~/server/errors.ts';
import { problemResponse } from '~/server/http/problem.ts';
import { sheetResponse } from '~/server/http/sheet-response.ts';
import { paymentsStatement } from '~/server/queries/payments-statement.ts';

/** A landowner's own payments of a year or month (`?period=2026` or `?period=2026-08`), as PDF or CSV. */
export const GET: APIRoute = async ({ url, params, locals: { viewer } }) => {
  if (!viewer) throw signedOut();
  const period = periodField.safeParse(url.searchParams.get('period'));
  if (!period.success) return problemResponse(422, 'Give a year like 2026, or a month like 2026-08.');
  const statement = await paymentsStatement(viewer.id, period.data);
  const number = await numberDocument({ accountId: viewer.id, kind: 'payments', subject: period.data, content: { name: viewer.name, statement } }, now());
  return sheetResponse(paymentsSheet(viewer.name, statement, number), params['format']);
};
