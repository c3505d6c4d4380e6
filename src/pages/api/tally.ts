import { tallyBoards } from '~/domain/timber/tally.ts';
import { tallyRequest } from '~/schemas/tally.ts';
import { openEndpoint } from '~/server/http/endpoint.ts';

export const POST = openEndpoint({ body: tallyRequest, run: async ({ body }) => tallyBoards(body.rule, body.pieces) });
