import { createServer, type IncomingMessage } from 'node:http';
import { acceptHeld } from '~/server/commands/accept-held.ts';
import { cancelBooking } from '~/server/commands/cancel-booking.ts';
import { checkOpenCheckouts } from '~/server/commands/check-checkouts.ts';
import { reconcile } from '~/server/commands/reconcile.ts';
import { recordProviderEvent } from '~/server/commands/record-provider-event.ts';
import { startCheckout } from '~/server/commands/start-checkout.ts';
import { Booking } from '~/server/models/index.ts';
import { viewerFor } from './cast.ts';
import { sawAndSign } from './money-market.ts';

// The deeds of money and the ear for the provider's messages in a process of their own, as the web process has them, without pages: so
// that a check can kill it at any instant. Run with the port as its argument.

/** What a check asks for. */
export interface Asked {
  readonly deed: 'pay' | 'top-up' | 'increase' | 'cancel' | 'sign' | 'accept held' | 'reconcile' | 'check checkouts';
  readonly by: string;
  readonly booking: number;
  readonly cents?: number;
}

async function run({ deed, by, booking, cents = 5_000 }: Asked): Promise<string> {
  const viewer = await viewerFor(by);
  const at = new Date();
  switch (deed) {
    case 'pay':
      return startCheckout(viewer, { booking }, at);
    case 'top-up':
    case 'increase':
      return startCheckout(viewer, { booking, purpose: deed, amountCents: cents }, at);
    case 'cancel':
      return cancelBooking(viewer, { booking, reason: 'chance' }, at).then(() => '');
    case 'sign':
      return sawAndSign(await Booking.findOne({ where: { number: booking }, rejectOnEmpty: true }), cents);
    case 'accept held':
      return acceptHeld(viewer, booking, at).then(() => '');
    case 'check checkouts':
      return checkOpenCheckouts(at, new Date(at.getTime() + 1)).then(() => '');
    case 'reconcile':
      return reconcile(at).then(() => '');
  }
}

const bodyOf = async (request: IncomingMessage): Promise<string> => {
  const parts: Buffer[] = [];
  for await (const part of request) parts.push(part as Buffer);
  return Buffer.concat(parts).toString('utf8');
};

createServer((request, response) => {
  const answer = (status: number, text = ''): void => void response.writeHead(status).end(text);
  const work = async (): Promise<void> => {
    const body = await bodyOf(request);
    if (request.url === '/deed') answer(200, await run(JSON.parse(body) as Asked));
    else answer(200, await recordProviderEvent(body, String(request.headers['stripe-signature'] ?? ''), new Date()));
  };
  work().catch((error: unknown) => answer(409, String(error)));
}).listen(Number(process.argv[2]), '127.0.0.1', () => process.send?.('ready'));
