import { estimateLogs } from '~/domain/timber/estimate.ts';
import { estimateRequest } from '~/schemas/estimate.ts';
import { openEndpoint } from '~/server/http/endpoint.ts';

export const POST = openEndpoint({ body: estimateRequest, run: async ({ body }) => estimateLogs(body) });
