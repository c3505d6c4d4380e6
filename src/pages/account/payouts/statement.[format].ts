import type { APIRoute } from 'astro';
import { periodField } from '~/schemas/period.ts';
import { now } from '~/server/clock.ts';
import { numberDocument } from '~/server/commands/number-document.ts';
import { earningsSheet } from '~/server/documents/money-sheets.ts';
import { forbidden, signedOut } from '~/server/errors.ts';
import { problemResponse } from '~/server/http/problem.ts';
import { sheetResponse } from '~/server/http/sheet-response.ts';
import { earningsStatement } from '~/server/queries/earnings-statement.ts';

/** A sawyer's own earnings of a year or month (`?period=2026` or `?period=2026-08`), as PDF or CSV. */
export const GET: APIRoute = async ({ url, params, locals: { viewer } }) => {
  if (!viewer) throw signedOut();
  if (!viewer.isSawyer) throw forbidden('Only an account that works as a sawyer has earnings.');
  const period = periodField.safeParse(url.searchParams.get('period'));
  if (!period.success) return problemResponse(422, 'Give a year like 2026, or a month like 2026-08.');
  const statement = await earningsStatement(viewer.id, period.data);
  const number = await numberDocument({ accountId: viewer.id, kind: 'earnings', subject: period.data, content: { name: viewer.name, statement } }, now());
  return sheetResponse(earningsSheet(viewer.name, statement, number), params['format']);
};
