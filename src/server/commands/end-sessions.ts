import { Op } from 'sequelize';
import { inTransaction } from '../db.ts';
import { notFound } from '../errors.ts';
import { Session } from '../models/account.ts';
import { record } from '../transition.ts';
import type { Viewer } from '../viewer.ts';

/** Ends one session of one's own. @throws Refusal `notFound` when there is none of that id (any more). */
export async function endOneSession(by: Viewer, sessionId: string, at: Date): Promise<void> {
  await inTransaction(async () => {
    if ((await Session.destroy({ where: { accountId: by.id, publicId: sessionId } })) === 0) throw notFound('session');
    await record(by, 'endSession', 'account', by.id, at);
  });
}

/** Ends every session but the one that asks. @returns how many */
export async function endOtherSessions(by: Viewer, at: Date): Promise<number> {
  return inTransaction(async () => {
    const count = await Session.destroy({ where: { accountId: by.id, publicId: { [Op.ne]: by.sessionId } } });
    await record(by, 'endOtherSessions', 'account', by.id, at, { data: { count } });
    return count;
  });
}

/** Signs out: ends the session that asks. */
export async function signOut(by: Viewer, at: Date): Promise<void> {
  await inTransaction(async () => {
    await Session.destroy({ where: { accountId: by.id, publicId: by.sessionId } });
    await record(by, 'signOut', 'account', by.id, at);
  });
}
