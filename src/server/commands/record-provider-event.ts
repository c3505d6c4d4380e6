import { inTransaction, rows } from '../db.ts';
import { enqueue } from '../jobs/queue.ts';
import { verifyMessage } from '../services/payments.ts';

/**
 * Takes in a message of the payment provider: verified on its raw body, kept once by its id, and handled by the worker.
 * @throws Refusal `invalid` when the signature does not fit, or its time is too old or in the future
 */
export async function recordProviderEvent(rawBody: string, signature: string, at: Date): Promise<'new' | 'known'> {
  const message = verifyMessage(rawBody, signature, at);
  return inTransaction(async () => {
    const added = await rows(
      `INSERT INTO provider_event (id, type, created_at, received_at, payload, account) VALUES ($1, $2, $3, $4, $5::jsonb, $6) ON CONFLICT (id) DO NOTHING RETURNING id`,
      [message.id, message.type, message.createdAt, at, JSON.stringify(message.payload), message.account],
    );
    if (added.length === 0) return 'known';
    await enqueue('handle-provider-event', { eventId: message.id });
    return 'new';
  });
}
