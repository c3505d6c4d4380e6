import { randomBytes } from 'node:crypto';
import { authorize } from '../authorize.ts';
import { feedSecretHash, sealFeedSecret } from '../feed-secret.ts';
import { inTransaction, lockFor } from '../db.ts';
import { CalendarFeed } from '../models/sawyer.ts';
import { record } from '../transition.ts';
import { baseRoles, type Viewer } from '../viewer.ts';

/** Makes a new secret address for the sawyer's calendar; an address given out before stops answering at once. */
export async function renewCalendarFeed(by: Viewer, at: Date): Promise<void> {
  authorize(by, 'sawyer', 'keepCalendar', baseRoles(by));
  const secret = randomBytes(32).toString('base64url');
  await inTransaction(async () => {
    await lockFor('calendar', by.id);
    await CalendarFeed.upsert({ sawyerId: by.id, secretHash: feedSecretHash(secret), secretSealed: sealFeedSecret(by.id, secret), madeAt: at });
    await record(by, 'renewCalendarFeed', 'account', by.id, at);
  });
}

/** The secret address stops answering; there is none until a new one is made. */
export async function stopCalendarFeed(by: Viewer, at: Date): Promise<void> {
  authorize(by, 'sawyer', 'keepCalendar', baseRoles(by));
  await inTransaction(async () => {
    await lockFor('calendar', by.id);
    const stopped = await CalendarFeed.destroy({ where: { sawyerId: by.id } });
    if (stopped > 0) await record(by, 'stopCalendarFeed', 'account', by.id, at);
  });
}
