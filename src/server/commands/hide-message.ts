import { authorize } from '../authorize.ts';
import { inTransaction } from '../db.ts';
import { conflict, notFound } from '../errors.ts';
import { Message } from '../models/booking.ts';
import { record } from '../transition.ts';
import { baseRoles, type Viewer } from '../viewer.ts';

/** Takes a message out of its conversation, for both. It is kept for the record. @throws Refusal `notFound`, `conflict` when it is gone already */
export async function hideMessage(by: Viewer, input: { readonly message: string; readonly reason: string }, at: Date): Promise<void> {
  authorize(by, 'message', 'hide', baseRoles(by));
  await inTransaction(async () => {
    const message = await Message.findByPk(input.message, { lock: true });
    if (!message) throw notFound('message');
    if (message.hiddenAt !== null) throw conflict('This message is taken out already.');
    await message.update({ hiddenAt: at, hiddenReason: input.reason });
    await record(by, 'hide', 'message', message.id, at, { data: { reason: input.reason } });
  });
}
