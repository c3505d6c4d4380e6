import type { Portion } from '~/domain/trade/allocation.ts';
import { enqueue } from '../jobs/queue.ts';
import { ProviderCall, type HeldPayment } from '../models/money.ts';

/**
 * Writes calls to the payment provider into the outbox, in the caller's transaction, and asks the worker to make them after the
 * commit. Each has its own stored idempotency key, so that a crash at any point resumes without paying twice.
 */
export async function queueProviderCalls(kind: 'transfer' | 'refund', payment: HeldPayment, portions: readonly Portion[], at: Date): Promise<void> {
  for (const { chargeId, amountCents } of portions) {
    const call = await ProviderCall.create({
      kind, bookingId: payment.bookingId, paymentId: payment.id, chargeId, idempotencyKey: `${kind}-${crypto.randomUUID()}`, request: { amountCents }, createdAt: at,
    });
    await enqueue('make-provider-call', { callId: call.id });
  }
}

/** Takes a made transfer back, once. */
export async function queueReversal(transfer: ProviderCall, amountCents: number, at: Date): Promise<void> {
  const call = await ProviderCall.create({
    kind: 'reversal', bookingId: transfer.bookingId, paymentId: transfer.paymentId, chargeId: transfer.chargeId, reverses: transfer.id,
    idempotencyKey: `reversal-${crypto.randomUUID()}`, request: { amountCents }, createdAt: at,
  });
  await enqueue('make-provider-call', { callId: call.id });
}

/** Ends a checkout that nobody should pay any more. */
export async function queueCheckoutEnd(payment: HeldPayment, sessionId: string, at: Date): Promise<void> {
  const call = await ProviderCall.create({
    kind: 'expire-checkout', bookingId: payment.bookingId, paymentId: payment.id, idempotencyKey: `expire-${crypto.randomUUID()}`, request: { sessionId }, createdAt: at,
  });
  await enqueue('make-provider-call', { callId: call.id });
}
