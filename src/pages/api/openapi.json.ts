import { env } from '~/server/env.ts';
import { openEndpoint } from '~/server/http/endpoint.ts';
import { openApi } from '~/server/http/openapi.ts';

export const GET = openEndpoint({ run: async () => openApi(env().ORIGIN) });
