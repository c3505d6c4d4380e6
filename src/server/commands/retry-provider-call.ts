import { authorize } from '../authorize.ts';
import { inTransaction } from '../db.ts';
import { conflict, notFound } from '../errors.ts';
import { enqueue } from '../jobs/queue.ts';
import { ProviderCall } from '../models/money.ts';
import { record } from '../transition.ts';
import { baseRoles, type Viewer } from '../viewer.ts';

/** A moderator lets a call that was given up be tried again, under a new key. */
export async function retryProviderCall(by: Viewer, callId: string, at: Date): Promise<void> {
  authorize(by, 'desk', 'retryCall', baseRoles(by));
  await inTransaction(async () => {
    const call = /^[0-9a-f-]{36}$/.test(callId) ? await ProviderCall.findByPk(callId, { lock: true }) : null;
    if (!call) throw notFound('payment task');
    if (call.status !== 'stuck' && call.status !== 'failed') throw conflict('This task is not stuck.');
    await call.update({ status: 'waiting', claimedUntil: null, idempotencyKey: `${call.kind}-${crypto.randomUUID()}` });
    await record(by, 'retryProviderCall', 'booking', call.bookingId, at, { data: { call: call.id, error: call.error } });
    await enqueue('make-provider-call', { callId: call.id });
  });
}
