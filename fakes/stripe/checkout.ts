import type Stripe from 'stripe';
import { ApiError, invalid } from './errors.ts';
import type { TestCard } from './cards.ts';
import { openIntent, payIntent, type IntentTerms, type Payer } from './payments.ts';
import { idOf, type World } from './world.ts';

export interface LineTerms {
  readonly name: string;
  readonly description: string | null;
  readonly unitAmount: number;
  readonly quantity: number;
}

export interface SessionTerms {
  readonly lines: readonly LineTerms[];
  readonly successUrl: string;
  readonly cancelUrl: string | null;
  readonly clientReferenceId: string | null;
  readonly customerEmail: string | null;
  readonly metadata: Stripe.Metadata;
  readonly expiresAt: number | undefined;
  readonly intent: Omit<IntentTerms, 'amount'>;
  readonly submitType: string | null;
}

const MINUTE = 60;
const DAY = 86_400;
export const LEAST_CHARGE = 50;

/**
 * Opens a hosted checkout. It lives 30 minutes to 24 hours; the sum must reach the provider's least charge.
 * The payment intent is made when the person pays, not before.
 */
export function openSession(world: World, terms: SessionTerms): Stripe.Checkout.Session {
  const now = world.now();
  const expiresAt = terms.expiresAt ?? now + DAY;
  // The provider takes a few seconds of travel into account at both ends.
  if (expiresAt < now + 30 * MINUTE - 5) throw invalid('The `expires_at` timestamp must be at least 30 minutes from Checkout Session creation.', undefined, 'expires_at');
  if (expiresAt > now + DAY + 5) throw invalid('The `expires_at` timestamp must be less than 24 hours from Checkout Session creation.', undefined, 'expires_at');
  const total = terms.lines.reduce((sum, line) => sum + line.unitAmount * line.quantity, 0);
  if (total < LEAST_CHARGE) throw invalid('The Checkout Session’s total amount due must add up to at least $0.50 usd', 'amount_too_small');
  const id = world.id('cs_test');
  const made = {
    id,
    object: 'checkout.session',
    adaptive_pricing: null,
    after_expiration: null,
    allow_promotion_codes: null,
    allowed_payment_method_types: null,
    amount_subtotal: total,
    amount_total: total,
    automatic_tax: { enabled: false, liability: null, provider: null, status: null },
    billing_address_collection: null,
    cancel_url: terms.cancelUrl,
    client_reference_id: terms.clientReferenceId,
    client_secret: null,
    collected_information: null,
    consent: null,
    consent_collection: null,
    created: now,
    currency: 'usd',
    currency_conversion: null,
    custom_fields: [],
    custom_text: { after_submit: null, shipping_address: null, submit: null, terms_of_service_acceptance: null },
    customer: null,
    customer_account: null,
    customer_creation: 'if_required',
    customer_details: null,
    customer_email: terms.customerEmail,
    discounts: [],
    expires_at: expiresAt,
    integration_identifier: null,
    invoice: null,
    invoice_creation: null,
    livemode: false,
    locale: null,
    managed_payments: null,
    metadata: terms.metadata,
    mode: 'payment',
    origin_context: null,
    payment_intent: null,
    payment_link: null,
    payment_method_collection: 'if_required',
    payment_method_configuration_details: null,
    payment_method_options: {},
    payment_method_types: ['card'],
    payment_status: 'unpaid',
    permissions: null,
    recovered_from: null,
    saved_payment_method_options: null,
    setup_intent: null,
    shipping_address_collection: null,
    shipping_cost: null,
    shipping_options: [],
    status: 'open',
    submit_type: terms.submitType,
    subscription: null,
    success_url: terms.successUrl,
    total_details: { amount_discount: 0, amount_shipping: 0, amount_tax: 0 },
    ui_mode: 'hosted_page',
    url: `${world.options.baseUrl()}/c/pay/${id}`,
    wallet_options: null,
  } satisfies Stripe.Checkout.Session;
  world.store.put('session', id, made);
  world.setNote(`intent terms of ${id}`, JSON.stringify(terms.intent));
  for (const line of terms.lines) keepLine(world, id, line);
  return made;
}

function keepLine(world: World, session: string, line: LineTerms): void {
  const id = world.id('li');
  const amount = line.unitAmount * line.quantity;
  const price = {
    id: world.id('price'),
    object: 'price',
    active: false,
    billing_scheme: 'per_unit',
    created: world.now(),
    currency: 'usd',
    custom_unit_amount: null,
    livemode: false,
    lookup_key: null,
    metadata: {},
    nickname: null,
    product: world.id('prod'),
    recurring: null,
    tax_behavior: 'unspecified',
    tiers_mode: null,
    transform_quantity: null,
    type: 'one_time',
    unit_amount: line.unitAmount,
    unit_amount_decimal: null,
  } satisfies Stripe.Price;
  const made = {
    id,
    object: 'item',
    adjustable_quantity: null,
    amount_discount: 0,
    amount_subtotal: amount,
    amount_tax: 0,
    amount_total: amount,
    currency: 'usd',
    description: line.name,
    metadata: {},
    price,
    quantity: line.quantity,
  } satisfies Stripe.LineItem;
  world.store.put('line_item', id, made, session);
}

/** The lines of a session as the provider lists them. */
export const linesOf = (world: World, session: string): Stripe.ApiList<Stripe.LineItem> => ({
  object: 'list',
  data: world.store.all('line_item', session),
  has_more: false,
  url: `/v1/checkout/sessions/${session}/line_items`,
});

/**
 * A person pays on the card page. Each session has one intent; a declined card may be followed by another.
 * @throws ApiError 402 when the card declines, 400 when the session is no longer open.
 */
export function paySession(world: World, id: string, card: TestCard, payer: Payer): Stripe.Checkout.Session {
  const session = world.store.get('session', id);
  if (session === undefined || session.status !== 'open') throw invalid('This Checkout Session is no longer open.');
  const terms = JSON.parse(world.store.get('note', `intent terms of ${id}`)?.value ?? '{}') as Omit<IntentTerms, 'amount'>;
  const known = world.store.get('note', `intent of ${id}`)?.value;
  const intentId = known ?? openIntent(world, { ...terms, amount: session.amount_total ?? 0 }).id;
  if (known === undefined) world.setNote(`intent of ${id}`, intentId);
  const intent = payIntent(world, intentId, card, payer);
  const after: Stripe.Checkout.Session = {
    ...session,
    customer_details: { address: null, business_name: null, email: payer.email, individual_name: null, name: payer.name, phone: null, tax_exempt: 'none', tax_ids: [] },
    payment_intent: intent.id,
    payment_status: 'paid',
    status: 'complete',
    url: null,
  };
  world.store.put('session', id, after);
  world.emit('checkout.session.completed', after);
  return after;
}

/** Ends an open session, by the clock or by request. */
export function expireSession(world: World, session: Stripe.Checkout.Session): Stripe.Checkout.Session {
  if (session.status !== 'open') {
    throw new ApiError(400, { type: 'invalid_request_error', message: `Only Checkout Sessions with a status in ["open"] can be expired. This Checkout Session has a status of \`${session.status}\`.` });
  }
  const after: Stripe.Checkout.Session = { ...session, status: 'expired', url: null };
  world.store.put('session', session.id, after);
  world.emit('checkout.session.expired', after);
  return after;
}

/** Ends the sessions whose time is over. */
export function expireOldSessions(world: World): void {
  for (const session of world.store.all('session')) if (session.status === 'open' && session.expires_at <= world.now()) expireSession(world, session);
}

/** The intent of a session, once a card was tried. */
export const intentOf = (world: World, session: Stripe.Checkout.Session): string | null => idOf(session.payment_intent) ?? world.store.get('note', `intent of ${session.id}`)?.value ?? null;
