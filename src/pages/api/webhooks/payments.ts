/** The payment provider's messages. Open to anyone: the signature on the raw body decides. */
import { recordProviderEvent } from '~/server/commands/record-provider-event.ts';
import { openEndpoint } from '~/server/http/endpoint.ts';

export const POST = openEndpoint({
  run: async ({ context, at }) => {
    const signature = context.request.headers.get('stripe-signature') ?? '';
    const outcome = await recordProviderEvent(await context.request.text(), signature, at);
    return { received: true, known: outcome === 'known' };
  },
});
