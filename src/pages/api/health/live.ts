import { openEndpoint } from '~/server/http/endpoint.ts';

export const GET = openEndpoint({ run: async () => ({ ok: true }) });
