import { createServer, type IncomingMessage, type Server, type ServerResponse } from 'node:http';
import type { AddressInfo } from 'node:net';
import { Api } from './api.ts';
import { Control } from './control.ts';
import { answerControl } from './control-http.ts';
import { Deliveries, type DeliverySettings } from './deliveries.ts';
import { ApiError } from './errors.ts';
import { Faults } from './faults.ts';
import { escape, htmlPage } from './html.ts';
import { cardPage, payPage, setupLink, setupPage, setupSent, type PageAnswer } from './pages.ts';
import { catchUp } from './plans.ts';
import { addEndpoint } from './routes/webhooks.ts';
import { World } from './world.ts';

export interface FakeStripeOptions {
  /** 0 takes any free port. */
  readonly port?: number;
  /** Folder of the books; left out, everything is in memory only. */
  readonly data?: string;
  readonly key: string;
  /** The origin in links for people's browsers; the listening address when left out. */
  readonly pageOrigin?: string;
  /** Where events go from the start, the platform's and the connected accounts' alike. */
  readonly webhookUrl?: string;
  readonly webhookSecret?: string;
  readonly webhooks?: Partial<DeliverySettings>;
  /** Cents of its own that the platform has paid in before anything else happens. */
  readonly floatCents?: number;
  /** Seconds until the money of a charge is available; two days at the provider. */
  readonly settleAfterS?: number;
  /** Seconds until the card that disputes does so. */
  readonly disputeAfterS?: number;
  /** Seconds a payout takes to the bank. */
  readonly payoutTakesS?: number;
}

export interface FakeStripe {
  readonly url: string;
  readonly control: Control;
  readonly close: () => Promise<void>;
}

const MOST_BYTES = 1_000_000;
const TICK_MS = 250;

/**
 * Starts a stand-in for the payment provider on the loopback address. It speaks the provider's API to the official
 * SDK, serves the card and onboarding pages, and sends signed events.
 */
export async function startFakeStripe(options: FakeStripeOptions): Promise<FakeStripe> {
  let url = '';
  const world = new World({
    folder: options.data ?? null,
    baseUrl: () => options.pageOrigin ?? url,
    settleAfterS: options.settleAfterS ?? 2 * 86_400,
    disputeAfterS: options.disputeAfterS ?? 2,
    payoutTakesS: options.payoutTakesS ?? 2 * 86_400,
  });
  const faults = new Faults();
  const deliveries = new Deliveries(world, options.webhooks ?? {});
  const setUp = (): void => {
    const address = options.webhookUrl;
    if (address !== undefined) world.store.change(() => void addEndpoint(world, address, ['*'], options.webhookSecret ?? 'whsec_stand_in', 'both', 'we_from_the_environment'));
  };
  setUp();
  const control = new Control(world, deliveries, faults, setUp);
  if (options.floatCents !== undefined && world.store.all('balance_transaction', '').length === 0) control.topUp(options.floatCents);
  const api = new Api(world, faults, options.key);

  const server = createServer((request, response) => {
    answer(request, response, { world, control, api }).catch((error: unknown) => {
      console.error('The payments stand-in failed:', error);
      if (!response.headersSent) response.writeHead(500, { 'Content-Type': 'text/plain' });
      response.end();
    });
  });
  await listen(server, options.port ?? 0);
  url = `http://127.0.0.1:${(server.address() as AddressInfo).port}`;
  deliveries.resume();
  const tick = setInterval(() => catchUp(world), TICK_MS);
  tick.unref();

  const close = async (): Promise<void> => {
    clearInterval(tick);
    await deliveries.close();
    server.closeAllConnections();
    await new Promise<void>((done) => server.close(() => done()));
    world.store.close();
  };
  return { url, control, close };
}

function listen(server: Server, port: number): Promise<void> {
  return new Promise((done, fail) => {
    server.once('error', fail);
    server.listen(port, '127.0.0.1', () => done());
  });
}

async function read(request: IncomingMessage): Promise<string> {
  const parts: Buffer[] = [];
  let size = 0;
  for await (const part of request as AsyncIterable<Buffer>) {
    size += part.length;
    if (size > MOST_BYTES) throw new ApiError(413, { type: 'invalid_request_error', message: 'The request is too large.' });
    parts.push(part);
  }
  return Buffer.concat(parts).toString('utf8');
}

type House = { readonly world: World; readonly control: Control; readonly api: Api };

async function answer(request: IncomingMessage, response: ServerResponse, house: House): Promise<void> {
  const address = new URL(request.url ?? '/', 'http://stand-in');
  const path = address.pathname;
  const method = request.method ?? 'GET';
  if (path.startsWith('/v1/')) {
    const made = await house.api.answer({ method, path, query: address.search, body: await read(request), headers: request.headers });
    if (made.dead === true) request.socket.destroy();
    else response.writeHead(made.status, made.headers).end(made.body);
    return;
  }
  if (path.startsWith('/_control/')) return control(request, response, house, method, path);
  const shown = await page(request, house, method, path);
  if ('redirect' in shown) response.writeHead(303, { Location: shown.redirect, 'Cache-Control': 'no-store' }).end();
  else response.writeHead(shown.status, { 'Content-Type': 'text/html; charset=utf-8', 'Cache-Control': 'no-store' }).end(shown.html);
}

/** Only JSON is taken, so that a foreign web page cannot press the switches with a plain form. */
async function control(request: IncomingMessage, response: ServerResponse, house: House, method: string, path: string): Promise<void> {
  const send = (status: number, body: unknown): void => void response.writeHead(status, { 'Content-Type': 'application/json' }).end(JSON.stringify(body, null, 2));
  try {
    const raw = await read(request);
    if (method !== 'GET' && !(request.headers['content-type'] ?? '').startsWith('application/json')) {
      return send(415, { error: { message: 'Send JSON with Content-Type: application/json.' } });
    }
    const body: unknown = raw === '' ? {} : JSON.parse(raw);
    if (typeof body !== 'object' || body === null || Array.isArray(body)) return send(400, { error: { message: 'Send a JSON object.' } });
    send(200, await answerControl(house.control, method, path, body as { [name: string]: unknown }));
  } catch (error) {
    if (error instanceof ApiError) return send(error.status, { error: error.body });
    if (error instanceof SyntaxError) return send(400, { error: { message: 'The body is not JSON.' } });
    throw error;
  }
}

async function page(request: IncomingMessage, house: House, method: string, path: string): Promise<PageAnswer> {
  const [first, second, third, fourth] = path.split('/').filter((part) => part !== '');
  const form = method === 'POST' ? new URLSearchParams(await read(request)) : null;
  if (first === 'c' && second === 'pay' && third !== undefined) return form === null ? cardPage(house.world, third) : payPage(house.world, third, form);
  if (first === 'setup' && second !== undefined && third === undefined && method === 'GET') return setupLink(house.world, second);
  if (first === 'setup' && second !== undefined && third !== undefined && fourth === undefined) {
    return form === null ? setupPage(house.world, second, third) : setupSent(house.world, second, third, form);
  }
  if (path === '/') return { status: 200, html: home(house.world) };
  return { status: 404, html: htmlPage('Stand-in for the payment provider: no real money', 'Nothing here', '<h1>Nothing here</h1><p><a href="/">What this is</a></p>') };
}

function home(world: World): string {
  const sessions = world.store.all('session').slice(-20).reverse();
  const rows = sessions.map((session) => `<tr><td>${new Date(session.created * 1000).toISOString().slice(0, 16).replace('T', ' ')}</td><td>$${((session.amount_total ?? 0) / 100).toFixed(2)}</td><td>${escape(session.status ?? '')}</td></tr>`).join('');
  const list = rows === '' ? '<p>No payment has been begun.</p>' : `<table><tr><th>Begun (UTC)</th><th>Amount</th><th>State</th></tr>${rows}</table>`;
  return htmlPage(
    'Stand-in for the payment provider: no real money',
    'Stand-in for the payment provider',
    `<h1>Stand-in for the payment provider</h1><p>It takes the place of the payment provider while developing: cards, payouts and signed messages without money. Its switches are under <code>/_control/</code>.</p><h2>Last payments</h2>${list}`,
  );
}
