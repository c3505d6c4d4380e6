import { confirmAddress } from '~/emails/account-letters.ts';
import { inTransaction } from '../db.ts';
import { conflict } from '../errors.ts';
import { countTry } from '../http/limits.ts';
import { enqueue } from '../jobs/queue.ts';
import type { Viewer } from '../viewer.ts';
import { confirmationLink } from './sign-up.ts';

/**
 * Sends the confirmation letter again; the link of the earlier one stops working.
 * @throws Refusal `conflict` when the address is confirmed already, `tooMany`
 */
export async function sendConfirmation(by: Viewer, at: Date): Promise<void> {
  if (by.emailConfirmed) throw conflict('Your address is confirmed already.');
  await countTry('confirmation mail', by.id);
  await inTransaction(async () => enqueue('send-mail', confirmAddress(by, await confirmationLink(by.id, by.email, at))));
}
