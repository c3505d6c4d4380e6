import Stripe from 'stripe';
import { asked, provider, refId, PaymentsProblem } from './payments.ts';

/** A checkout to open. Everything here comes from stored columns, so that a repeated call has the same body. */
export interface CheckoutWanted {
  readonly checkoutId: string;
  readonly idempotencyKey: string;
  readonly bookingNumber: number;
  readonly amountCents: number;
  readonly what: string;
  readonly email: string;
  readonly transferGroup: string;
  readonly expiresAt: Date;
  readonly paidUrl: string;
  readonly backUrl: string;
}

/** Opens the provider's hosted checkout, or finds again the one opened under the same key. */
export async function openCheckout(wanted: CheckoutWanted): Promise<{ readonly sessionId: string; readonly url: string | null }> {
  const metadata = { checkout: wanted.checkoutId, booking: String(wanted.bookingNumber) };
  const session = await asked(
    provider().checkout.sessions.create(
      {
        mode: 'payment',
        client_reference_id: wanted.checkoutId,
        customer_email: wanted.email,
        success_url: wanted.paidUrl,
        cancel_url: wanted.backUrl,
        expires_at: Math.floor(wanted.expiresAt.getTime() / 1000),
        line_items: [{ quantity: 1, price_data: { currency: 'usd', unit_amount: wanted.amountCents, product_data: { name: wanted.what } } }],
        metadata,
        payment_intent_data: { transfer_group: wanted.transferGroup, metadata, description: wanted.what },
      },
      { idempotencyKey: wanted.idempotencyKey, maxNetworkRetries: 3 },
    ),
  );
  return { sessionId: session.id, url: session.url };
}

/** A checkout as the provider has it now. */
export interface CheckoutSeen {
  readonly sessionId: string;
  /** Our own checkout's id, or null for a session that is not ours. */
  readonly checkoutId: string | null;
  readonly status: 'open' | 'complete' | 'expired';
  /** The money that came in, once paid. */
  readonly paid: ChargeSeen | null;
}

export interface ChargeSeen {
  readonly chargeId: string;
  readonly intentId: string;
  readonly amountCents: number;
  readonly providerFeeCents: number;
}

const PAID: string[] = ['payment_intent.latest_charge.balance_transaction'];

function chargeSeen(charge: Stripe.Charge): ChargeSeen | null {
  const movement = charge.balance_transaction;
  const intentId = refId(charge.payment_intent);
  if (charge.status !== 'succeeded' || intentId === null || movement === null || typeof movement === 'string') return null;
  return { chargeId: charge.id, intentId, amountCents: charge.amount, providerFeeCents: movement.fee };
}

function checkoutSeen(session: Stripe.Checkout.Session): CheckoutSeen {
  const intent = typeof session.payment_intent === 'object' ? session.payment_intent : null;
  const charge = intent !== null && typeof intent.latest_charge === 'object' ? intent.latest_charge : null;
  const paid = session.payment_status === 'paid' && charge !== null ? chargeSeen(charge) : null;
  const status = session.status === 'complete' ? 'complete' : session.status === 'expired' ? 'expired' : 'open';
  return { sessionId: session.id, checkoutId: session.client_reference_id, status, paid };
}

/** Reads a checkout anew, with the charge and the provider's fee on it. */
export const readCheckout = async (sessionId: string): Promise<CheckoutSeen> => checkoutSeen(await asked(provider().checkout.sessions.retrieve(sessionId, { expand: PAID })));

/** The checkout that a charge was paid in. */
export async function checkoutOfCharge(chargeId: string): Promise<CheckoutSeen | null> {
  const charge = await asked(provider().charges.retrieve(chargeId));
  const intent = refId(charge.payment_intent);
  if (intent === null) return null;
  const [session] = (await asked(provider().checkout.sessions.list({ payment_intent: intent, limit: 1 }))).data;
  return session === undefined ? null : readCheckout(session.id);
}

/** Ends an open checkout. Answers what it is now: a payment may have come first. */
export async function expireCheckout(sessionId: string): Promise<CheckoutSeen> {
  try {
    await asked(provider().checkout.sessions.expire(sessionId));
  } catch (error) {
    if (!(error instanceof PaymentsProblem) || error.kind !== 'refused') throw error;
  }
  return readCheckout(sessionId);
}

/** A movement that a call of ours made. `movedCents` is 0 while the provider still waits for money to make it with. */
export interface Moved {
  readonly providerId: string;
  readonly status: 'moved' | 'waiting' | 'came back';
}

export interface TransferWanted {
  readonly callId: string;
  readonly idempotencyKey: string;
  readonly amountCents: number;
  readonly destination: string;
  readonly sourceCharge: string;
  readonly transferGroup: string;
  readonly bookingNumber: number;
}

export async function makeTransfer(wanted: TransferWanted): Promise<Moved> {
  const made = await asked(
    provider().transfers.create(
      {
        amount: wanted.amountCents,
        currency: 'usd',
        destination: wanted.destination,
        source_transaction: wanted.sourceCharge,
        transfer_group: wanted.transferGroup,
        metadata: { call: wanted.callId, booking: String(wanted.bookingNumber) },
      },
      { idempotencyKey: wanted.idempotencyKey },
    ),
  );
  return { providerId: made.id, status: 'moved' };
}

/** The transfer that a call has made already, if it has. */
export async function findTransfer(transferGroup: string, callId: string): Promise<Moved | null> {
  for (const transfer of await asked(provider().transfers.list({ transfer_group: transferGroup, limit: 100 }).autoPagingToArray({ limit: 1_000 }))) {
    if (transfer.metadata['call'] === callId) return { providerId: transfer.id, status: 'moved' };
  }
  return null;
}

export interface ReversalWanted {
  readonly callId: string;
  readonly idempotencyKey: string;
  readonly amountCents: number;
  readonly transfer: string;
}

/** Takes a transfer back out of the sawyer's balance at the provider, which must cover it. */
export async function makeReversal(wanted: ReversalWanted): Promise<Moved> {
  const made = await asked(provider().transfers.createReversal(wanted.transfer, { amount: wanted.amountCents, metadata: { call: wanted.callId } }, { idempotencyKey: wanted.idempotencyKey }));
  return { providerId: made.id, status: 'moved' };
}

/** The reversal that a call has made already, if it has. */
export async function findReversal(transfer: string, callId: string): Promise<Moved | null> {
  for (const reversal of await asked(provider().transfers.listReversals(transfer, { limit: 100 }).autoPagingToArray({ limit: 1_000 }))) {
    if (reversal.metadata?.['call'] === callId) return { providerId: reversal.id, status: 'moved' };
  }
  return null;
}

export interface RefundWanted {
  readonly callId: string;
  readonly idempotencyKey: string;
  readonly amountCents: number;
  readonly charge: string;
  readonly bookingNumber: number;
}

const refundMoved = (refund: Stripe.Refund): Moved => ({
  providerId: refund.id,
  status: refund.status === 'failed' || refund.status === 'canceled' ? 'came back' : refund.balance_transaction === null ? 'waiting' : 'moved',
});

export async function makeRefund(wanted: RefundWanted): Promise<Moved> {
  const made = await asked(
    provider().refunds.create(
      { charge: wanted.charge, amount: wanted.amountCents, metadata: { call: wanted.callId, booking: String(wanted.bookingNumber) } },
      { idempotencyKey: wanted.idempotencyKey },
    ),
  );
  return refundMoved(made);
}

/** The refund that a call has made already and that has not come back. */
export async function findRefund(charge: string, callId: string): Promise<Moved | null> {
  for (const refund of await asked(provider().refunds.list({ charge, limit: 100 }).autoPagingToArray({ limit: 1_000 }))) {
    const moved = refundMoved(refund);
    if (refund.metadata?.['call'] === callId && moved.status !== 'came back') return moved;
  }
  return null;
}

export const readRefund = async (id: string): Promise<Moved> => refundMoved(await asked(provider().refunds.retrieve(id)));

/** Our own call that a refund or a transfer names, or null when it names none. */
export async function callNamedBy(kind: 'refund' | 'transfer', id: string): Promise<string | null> {
  const metadata = kind === 'refund' ? (await asked(provider().refunds.retrieve(id))).metadata : (await asked(provider().transfers.retrieve(id))).metadata;
  const call = metadata?.['call'];
  return call !== undefined && /^[0-9a-f-]{36}$/.test(call) ? call : null;
}

export interface DisputeSeen {
  readonly id: string;
  readonly chargeId: string;
  readonly amountCents: number;
  readonly providerFeeCents: number;
  readonly status: 'open' | 'won' | 'lost';
}

export async function readDispute(id: string): Promise<DisputeSeen> {
  const dispute = await asked(provider().disputes.retrieve(id));
  const status = dispute.status === 'won' ? 'won' : dispute.status === 'lost' ? 'lost' : 'open';
  const fee = dispute.balance_transactions.reduce((sum, movement) => sum + movement.fee, 0);
  return { id: dispute.id, chargeId: refId(dispute.charge) ?? '', amountCents: dispute.amount, providerFeeCents: fee, status };
}

/** One line of the provider's own books. */
export interface Movement {
  readonly id: string;
  readonly type: string;
  readonly category: string;
  readonly sourceId: string;
  readonly amountCents: number;
  readonly feeCents: number;
  readonly netCents: number;
  readonly createdAt: Date;
}

/** The provider's books since an instant, oldest first. */
export async function movementsSince(since: Date): Promise<Movement[]> {
  const list = provider().balanceTransactions.list({ created: { gte: Math.floor(since.getTime() / 1000) }, limit: 100 });
  const found: Stripe.BalanceTransaction[] = [];
  await asked(list.autoPagingEach((each) => void found.push(each)));
  return found.reverse().map((each) => ({
    id: each.id, type: each.type, category: each.reporting_category, sourceId: refId(each.source) ?? '',
    amountCents: each.amount, feeCents: each.fee, netCents: each.net, createdAt: new Date(each.created * 1000),
  }));
}

/** What the provider says we have with it, available and on its way. */
export async function providerBalance(): Promise<number> {
  const balance = await asked(provider().balance.retrieve());
  return [...balance.available, ...balance.pending].filter(({ currency }) => currency === 'usd').reduce((sum, { amount }) => sum + amount, 0);
}
