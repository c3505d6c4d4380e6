import { accountEndpoint } from '~/server/http/endpoint.ts';
import { accountExport } from '~/server/queries/account-export.ts';

/** Everything kept about the account that asks, to be saved as a file. */
export const GET = accountEndpoint({
  run: async ({ viewer, at }) =>
    new Response(JSON.stringify(await accountExport(viewer, at), null, 2), {
      headers: { 'content-type': 'application/json', 'content-disposition': 'attachment; filename="skidway.json"', 'cache-control': 'private, no-store' },
    }),
});
