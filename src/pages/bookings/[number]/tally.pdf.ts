import type { APIRoute } from 'astro';
import { signedOut } from '~/server/errors.ts';
import { tallyPdf } from '~/server/documents/tally-pdf.ts';
import { tallyPage } from '~/server/queries/tally-page.ts';

/** The tally as a sheet of paper, for its two sides and moderators. */
export const GET: APIRoute = async ({ locals, params }) => {
  if (!locals.viewer) throw signedOut();
  const page = await tallyPage(locals.viewer, Number(params['number']));
  const sheet = await tallyPdf(page);
  return new Response(sheet, { headers: { 'content-type': 'application/pdf', 'content-disposition': `inline; filename="tally-${page.number}.pdf"`, 'cache-control': 'private, no-store' } });
};
