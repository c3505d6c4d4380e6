import type Stripe from 'stripe';
import { cardFee, move } from './balance.ts';
import type { TestCard } from './cards.ts';
import { ApiError, invalid } from './errors.ts';
import { idOf, type World } from './world.ts';

/** Who pays, as the card page asks it. */
export interface Payer {
  readonly name: string | null;
  readonly email: string | null;
  readonly postalCode: string | null;
}

/** What a new payment is for. */
export interface IntentTerms {
  readonly amount: number;
  readonly description: string | null;
  readonly metadata: Stripe.Metadata;
  readonly transferGroup: string | null;
  readonly statementSuffix: string | null;
  readonly receiptEmail: string | null;
}

/** Makes a payment intent that waits for a card, and says so. */
export function openIntent(world: World, terms: IntentTerms): Stripe.PaymentIntent {
  const id = world.id('pi');
  const made = {
    id,
    object: 'payment_intent',
    allowed_payment_method_types: null,
    amount: terms.amount,
    amount_capturable: 0,
    amount_received: 0,
    application: null,
    application_fee_amount: null,
    automatic_payment_methods: null,
    canceled_at: null,
    cancellation_reason: null,
    capture_method: 'automatic_async',
    client_secret: `${id}_secret_${world.id('s').slice(2)}`,
    confirmation_method: 'automatic',
    created: world.now(),
    currency: 'usd',
    customer: null,
    customer_account: null,
    description: terms.description,
    excluded_payment_method_types: null,
    last_payment_error: null,
    latest_charge: null,
    livemode: false,
    managed_payments: null,
    metadata: terms.metadata,
    next_action: null,
    on_behalf_of: null,
    payment_method: null,
    payment_method_configuration_details: null,
    payment_method_options: {},
    payment_method_types: ['card'],
    payment_record: null,
    processing: null,
    receipt_email: terms.receiptEmail,
    review: null,
    setup_future_usage: null,
    shipping: null,
    source: null,
    statement_descriptor: null,
    statement_descriptor_suffix: terms.statementSuffix,
    status: 'requires_payment_method',
    transfer_data: null,
    transfer_group: terms.transferGroup,
  } satisfies Stripe.PaymentIntent;
  world.store.put('payment_intent', id, made);
  world.emit('payment_intent.created', made);
  return made;
}

/** A charge of the platform before its outcome is known; `charge` of a connected account is made by a transfer. */
export function draftCharge(world: World, id: string, amount: number): Stripe.Charge {
  return {
    id,
    object: 'charge',
    amount,
    amount_captured: 0,
    amount_refunded: 0,
    application: null,
    application_fee: null,
    application_fee_amount: null,
    balance_transaction: null,
    billing_details: { address: null, email: null, name: null, phone: null, tax_id: null },
    calculated_statement_descriptor: null,
    captured: false,
    created: world.now(),
    currency: 'usd',
    customer: null,
    description: null,
    disputed: false,
    failure_balance_transaction: null,
    failure_code: null,
    failure_message: null,
    fraud_details: {},
    livemode: false,
    metadata: {},
    on_behalf_of: null,
    outcome: null,
    paid: false,
    payment_intent: null,
    payment_method: null,
    payment_method_details: null,
    receipt_email: null,
    receipt_number: null,
    receipt_url: null,
    refunded: false,
    review: null,
    shipping: null,
    source: null,
    source_transfer: null,
    statement_descriptor: null,
    statement_descriptor_suffix: null,
    status: 'pending',
    transfer_data: null,
    transfer_group: null,
  };
}

function cardDetails(card: TestCard, amount: number, year: number): Stripe.Charge.PaymentMethodDetails {
  return {
    type: 'card',
    card: {
      amount_authorized: amount,
      authorization_code: null,
      brand: card.brand,
      checks: { address_line1_check: null, address_postal_code_check: 'pass', cvc_check: card.decline?.code === 'incorrect_cvc' ? 'fail' : 'pass' },
      country: 'US',
      electronic_commerce_indicator: null,
      exp_month: 12,
      exp_year: year + 4,
      fingerprint: `stand-in-${card.number.slice(-4)}`,
      funding: 'credit',
      installments: null,
      last4: card.number.slice(-4),
      mandate: null,
      network: card.brand,
      network_transaction_id: null,
      regulated_status: 'unregulated',
      three_d_secure: null,
      transaction_link_id: null,
      wallet: null,
    },
  };
}

/**
 * Charges a card for an intent.
 * @throws ApiError 402 `card_error` when the card declines; the failed charge and the intent's last error stay.
 */
export function payIntent(world: World, intentId: string, card: TestCard, payer: Payer): Stripe.PaymentIntent {
  const intent = world.store.get('payment_intent', intentId);
  if (intent === undefined) throw new Error(`No intent ${intentId}`);
  if (intent.status !== 'requires_payment_method' && intent.status !== 'requires_confirmation') {
    throw invalid(`You cannot confirm this PaymentIntent because it has a status of ${intent.status}.`, 'payment_intent_unexpected_state');
  }
  const year = new Date(world.now() * 1000).getUTCFullYear();
  const method = world.id('pm');
  const base: Stripe.Charge = {
    ...draftCharge(world, world.id('ch'), intent.amount),
    billing_details: {
      address: { city: null, country: 'US', line1: null, line2: null, postal_code: payer.postalCode, state: null },
      email: payer.email,
      name: payer.name,
      phone: null,
      tax_id: null,
    },
    description: intent.description,
    metadata: intent.metadata,
    payment_intent: intent.id,
    payment_method: method,
    payment_method_details: cardDetails(card, intent.amount, year),
    receipt_email: intent.receipt_email,
    statement_descriptor_suffix: intent.statement_descriptor_suffix,
    transfer_group: intent.transfer_group,
  };
  return card.decline === undefined ? succeed(world, intent, base, card) : decline(world, intent, base, card.decline);
}

function decline(world: World, intent: Stripe.PaymentIntent, base: Stripe.Charge, why: NonNullable<TestCard['decline']>): never {
  const charge: Stripe.Charge = {
    ...base,
    status: 'failed',
    failure_code: why.code,
    failure_message: why.message,
    outcome: {
      advice_code: 'try_again_later',
      network_advice_code: null,
      network_decline_code: null,
      network_status: 'declined_by_network',
      reason: why.declineCode ?? why.code,
      risk_level: 'normal',
      seller_message: 'The bank did not return any further details with this decline.',
      type: 'issuer_declined',
    },
  };
  const error = { charge: charge.id, code: why.code, ...(why.declineCode === undefined ? {} : { decline_code: why.declineCode }), message: why.message };
  const after: Stripe.PaymentIntent = {
    ...intent,
    status: 'requires_payment_method',
    latest_charge: charge.id,
    payment_method: null,
    last_payment_error: { ...error, type: 'card_error' } as Stripe.PaymentIntent.LastPaymentError,
  };
  world.store.put('charge', charge.id, charge);
  world.store.put('payment_intent', after.id, after);
  world.emit('charge.failed', charge);
  world.emit('payment_intent.payment_failed', after);
  throw new ApiError(402, { type: 'card_error', ...error, payment_intent: after }, true);
}

function succeed(world: World, intent: Stripe.PaymentIntent, base: Stripe.Charge, card: TestCard): Stripe.PaymentIntent {
  const movement = move(world, '', {
    amount: base.amount,
    fee: cardFee(base.amount),
    type: 'charge',
    category: 'charge',
    source: base.id,
    description: base.description,
    availableOn: world.now() + (card.availableAtOnce === true ? 0 : world.options.settleAfterS),
  });
  const charge: Stripe.Charge = {
    ...base,
    amount_captured: base.amount,
    balance_transaction: movement.id,
    captured: true,
    outcome: {
      advice_code: null,
      network_advice_code: null,
      network_decline_code: null,
      network_status: 'approved_by_network',
      reason: null,
      risk_level: 'normal',
      risk_score: 20,
      seller_message: 'Payment complete.',
      type: 'authorized',
    },
    paid: true,
    status: 'succeeded',
  };
  const after: Stripe.PaymentIntent = { ...intent, amount_received: charge.amount, last_payment_error: null, latest_charge: charge.id, payment_method: charge.payment_method, status: 'succeeded' };
  world.store.put('charge', charge.id, charge);
  world.store.put('payment_intent', after.id, after);
  if (card.refunds !== undefined) world.setNote(`refunds of ${charge.id}`, card.refunds);
  if (card.thenDisputed === true) world.plan('dispute', charge.id, world.options.disputeAfterS);
  world.emit('charge.succeeded', charge);
  world.emit('payment_intent.succeeded', after);
  return after;
}

/** Cancels an intent that has not been paid. */
export function cancelIntent(world: World, intent: Stripe.PaymentIntent, reason: Stripe.PaymentIntent.CancellationReason | null): Stripe.PaymentIntent {
  if (intent.status === 'succeeded' || intent.status === 'canceled') {
    throw invalid(`You cannot cancel this PaymentIntent because it has a status of ${intent.status}.`, 'payment_intent_unexpected_state');
  }
  const after: Stripe.PaymentIntent = { ...intent, status: 'canceled', canceled_at: world.now(), cancellation_reason: reason };
  world.store.put('payment_intent', after.id, after);
  world.emit('payment_intent.canceled', after);
  return after;
}

/** The charge behind an intent or a charge id. */
export function chargeOf(world: World, ids: { charge?: string | undefined; paymentIntent?: string | undefined }): Stripe.Charge | undefined {
  if (ids.charge !== undefined) return world.store.get('charge', ids.charge);
  const intent = ids.paymentIntent === undefined ? undefined : world.store.get('payment_intent', ids.paymentIntent);
  const latest = idOf(intent?.latest_charge);
  return latest === null ? undefined : world.store.get('charge', latest);
}
