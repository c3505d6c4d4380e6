import type { Transaction } from 'sequelize';
import { currentTransaction } from './db.ts';
import { Account } from './models/account.ts';

/**
 * Whether these accounts are active, held so until the end of the current transaction: a suspension waits for the deed to end and
 * then finds what it made, or was first and is seen here. Without this a deed that began before a suspension could end after it.
 */
export async function holdActive(...accountIds: readonly string[]): Promise<boolean> {
  const transaction = currentTransaction();
  if (!transaction) throw new Error('holdActive needs a transaction');
  const lock = 'KEY SHARE' as Transaction['LOCK']['KEY_SHARE'];
  for (const id of [...accountIds].sort()) {
    const account = await Account.findByPk(id, { attributes: ['id', 'status'], lock, rejectOnEmpty: true });
    if (account.status !== 'active') return false;
  }
  return true;
}
