import type { APIRoute } from 'astro';
import { z } from 'zod';
import { readLogs } from '~/domain/timber/logs-in-url.ts';
import { logListPdf } from '~/server/documents/log-list-pdf.ts';
import { clientAddress } from '~/server/http/client-address.ts';
import { countTry } from '~/server/http/limits.ts';
import { problemResponse } from '~/server/http/problem.ts';
import { problemsOf } from '~/server/http/endpoint.ts';

const form = z.object({
  logs: z.string({ error: 'Give the logs.' }).min(1, { error: 'There are no logs in the list.' }).max(200_000, { error: 'At most 1,000 logs.' }),
  half: z.enum(['up', 'down']).default('up'),
  longest: z.enum(['16', '20', '32', '40']).default('20'),
});

const lengths = { '16': 16, '20': 20, '32': 32, '40': 40 } as const;

/** The list of the estimator as a PDF. Public: it holds only what was sent, and nothing is kept. */
export const POST: APIRoute = async ({ request, locals }) => {
  const typed = await request.formData().catch(() => null);
  if (!typed) return problemResponse(415, 'Send the list as a form.');
  const read = form.safeParse(Object.fromEntries(typed));
  if (!read.success) return problemResponse(422, 'The list cannot be read.', problemsOf(read.error));
  const logs = readLogs(read.data.logs);
  if (!logs.ok) return problemResponse(422, 'The list cannot be read.', logs.problems);
  await countTry('list on paper', clientAddress(request));
  const pdf = await logListPdf(logs.value, { halfInchRounding: read.data.half, longestScalingLengthFt: lengths[read.data.longest] }, locals.origin);
  return new Response(pdf, { headers: { 'content-type': 'application/pdf', 'content-disposition': 'inline; filename="log-estimate.pdf"', 'cache-control': 'no-store' } });
};
