import { accountStates } from '~/domain/states/account.ts';
import { accountRestored, accountSuspended } from '~/emails/account-letters.ts';
import { authorize } from '../authorize.ts';
import { inTransaction } from '../db.ts';
import { conflict, notFound } from '../errors.ts';
import { enqueue } from '../jobs/queue.ts';
import { Account } from '../models/account.ts';
import { transition } from '../transition.ts';
import { baseRoles, type Viewer } from '../viewer.ts';

async function lockAccount(id: string): Promise<Account> {
  const account = await Account.findByPk(id, { lock: true });
  if (!account) throw notFound('account');
  return account;
}

/**
 * Suspends an account: from now on it reads its own things and finishes what has begun. What it offers and its bookings before
 * sawing are wound up by a job, each in a transaction of its own: this one holds only the account's row, so it waits for deeds under
 * way and none waits for it with a listing locked.
 * @throws Refusal `conflict` for oneself, and when it is not active (any more)
 */
export async function suspendAccount(by: Viewer, input: { readonly account: string; readonly reason: string }, at: Date): Promise<void> {
  await inTransaction(async () => {
    const account = await lockAccount(input.account);
    authorize(by, 'account', 'suspend', baseRoles(by), account.status);
    if (account.id === by.id) throw conflict('That is you. Ask another moderator.');
    await transition(accountStates, 'suspend', account, by, at, { suspendedReason: input.reason }, { data: { reason: input.reason } });
    await enqueue('send-mail', accountSuspended(account, input.reason));
    await enqueue('wind-up-account', { accountId: account.id });
  });
}

/** Ends a suspension. What was taken back or cancelled stays so. @throws Refusal `conflict` when it is not suspended */
export async function restoreAccount(by: Viewer, input: { readonly account: string; readonly reason: string }, at: Date): Promise<void> {
  await inTransaction(async () => {
    const account = await lockAccount(input.account);
    authorize(by, 'account', 'restore', baseRoles(by), account.status);
    await transition(accountStates, 'restore', account, by, at, { suspendedReason: null }, { data: { reason: input.reason } });
    await enqueue('send-mail', accountRestored(account));
  });
}
