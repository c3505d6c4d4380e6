import { cutListAnswer, cutListRequest } from '~/schemas/cut-list.ts';
import { openEndpoint } from '~/server/http/endpoint.ts';
import { planCutList } from '~/server/services/planning.ts';

export const POST = openEndpoint({ body: cutListRequest, run: async ({ body }) => cutListAnswer.parse(await planCutList(body)) });
