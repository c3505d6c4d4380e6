import { sawPlanAnswer, sawPlanRequest } from '~/schemas/saw-plan.ts';
import { openEndpoint } from '~/server/http/endpoint.ts';
import { planLog } from '~/server/services/planning.ts';

export const POST = openEndpoint({ body: sawPlanRequest, run: async ({ body }) => sawPlanAnswer.parse(await planLog(body)) });
