import { execute, inTransaction } from '../db.ts';
import { conflict, forbidden, notFound } from '../errors.ts';
import { Account, AccountBlock } from '../models/account.ts';
import { record } from '../transition.ts';
import type { Viewer } from '../viewer.ts';

/**
 * Blocks a person: the two can no longer write to or bid for each other. A booking that they have goes on.
 * @throws Refusal `notFound`, `conflict` for oneself, `forbidden` for a suspended account
 */
export async function blockAccount(by: Viewer, accountId: string, at: Date): Promise<void> {
  if (!by.active) throw forbidden('This account is suspended.');
  if (accountId === by.id) throw conflict('That is you.');
  await inTransaction(async () => {
    const other = await Account.findByPk(accountId);
    if (!other || other.status === 'closed') throw notFound('person');
    const made = await execute('INSERT INTO account_block (blocker_id, blocked_id, created_at) VALUES ($1, $2, $3) ON CONFLICT DO NOTHING', [by.id, accountId, at]);
    if (made > 0) await record(by, 'block', 'account', accountId, at);
  });
}

/** Takes a block back; nothing happens when there is none. */
export async function unblockAccount(by: Viewer, accountId: string, at: Date): Promise<void> {
  await inTransaction(async () => {
    if ((await AccountBlock.destroy({ where: { blockerId: by.id, blockedId: accountId } })) > 0) await record(by, 'unblock', 'account', accountId, at);
  });
}
