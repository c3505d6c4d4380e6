/**
 * The payment provider's stand-in as a program of its own.
 *
 *   tsx fakes/stripe/main.ts --port 4243 --data .data/fakes/stripe --key sk_test_skidway \
 *     --webhook-url http://127.0.0.1:4321/api/webhooks/payments --webhook-secret whsec_skidway
 *
 * Each can come from the environment instead: PORT, DATA_DIR, STRIPE_KEY, WEBHOOK_URL, WEBHOOK_SECRET.
 * `--float` is the platform's own money at the provider, in cents.
 * `--page-origin` is the address people's browsers reach it at, when that is not 127.0.0.1.
 */
import { parseArgs } from 'node:util';
import { startFakeStripe } from './server.ts';

const { values } = parseArgs({
  options: {
    port: { type: 'string' },
    data: { type: 'string' },
    key: { type: 'string' },
    'webhook-url': { type: 'string' },
    'webhook-secret': { type: 'string' },
    'page-origin': { type: 'string' },
    'settle-after': { type: 'string' },
    float: { type: 'string' },
  },
});

const port = Number(values.port ?? process.env['PORT'] ?? 4243);
if (!Number.isInteger(port) || port < 0 || port > 65_535) {
  console.error('--port must be a port number.');
  process.exit(2);
}
const webhookUrl = values['webhook-url'] ?? process.env['WEBHOOK_URL'];
const webhookSecret = values['webhook-secret'] ?? process.env['WEBHOOK_SECRET'];
const stripe = await startFakeStripe({
  port,
  data: values.data ?? process.env['DATA_DIR'] ?? '.data/fakes/stripe',
  key: values.key ?? process.env['STRIPE_KEY'] ?? 'sk_test_skidway',
  ...(webhookUrl === undefined ? {} : { webhookUrl }),
  ...(webhookSecret === undefined ? {} : { webhookSecret }),
  ...(values['page-origin'] === undefined ? {} : { pageOrigin: values['page-origin'] }),
  // Whole refunds need more than the charge brought in: the provider keeps its fee. A platform has some money of its own there.
  floatCents: Number(values.float ?? 1_000_000),
  ...(values['settle-after'] === undefined ? {} : { settleAfterS: Number(values['settle-after']) }),
});
console.log(`Payments stand-in at ${stripe.url}`);

let stopping = false;
const stop = (): void => {
  if (stopping) return;
  stopping = true;
  void stripe.close().then(() => process.exit(0));
};
process.on('SIGINT', stop);
process.on('SIGTERM', stop);
