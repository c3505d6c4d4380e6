import { cutListAnswer, cutListRequest } from '~/schemas/cut-list.ts';
import { calculate } from '~/server/http/calculate.ts';
import { openEndpoint } from '~/server/http/endpoint.ts';
import { planCutList } from '~/server/services/planning.ts';

export const POST = openEndpoint({ body: cutListRequest, run: async ({ body, context }) => cutListAnswer.parse(await calculate(context.request, (asker) => planCutList(body, asker))) });
