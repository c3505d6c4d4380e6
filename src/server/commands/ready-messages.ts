import { MOST_READY_MESSAGES, type ReadyMessageForm } from '~/schemas/ready-message-form.ts';
import { authorize } from '../authorize.ts';
import { inTransaction, lockFor } from '../db.ts';
import { conflict, notFound } from '../errors.ts';
import { ReadyMessage } from '../models/sawyer.ts';
import { baseRoles, type Viewer } from '../viewer.ts';

const uuid = /^[0-9a-f]{8}(-[0-9a-f]{4}){3}-[0-9a-f]{12}$/i;

/**
 * Keeps a message ready for bids, or changes one.
 * @throws Refusal `conflict` when as many are kept as may be, `notFound` for another's
 */
export async function saveReadyMessage(by: Viewer, { id, name, body }: ReadyMessageForm, at: Date): Promise<void> {
  authorize(by, 'sawyer', 'keepProfile', baseRoles(by));
  await inTransaction(async () => {
    if (id !== '') {
      await (await own(by, id)).update({ name, body, updatedAt: at });
      return;
    }
    await lockFor('ready-messages', by.id);
    if ((await ReadyMessage.count({ where: { sawyerId: by.id } })) >= MOST_READY_MESSAGES) throw conflict(`You keep ${MOST_READY_MESSAGES} messages ready. Delete one first.`);
    await ReadyMessage.create({ sawyerId: by.id, name, body, createdAt: at, updatedAt: at });
  });
}

/** Deletes a message that was kept ready. Bids that used it keep their words. @throws Refusal `notFound` for another's */
export async function deleteReadyMessage(by: Viewer, id: string): Promise<void> {
  authorize(by, 'sawyer', 'keepProfile', baseRoles(by));
  await inTransaction(async () => {
    await (await own(by, id)).destroy();
  });
}

async function own(by: Viewer, id: string): Promise<ReadyMessage> {
  const message = uuid.test(id) ? await ReadyMessage.findOne({ where: { id, sawyerId: by.id }, lock: true }) : null;
  if (!message) throw notFound('message');
  return message;
}
