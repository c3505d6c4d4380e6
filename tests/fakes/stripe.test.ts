import { appendFileSync, mkdtempSync, rmSync } from 'node:fs';
import { createServer, type Server } from 'node:http';
import type { AddressInfo } from 'node:net';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import Stripe from 'stripe';
import { afterAll, afterEach, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import { startFakeStripe, type FakeStripe, type FakeStripeOptions } from '../../fakes/stripe/server.ts';
import { contract, errorOf } from './stripe.contract.ts';

const KEY = 'sk_test_contract';
const SECRET = 'whsec_contract';

function client(address: string, key = KEY): Stripe {
  const at = new URL(address);
  return new Stripe(key, {
    host: at.hostname,
    port: at.port === '' ? (at.protocol === 'https:' ? 443 : 80) : at.port,
    protocol: at.protocol === 'https:' ? 'https' : 'http',
    maxNetworkRetries: 0,
    telemetry: false,
  });
}

/** Every event that reached the application's address, verified with the SDK; answers the statuses in `script` first. */
interface Listener {
  readonly url: string;
  readonly got: Stripe.Event[];
  readonly script: number[];
  readonly server: Server;
}

async function listen(): Promise<Listener> {
  const got: Stripe.Event[] = [];
  const script: number[] = [];
  const server = createServer((request, response) => {
    const parts: Buffer[] = [];
    request.on('data', (part: Buffer) => parts.push(part));
    request.on('end', () => {
      const status = script.shift() ?? 200;
      if (status === 200) got.push(Stripe.webhooks.constructEvent(Buffer.concat(parts), request.headers['stripe-signature'] ?? '', SECRET));
      response.writeHead(status).end();
    });
  });
  await new Promise<void>((done) => server.listen(0, '127.0.0.1', done));
  return { url: `http://127.0.0.1:${(server.address() as AddressInfo).port}/hooks`, got, script, server };
}

const stop = (server: Server): Promise<void> =>
  new Promise((done) => {
    server.closeAllConnections();
    server.close(() => done());
  });

const live = process.env['STRIPE_CONTRACT_KEY'];

// The same checks run against the provider's test mode when STRIPE_CONTRACT_KEY=sk_test_… is set (with
// STRIPE_CONTRACT_ADDRESS for another address and STRIPE_CONTRACT_DESTINATION=acct_… for an onboarded account).
describe(`the contract, on ${live === undefined ? 'the stand-in' : 'the provider'}`, () => {
  let fake: FakeStripe | null = null;
  let stripe: Stripe;
  let destination: string | null = null;
  beforeAll(async () => {
    if (live !== undefined) {
      stripe = client(process.env['STRIPE_CONTRACT_ADDRESS'] ?? 'https://api.stripe.com', live);
      destination = process.env['STRIPE_CONTRACT_DESTINATION'] ?? null;
      return;
    }
    fake = await startFakeStripe({ key: KEY });
    stripe = client(fake.url);
    destination = (await stripe.accounts.create({ type: 'express', capabilities: { transfers: { requested: true } } })).id;
    fake.control.onboard(destination);
  });
  afterAll(() => fake?.close());
  contract(() => ({ stripe, destination }));
});

describe('the stand-in', () => {
  let listener: Listener;
  let fake: FakeStripe;
  let stripe: Stripe;
  const start = async (options: Partial<FakeStripeOptions> = {}): Promise<void> => {
    fake = await startFakeStripe({ key: KEY, webhookUrl: listener.url, webhookSecret: SECRET, webhooks: { retryBaseMs: 20 }, disputeAfterS: 0, ...options });
    stripe = client(fake.url);
  };
  beforeEach(async () => {
    listener = await listen();
    await start();
  });
  afterEach(async () => {
    await fake.close();
    await stop(listener.server);
  });

  const begin = (amount = 40_000): Promise<Stripe.Checkout.Session> =>
    stripe.checkout.sessions.create({
      mode: 'payment',
      success_url: 'http://127.0.0.1:1/paid?session={CHECKOUT_SESSION_ID}',
      cancel_url: 'http://127.0.0.1:1/back',
      line_items: [{ quantity: 1, price_data: { currency: 'usd', unit_amount: amount, product_data: { name: 'Held payment <1>' } } }],
      payment_intent_data: { transfer_group: 'booking-1', metadata: { booking: 'booking-1' } },
    });
  const charged = async (card = '4242424242424242', amount = 40_000): Promise<Stripe.Charge> => {
    const session = await begin(amount);
    fake.control.pay(session.id, card);
    const paid = await stripe.checkout.sessions.retrieve(session.id, { expand: ['payment_intent.latest_charge'] });
    return (paid.payment_intent as Stripe.PaymentIntent).latest_charge as Stripe.Charge;
  };
  const form = (fields: Record<string, string>): RequestInit => ({ method: 'POST', body: new URLSearchParams(fields), redirect: 'manual' });
  const CARD = { email: 'a@example.test', cardNumber: '4242 4242 4242 4242', cardExpiry: '12 / 49', cardCvc: '123', billingName: 'A Person', billingPostalCode: '54665' };
  const onboarded = async (): Promise<string> => {
    const account = await stripe.accounts.create({ type: 'express', capabilities: { transfers: { requested: true } } });
    fake.control.onboard(account.id);
    return account.id;
  };

  it('takes a payment on its card page and tells of it in signed events', async () => {
    const session = await begin();
    const shown = await fetch(session.url ?? '');
    const html = await shown.text();
    expect(html).toContain('Stand-in card page: no real money');
    expect(html).toContain('$400.00');
    expect(html).toContain('Held payment &lt;1&gt;');
    expect(html).toContain('href="http://127.0.0.1:1/back"');
    expect(shown.headers.get('set-cookie')).toBeNull();

    const declined = await fetch(session.url ?? '', form({ ...CARD, cardNumber: '4000000000000002' }));
    expect(declined.status).toBe(402);
    const again = await declined.text();
    expect(again).toContain('role="alert"');
    expect(again).toContain('Your card was declined.');
    expect(again).toContain('value="A Person"');

    const paid = await fetch(session.url ?? '', form(CARD));
    expect(paid.status).toBe(303);
    expect(paid.headers.get('location')).toBe(`http://127.0.0.1:1/paid?session=${session.id}`);
    const twice = await fetch(session.url ?? '', form(CARD));
    expect(await twice.text()).toContain('Already paid');
    expect(fake.control.objects('charge').map((each) => each.status)).toEqual(['failed', 'succeeded']);

    expect(await fake.control.quiet()).toBe(true);
    const types = listener.got.map((event) => event.type);
    expect(types).toEqual(expect.arrayContaining(['charge.failed', 'payment_intent.payment_failed', 'charge.succeeded', 'payment_intent.succeeded', 'checkout.session.completed']));
    const completed = listener.got.find((event) => event.type === 'checkout.session.completed');
    expect(completed?.data.object).toMatchObject({ id: session.id, payment_status: 'paid', status: 'complete', metadata: {} });
  });

  it.each([
    [{ cardNumber: '4242424242424241' }, 'Your card number is incorrect.'],
    [{ cardExpiry: '01/20' }, 'in the past'],
    [{ cardExpiry: 'soon' }, 'incomplete'],
    [{ cardCvc: '1' }, 'security code is incomplete'],
  ])('explains %j on the card page', async (wrong, words) => {
    const session = await begin();
    const answer = await fetch(session.url ?? '', form({ ...CARD, ...wrong }));
    expect(answer.status).toBe(402);
    expect((await answer.text()).replaceAll('&#39;', "'")).toContain(words);
    expect(fake.control.objects('charge')).toEqual([]);
  });

  it('lets a session lapse by its clock', async () => {
    const session = await begin();
    fake.control.advance(86_401);
    expect((await fetch(`${fake.url}/c/pay/${session.id}`)).status).toBe(410);
    expect((await stripe.checkout.sessions.retrieve(session.id)).status).toBe('expired');
    await fake.control.quiet();
    expect(listener.got.map((event) => event.type)).toEqual(['checkout.session.expired']);
  });

  it('onboards a sawyer through a link that opens once', async () => {
    const account = await stripe.accounts.create({ type: 'express', capabilities: { transfers: { requested: true } } });
    const link = await stripe.accountLinks.create({ account: account.id, type: 'account_onboarding', return_url: 'http://127.0.0.1:1/done', refresh_url: 'http://127.0.0.1:1/again' });
    const opened = await fetch(link.url, { redirect: 'manual' });
    const page = `${fake.url}${opened.headers.get('location')}`;
    expect(await (await fetch(page)).text()).toContain('Set up payouts');
    expect((await fetch(link.url, { redirect: 'manual' })).headers.get('location')).toBe('http://127.0.0.1:1/again');
    const wrong = await fetch(page, form({ name: 'A Sawyer', born: '01/01/1980', ssn: '0000', routing: '11', account: '000123456789', verified: 'yes' }));
    expect(wrong.status).toBe(422);
    const sent = await fetch(page, form({ name: 'A Sawyer', born: '01/01/1980', ssn: '0000', routing: '110000000', account: '000123456789', verified: 'yes' }));
    expect(sent.headers.get('location')).toBe('http://127.0.0.1:1/done');
    expect(await stripe.accounts.retrieve(account.id)).toMatchObject({ details_submitted: true, payouts_enabled: true, capabilities: { transfers: 'active' } });
    await fake.control.quiet();
    expect(listener.got.at(-1)).toMatchObject({ type: 'account.updated', account: account.id, data: { object: { payouts_enabled: true }, previous_attributes: { payouts_enabled: false } } });
    const late = await stripe.accountLinks.create({ account: account.id, type: 'account_onboarding', return_url: 'http://127.0.0.1:1/done', refresh_url: 'http://127.0.0.1:1/again' });
    fake.control.advance(301);
    expect((await fetch(late.url, { redirect: 'manual' })).headers.get('location')).toBe('http://127.0.0.1:1/again');
  });

  it('keeps pending money out of transfers without a source, and pays the sawyer', async () => {
    const destination = await onboarded();
    const charge = await charged();
    expect((await errorOf(stripe.transfers.create({ amount: 1_000, currency: 'usd', destination }))).code).toBe('balance_insufficient');
    await stripe.transfers.create({ amount: 30_000, currency: 'usd', destination, source_transaction: charge.id });
    expect(await stripe.balance.retrieve({}, { stripeAccount: destination })).toMatchObject({ available: [{ amount: 0 }], pending: [{ amount: 30_000 }] });
    fake.control.advance(2 * 86_400 + 1);
    expect(await stripe.payouts.list({}, { stripeAccount: destination })).toMatchObject({ data: [{ amount: 30_000, status: 'pending', automatic: true }] });
    fake.control.advance(2 * 86_400 + 1);
    expect(await stripe.payouts.list({}, { stripeAccount: destination })).toMatchObject({ data: [{ status: 'paid' }] });
    expect(fake.control.books().groups['booking-1']).toEqual({ charged: 40_000, transferred: 30_000, refunded: 0, reversed: 0, disputedAway: 0, fees: 1_190 });
    expect(fake.control.books().platform.net).toBe(40_000 - 1_190 - 30_000);
  });

  it('lets a refund wait for money, and lets one come back', async () => {
    const destination = await onboarded();
    const charge = await charged('4000000000000077');
    await stripe.transfers.create({ amount: 38_000, currency: 'usd', destination, source_transaction: charge.id });
    const waiting = await stripe.refunds.create({ charge: charge.id, amount: 2_000 });
    expect(waiting).toMatchObject({ status: 'pending', pending_reason: 'insufficient_funds', balance_transaction: null });
    await charged('4000000000000077', 5_000);
    fake.control.advance(1);
    expect((await stripe.refunds.retrieve(waiting.id)).status).toBe('succeeded');
    fake.control.failRefund(waiting.id);
    expect(await stripe.refunds.retrieve(waiting.id)).toMatchObject({ status: 'failed', failure_reason: 'unknown' });
    expect((await stripe.charges.retrieve(charge.id)).amount_refunded).toBe(0);
    await fake.control.quiet();
    expect(listener.got.map((event) => event.type)).toContain('refund.failed');
  });

  it('opens a dispute for the card that disputes, and closes it either way', async () => {
    const charge = await charged('4000000000000259');
    fake.control.advance(1);
    const [dispute] = (await stripe.disputes.list({ charge: charge.id })).data;
    expect(dispute).toMatchObject({ amount: 40_000, status: 'needs_response', balance_transactions: [{ amount: -40_000, fee: 1_500, reporting_category: 'dispute' }] });
    expect((await errorOf(stripe.refunds.create({ charge: charge.id }))).code).toBe('charge_disputed');
    const won = await stripe.disputes.update(dispute?.id ?? '', { evidence: { uncategorized_text: 'winning_evidence' }, submit: true });
    expect(won.status).toBe('won');
    expect(fake.control.books().groups['booking-1']).toMatchObject({ disputedAway: 0, fees: 1_190 + 1_500 });
    const other = await charged();
    const lost = fake.control.closeDispute(fake.control.openDispute(other.id).id, 'lost');
    expect(lost.status).toBe('lost');
    await fake.control.quiet();
    const types = listener.got.map((event) => event.type);
    expect(types.filter((type) => type === 'charge.dispute.closed')).toHaveLength(2);
    expect(types.filter((type) => type === 'charge.dispute.funds_reinstated')).toHaveLength(1);
  });

  it('sends again until it is answered, and can lose, double and shuffle events', async () => {
    listener.script.push(500, 503);
    await stripe.paymentIntents.create({ amount: 100, currency: 'usd' });
    expect(await fake.control.quiet()).toBe(true);
    expect(listener.got).toHaveLength(1);
    expect(fake.control.objects('delivery')).toMatchObject([{ attempts: 3, state: 'done', lastStatus: 200 }]);

    fake.control.webhooks({ dropNext: 1 });
    const lost = await stripe.paymentIntents.create({ amount: 101, currency: 'usd' });
    await fake.control.quiet();
    expect(listener.got).toHaveLength(1);
    expect((await stripe.events.list({ delivery_success: false })).data).toMatchObject([{ data: { object: { id: lost.id } } }]);
    expect(fake.control.resend()).toBe(1);
    await fake.control.quiet();
    expect(listener.got).toHaveLength(2);

    fake.control.webhooks({ duplicates: 1 });
    await stripe.paymentIntents.create({ amount: 102, currency: 'usd' });
    await fake.control.quiet();
    expect(listener.got.slice(2).map((event) => event.id)).toEqual([listener.got[2]?.id, listener.got[2]?.id]);

    fake.control.webhooks({ duplicates: 0, shuffleMs: 80 });
    for (let amount = 200; amount < 220; amount += 1) await stripe.paymentIntents.create({ amount, currency: 'usd' });
    await fake.control.quiet();
    const order = listener.got.slice(4).map((event) => (event.data.object as Stripe.PaymentIntent).amount);
    expect(order).not.toEqual([...order].sort((a, b) => a - b));
    expect([...order].sort((a, b) => a - b)).toEqual(Array.from({ length: 20 }, (_, index) => 200 + index));
  });

  it('can lose its answer after the work, and replays it under the same key', async () => {
    fake.control.fault({ on: 'POST /v1/payment_intents', times: 2, effect: 'drop' });
    const body = { amount: 700, currency: 'usd' };
    const lost = await errorOf(stripe.paymentIntents.create(body, { idempotencyKey: 'once' }));
    expect(lost).toBeInstanceOf(Stripe.errors.StripeConnectionError);
    fake.control.clearFaults();
    const again = await stripe.paymentIntents.create(body, { idempotencyKey: 'once' });
    expect(fake.control.objects('payment_intent').map((each) => each.id)).toEqual([again.id]);
  });

  it.each([
    [429, 'StripeRateLimitError'],
    [500, 'StripeAPIError'],
    [400, 'StripeInvalidRequestError'],
  ])('refuses with %i on demand and does nothing', async (status, type) => {
    fake.control.fault({ on: 'POST /v1/payment_intents', times: 1, effect: 'refuse', status });
    const error = await errorOf(stripe.paymentIntents.create({ amount: 700, currency: 'usd' }, { idempotencyKey: 'k' }));
    expect(error).toMatchObject({ statusCode: status, type });
    expect(fake.control.objects('payment_intent')).toEqual([]);
    const again = await stripe.paymentIntents.create({ amount: 700, currency: 'usd' }, { idempotencyKey: 'k' }).catch((late: unknown) => late);
    // A request that was turned away at the door leaves nothing under its key; one that had begun is replayed.
    expect(again).toMatchObject(status === 429 ? { object: 'payment_intent' } : { statusCode: status });
  });

  it('answers 409 while the same key is being worked on', async () => {
    fake.control.fault({ on: 'POST /v1/payment_intents', times: 1, effect: 'delay', delayMs: 150 });
    const body = { amount: 700, currency: 'usd' };
    const slow = stripe.paymentIntents.create(body, { idempotencyKey: 'busy' });
    await new Promise((done) => setTimeout(done, 50));
    expect((await errorOf(stripe.paymentIntents.create(body, { idempotencyKey: 'busy' }))).statusCode).toBe(409);
    expect((await slow).amount).toBe(700);
  });

  it('knows its key', async () => {
    const error = await errorOf(client(fake.url, 'sk_test_wrong_key').balance.retrieve());
    expect(error).toBeInstanceOf(Stripe.errors.StripeAuthenticationError);
    expect(error.message).not.toContain('sk_test_wrong_key');
  });

  it('has its switches over HTTP, for JSON only', async () => {
    const session = await begin();
    const press = (path: string, body: unknown, type = 'application/json'): Promise<Response> => fetch(`${fake.url}/_control/${path}`, { method: 'POST', headers: { 'Content-Type': type }, body: JSON.stringify(body) });
    expect((await press('pay', { session: session.id }, 'text/plain')).status).toBe(415);
    expect((await press('pay', { session: session.id, card: '4000000000000002' })).status).toBe(402);
    expect(await (await press('pay', { session: session.id })).json()).toMatchObject({ payment_status: 'paid' });
    expect((await press('faults', { on: '*', effect: 'explode' })).status).toBe(400);
    expect((await press('nothing', {})).status).toBe(404);
    const objects = (await (await fetch(`${fake.url}/_control/objects`)).json()) as { charge: unknown[] };
    expect(objects.charge).toHaveLength(2);
    expect((await press('reset', {})).status).toBe(200);
    expect(fake.control.objects('charge')).toEqual([]);
  });

  it('keeps its books over a restart, a torn last line left out, and sends what was waiting', async () => {
    const folder = mkdtempSync(join(tmpdir(), 'stand-in-'));
    try {
      await fake.close();
      await start({ data: folder });
      fake.control.webhooks({ paused: true });
      const intent = await stripe.paymentIntents.create({ amount: 5_000, currency: 'usd', payment_method: 'pm_card_visa', confirm: true }, { idempotencyKey: 'kept' });
      await fake.close();
      expect(listener.got).toEqual([]);
      appendFileSync(join(folder, 'books.jsonl'), '[["charge","ch_torn","",{"id":"ch_to');
      await start({ data: folder });
      expect((await stripe.paymentIntents.retrieve(intent.id)).status).toBe('succeeded');
      const replayed = await stripe.paymentIntents.create({ amount: 5_000, currency: 'usd', payment_method: 'pm_card_visa', confirm: true }, { idempotencyKey: 'kept' });
      expect(replayed.id).toBe(intent.id);
      expect(fake.control.books().platform).toMatchObject({ gross: 5_000, fees: 175, net: 4_825 });
      expect(await fake.control.quiet()).toBe(true);
      expect(listener.got.map((event) => event.type).sort()).toEqual(['charge.succeeded', 'payment_intent.created', 'payment_intent.succeeded']);
    } finally {
      rmSync(folder, { recursive: true, force: true });
    }
  });
});
