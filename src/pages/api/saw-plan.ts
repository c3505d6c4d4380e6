import { sawPlanAnswer, sawPlanRequest } from '~/schemas/saw-plan.ts';
import { calculate } from '~/server/http/calculate.ts';
import { openEndpoint } from '~/server/http/endpoint.ts';
import { planLog } from '~/server/services/planning.ts';

export const POST = openEndpoint({ body: sawPlanRequest, run: async ({ body, context }) => sawPlanAnswer.parse(await calculate(context.request, (asker) => planLog(body, asker))) });
