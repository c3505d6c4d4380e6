import Stripe from 'stripe';
import { env } from '../env.ts';
import { invalid } from '../errors.ts';

/**
 * The payment provider, by its official SDK. Everything comes and goes in our own terms; no object of the provider's leaves this
 * folder. It differs from production only by PAYMENTS_URL and the keys.
 */
let known: Stripe | undefined;

/** The SDK at the configured address. */
export function provider(): Stripe {
  const at = new URL(env().PAYMENTS_URL);
  return (known ??= new Stripe(env().PAYMENTS_SECRET_KEY, {
    host: at.hostname,
    port: at.port === '' ? (at.protocol === 'https:' ? 443 : 80) : at.port,
    protocol: at.protocol === 'https:' ? 'https' : 'http',
    maxNetworkRetries: 1,
    timeout: 20_000,
    telemetry: false,
  }));
}

/**
 * Why a call did not succeed. `unknown`: it may or may not have been done (line lost, too busy): the same key may be used again.
 * `failed`: the provider failed and keeps that answer under the key. `refused`: it was understood and not done, for `code`.
 */
export class PaymentsProblem extends Error {
  constructor(
    readonly kind: 'unknown' | 'failed' | 'refused',
    message: string,
    readonly code: string | null,
  ) {
    super(message);
    this.name = 'PaymentsProblem';
  }
}

/** Runs a call and says what went wrong in our terms. @throws PaymentsProblem */
export async function asked<T>(call: Promise<T>): Promise<T> {
  try {
    return await call;
  } catch (error) {
    if (!(error instanceof Stripe.errors.StripeError)) throw error;
    const status = error.statusCode ?? 0;
    const kind = status === 0 || status === 409 || status === 429 || status > 500 ? 'unknown' : status === 500 ? 'failed' : 'refused';
    throw new PaymentsProblem(kind, error.message, error.code ?? null);
  }
}

/** The id in a reference that may be an object. */
export const refId = (reference: string | { id: string } | null | undefined): string | null =>
  reference === null || reference === undefined ? null : typeof reference === 'string' ? reference : reference.id;

/** A verified message from the provider. */
export interface ProviderMessage {
  readonly id: string;
  readonly type: string;
  readonly createdAt: Date;
  /** The connected account it concerns, or null for our own. */
  readonly account: string | null;
  readonly payload: unknown;
}

/** How far a message's timestamp may lie in the past and in the future, in seconds. The SDK itself accepts any future. */
const OLDEST_S = 300;
const NEWEST_S = 60;

/**
 * Verifies the raw body of a webhook against its signature.
 * @throws Refusal `invalid` for a wrong signature, an old or a future timestamp, or a body that is no event
 */
export function verifyMessage(rawBody: string, signature: string, at: Date): ProviderMessage {
  const refuse = (message: string): Error => invalid([{ path: 'stripe-signature', message }], message);
  const seconds = Number(/(?:^|,)t=(\d{1,12})(?:,|$)/.exec(signature)?.[1] ?? Number.NaN);
  if (!Number.isFinite(seconds)) throw refuse('The signature cannot be read.');
  if (seconds > at.getTime() / 1000 + NEWEST_S) throw refuse('The message says it was sent in the future.');
  try {
    const event = Stripe.webhooks.constructEvent(rawBody, signature, env().PAYMENTS_WEBHOOK_SECRET, OLDEST_S, undefined, at.getTime());
    return { id: event.id, type: event.type, createdAt: new Date(event.created * 1000), account: event.account ?? null, payload: event };
  } catch (error) {
    if (error instanceof Stripe.errors.StripeSignatureVerificationError || error instanceof SyntaxError) throw refuse('The signature does not fit the message.');
    throw error;
  }
}

/** What a sawyer's payout account can do. */
export interface PayoutAccount {
  readonly id: string;
  /** It may be transferred to and pays out to a bank. */
  readonly ready: boolean;
  readonly detailsSubmitted: boolean;
  /** What the provider still asks for, in its own words. */
  readonly due: readonly string[];
}

const payoutAccount = (account: Stripe.Account): PayoutAccount => ({
  id: account.id,
  ready: account.capabilities?.transfers === 'active' && account.payouts_enabled,
  detailsSubmitted: account.details_submitted,
  due: account.requirements?.currently_due ?? [],
});

/** Opens a payout account for a sawyer; the same one however often it is asked for within a day. */
export async function openPayoutAccount(accountId: string, email: string): Promise<PayoutAccount> {
  const made = await asked(
    provider().accounts.create(
      {
        country: 'US',
        email,
        controller: { fees: { payer: 'application' }, losses: { payments: 'application' }, stripe_dashboard: { type: 'express' } },
        capabilities: { transfers: { requested: true } },
        metadata: { account: accountId },
      },
      { idempotencyKey: `payout-account-${accountId}` },
    ),
  );
  return payoutAccount(made);
}

export const readPayoutAccount = async (id: string): Promise<PayoutAccount> => payoutAccount(await asked(provider().accounts.retrieve(id)));

/** An address where the sawyer gives the provider what it needs. It opens once. */
export const onboardingLink = async (id: string, returnUrl: string, refreshUrl: string): Promise<string> =>
  (await asked(provider().accountLinks.create({ account: id, type: 'account_onboarding', return_url: returnUrl, refresh_url: refreshUrl }))).url;

/** An address of the provider's own page about a payout account. */
export const payoutDashboardLink = async (id: string): Promise<string> => (await asked(provider().accounts.createLoginLink(id))).url;

/** A payout from a sawyer's account to their bank. */
export interface BankPayout {
  readonly id: string;
  readonly amountCents: number;
  readonly status: string;
  readonly arrivesAt: Date;
}

/** The newest payouts of a payout account. */
export async function bankPayouts(id: string): Promise<BankPayout[]> {
  const list = await asked(provider().payouts.list({ limit: 10 }, { stripeAccount: id }));
  return list.data.map((payout) => ({ id: payout.id, amountCents: payout.amount, status: payout.status, arrivesAt: new Date(payout.arrival_date * 1000) }));
}
