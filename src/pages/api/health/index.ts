import { openEndpoint } from '~/server/http/endpoint.ts';
import { health } from '~/server/queries/health.ts';

export const GET = openEndpoint({
  async run() {
    const answer = await health();
    return new Response(JSON.stringify(answer), { status: answer.database ? 200 : 503, headers: { 'content-type': 'application/json', 'cache-control': 'no-store' } });
  },
});
