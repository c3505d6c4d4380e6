import { accountEndpoint } from '~/server/http/endpoint.ts';
import { keptCutSheet } from '~/server/queries/cut-sheet.ts';

/** The cut sheet as a phone keeps it beside the mill. */
export const GET = accountEndpoint({ run: ({ viewer, params }) => keptCutSheet(viewer, Number(params['number'])) });
