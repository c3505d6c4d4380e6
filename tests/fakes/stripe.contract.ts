import { randomUUID } from 'node:crypto';
import Stripe from 'stripe';
import { expect, it } from 'vitest';

/** What the contract is checked on: a client, and a connected account that may receive transfers (or null). */
export interface Party {
  readonly stripe: Stripe;
  readonly destination: string | null;
}

/** The error a call ends with. */
export async function errorOf(call: Promise<unknown>): Promise<Stripe.errors.StripeError> {
  const outcome = await call.then(
    () => null,
    (error: unknown) => error,
  );
  if (!(outcome instanceof Stripe.errors.StripeError)) throw new Error(`Expected the provider to refuse, got ${JSON.stringify(outcome)}`);
  return outcome;
}

/**
 * What the application relies on, said in terms that hold for the stand-in and for the provider's own test mode:
 * nothing here uses a control switch. Card names are the provider's documented test payment methods.
 */
export function contract(party: () => Party): void {
  const pay = (group: string, method = 'pm_card_bypassPending', amount = 20_000): Promise<Stripe.Response<Stripe.PaymentIntent>> =>
    party().stripe.paymentIntents.create({
      amount,
      currency: 'usd',
      payment_method: method,
      confirm: true,
      automatic_payment_methods: { enabled: true, allow_redirects: 'never' },
      transfer_group: group,
      metadata: { payment: group },
      expand: ['latest_charge.balance_transaction'],
    });
  const chargeOf = (intent: Stripe.PaymentIntent): Stripe.Charge => {
    if (typeof intent.latest_charge !== 'object' || intent.latest_charge === null) throw new Error('The charge was not expanded.');
    return intent.latest_charge;
  };

  it('charges a card, with a fee taken off and the charge in its transfer group', async () => {
    const group = randomUUID();
    const intent = await pay(group);
    const charge = chargeOf(intent);
    expect(intent.status).toBe('succeeded');
    expect(charge).toMatchObject({ object: 'charge', amount: 20_000, paid: true, transfer_group: group, metadata: { payment: group } });
    const movement = charge.balance_transaction as Stripe.BalanceTransaction;
    expect(movement).toMatchObject({ object: 'balance_transaction', type: 'charge', amount: 20_000, source: charge.id });
    // 2.9 % + 30¢, the provider's published price for cards in the United States (from memory).
    expect(movement.fee).toBe(610);
    expect(movement.net).toBe(19_390);
  });

  it.each([
    ['pm_card_visa_chargeDeclined', 'card_declined', 'generic_decline'],
    ['pm_card_visa_chargeDeclinedInsufficientFunds', 'card_declined', 'insufficient_funds'],
    ['pm_card_chargeDeclinedExpiredCard', 'expired_card', undefined],
  ])('answers %s as a card error', async (method, code, declineCode) => {
    const error = await errorOf(pay(randomUUID(), method));
    expect(error).toBeInstanceOf(Stripe.errors.StripeCardError);
    expect(error).toMatchObject({ statusCode: 402, code });
    if (declineCode !== undefined) expect(error.decline_code).toBe(declineCode);
    expect(error.payment_intent).toMatchObject({ object: 'payment_intent', status: 'requires_payment_method' });
  });

  it('replays the first answer under an idempotency key and refuses another body', async () => {
    const { stripe } = party();
    const key = randomUUID();
    const body = { amount: 1_500, currency: 'usd', metadata: { key } };
    const first = await stripe.paymentIntents.create(body, { idempotencyKey: key });
    const again = await stripe.paymentIntents.create(body, { idempotencyKey: key });
    expect(again.id).toBe(first.id);
    expect(again.lastResponse.headers['idempotent-replayed']).toBe('true');
    const error = await errorOf(stripe.paymentIntents.create({ ...body, amount: 1_501 }, { idempotencyKey: key }));
    expect(error).toBeInstanceOf(Stripe.errors.StripeIdempotencyError);
    expect(error.statusCode).toBe(400);
  });

  it('replays a refusal too, once the request had begun', async () => {
    const key = randomUUID();
    const body = { amount: 5_000, currency: 'usd', payment_method: 'pm_card_visa_chargeDeclined', confirm: true, automatic_payment_methods: { enabled: true, allow_redirects: 'never' as const } };
    const first = await errorOf(party().stripe.paymentIntents.create(body, { idempotencyKey: key }));
    const again = await errorOf(party().stripe.paymentIntents.create(body, { idempotencyKey: key }));
    expect(again.payment_intent?.id).toBe(first.payment_intent?.id);
  });

  it('refunds in parts, never more than was charged', async () => {
    const { stripe } = party();
    const intent = await pay(randomUUID());
    const part = await stripe.refunds.create({ payment_intent: intent.id, amount: 7_000, metadata: { why: 'rest' }, expand: ['charge', 'balance_transaction'] });
    expect(part).toMatchObject({ object: 'refund', amount: 7_000, status: 'succeeded', metadata: { why: 'rest' } });
    expect(part.charge).toMatchObject({ amount_refunded: 7_000, refunded: false });
    expect(part.balance_transaction).toMatchObject({ type: 'refund', amount: -7_000, fee: 0 });
    const tooMuch = await errorOf(stripe.refunds.create({ payment_intent: intent.id, amount: 13_001 }));
    expect(tooMuch).toMatchObject({ statusCode: 400, type: 'StripeInvalidRequestError', param: 'amount' });
    await stripe.refunds.create({ payment_intent: intent.id });
    const again = await errorOf(stripe.refunds.create({ payment_intent: intent.id }));
    expect(again).toMatchObject({ statusCode: 400, code: 'charge_already_refunded' });
    const listed = await stripe.refunds.list({ payment_intent: intent.id, limit: 10 });
    expect(listed.data.map((each) => each.amount)).toEqual([13_000, 7_000]);
  });

  it('transfers from a charge, at most its amount, and takes a transfer back', async ({ skip }) => {
    const { stripe, destination } = party();
    if (destination === null) return skip('needs a connected account');
    const group = randomUUID();
    const charge = chargeOf(await pay(group, 'pm_card_visa'));
    const terms = { currency: 'usd', destination, source_transaction: charge.id, transfer_group: group };
    const transfer = await stripe.transfers.create({ ...terms, amount: 15_000, metadata: { booking: group } });
    expect(transfer).toMatchObject({ object: 'transfer', amount: 15_000, destination, source_transaction: charge.id, transfer_group: group, reversed: false });
    const tooMuch = await errorOf(stripe.transfers.create({ ...terms, amount: 5_001 }));
    expect(tooMuch).toMatchObject({ statusCode: 400, type: 'StripeInvalidRequestError' });
    const back = await stripe.transfers.createReversal(transfer.id, { amount: 4_000 });
    expect(back).toMatchObject({ object: 'transfer_reversal', amount: 4_000, transfer: transfer.id });
    expect(await stripe.transfers.retrieve(transfer.id)).toMatchObject({ amount_reversed: 4_000, reversed: false });
    expect((await stripe.transfers.list({ transfer_group: group })).data.map((each) => each.id)).toEqual([transfer.id]);
  });

  it('opens a checkout within its times, and expires it', async () => {
    const { stripe } = party();
    const now = Math.floor(Date.now() / 1000);
    const terms: Stripe.Checkout.SessionCreateParams = {
      mode: 'payment',
      success_url: 'https://example.test/paid?session={CHECKOUT_SESSION_ID}',
      cancel_url: 'https://example.test/back',
      client_reference_id: 'payment-1',
      expires_at: now + 3_600,
      line_items: [{ quantity: 1, price_data: { currency: 'usd', unit_amount: 62_500, product_data: { name: 'Held payment' } } }],
      payment_intent_data: { transfer_group: 'booking-1', metadata: { payment: '1' } },
    };
    const session = await stripe.checkout.sessions.create(terms);
    expect(session).toMatchObject({ object: 'checkout.session', mode: 'payment', status: 'open', payment_status: 'unpaid', amount_total: 62_500, client_reference_id: 'payment-1', payment_intent: null });
    expect(session.url).toMatch(/^https?:\/\//);
    expect((await errorOf(stripe.checkout.sessions.create({ ...terms, expires_at: now + 60 }))).param).toBe('expires_at');
    expect((await errorOf(stripe.checkout.sessions.create({ ...terms, expires_at: now + 25 * 3_600 }))).param).toBe('expires_at');
    const expired = await stripe.checkout.sessions.expire(session.id);
    expect(expired).toMatchObject({ status: 'expired', url: null });
    expect((await errorOf(stripe.checkout.sessions.expire(session.id))).statusCode).toBe(400);
  });

  it('refuses what it does not know with its own codes', async () => {
    const { stripe } = party();
    const missing = await errorOf(stripe.charges.retrieve('ch_0000000000000000'));
    expect(missing).toMatchObject({ statusCode: 404, code: 'resource_missing', type: 'StripeInvalidRequestError' });
    const unknown = await errorOf(stripe.paymentIntents.create({ amount: 500, currency: 'usd', colour: 'green' } as Stripe.PaymentIntentCreateParams));
    expect(unknown).toMatchObject({ statusCode: 400, code: 'parameter_unknown', param: 'colour' });
    const empty = await errorOf(stripe.paymentIntents.create({ currency: 'usd' } as Stripe.PaymentIntentCreateParams));
    expect(empty).toMatchObject({ statusCode: 400, code: 'parameter_missing', param: 'amount' });
    const expanded = await errorOf(stripe.balance.retrieve({ expand: ['nothing'] }));
    expect(expanded.statusCode).toBe(400);
  });

  it('makes an account that must be onboarded by its person before it can be paid', async () => {
    const { stripe } = party();
    const account = await stripe.accounts.create({
      country: 'US',
      email: 'sawyer@example.test',
      controller: { fees: { payer: 'application' }, losses: { payments: 'application' }, stripe_dashboard: { type: 'express' } },
      capabilities: { transfers: { requested: true } },
    });
    expect(account).toMatchObject({ object: 'account', details_submitted: false, payouts_enabled: false, capabilities: { transfers: 'inactive' } });
    const link = await stripe.accountLinks.create({ account: account.id, type: 'account_onboarding', return_url: 'https://example.test/done', refresh_url: 'https://example.test/again' });
    expect(link.object).toBe('account_link');
    expect(link.expires_at).toBeGreaterThan(link.created);
    const error = await errorOf(stripe.transfers.create({ amount: 100, currency: 'usd', destination: account.id }));
    expect(error.code).toBe('insufficient_capabilities_for_transfer');
  });

  it('lists events and pages through lists', async () => {
    const { stripe } = party();
    await stripe.paymentIntents.create({ amount: 900, currency: 'usd' });
    await stripe.paymentIntents.create({ amount: 901, currency: 'usd' });
    const first = await stripe.paymentIntents.list({ limit: 1 });
    expect(first).toMatchObject({ object: 'list', has_more: true, url: '/v1/payment_intents' });
    const next = await stripe.paymentIntents.list({ limit: 1, starting_after: first.data[0]?.id ?? '' });
    expect(next.data[0]?.amount).toBe(900);
    const events = await stripe.events.list({ type: 'payment_intent.created', limit: 2 });
    expect(events.data[0]).toMatchObject({ object: 'event', type: 'payment_intent.created', data: { object: { amount: 901 } } });
    const collected: string[] = [];
    for await (const intent of stripe.paymentIntents.list({ limit: 1 })) {
      collected.push(intent.id);
      if (collected.length === 3) break;
    }
    expect(new Set(collected).size).toBe(3);
  });
}
