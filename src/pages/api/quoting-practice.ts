import { quotingPracticeQuery } from '~/schemas/quoting-practice.ts';
import { openEndpoint } from '~/server/http/endpoint.ts';
import { quotingPractice } from '~/server/queries/quoting-practice.ts';

export const GET = openEndpoint({ query: quotingPracticeQuery, run: async ({ query }) => quotingPractice(query.zip) });
