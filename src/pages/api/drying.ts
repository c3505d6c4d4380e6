import { dryBoard } from '~/domain/timber/drying.ts';
import { dryingRequest } from '~/schemas/drying.ts';
import { valueOf } from '~/server/errors.ts';
import { openEndpoint } from '~/server/http/endpoint.ts';

export const POST = openEndpoint({ body: dryingRequest, run: async ({ body }) => valueOf(dryBoard(body)) });
