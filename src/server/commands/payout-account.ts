import { paths } from '~/domain/paths.ts';
import { execute, inTransaction, rows } from '../db.ts';
import { conflict, forbidden, unavailable } from '../errors.ts';
import { enqueue } from '../jobs/queue.ts';
import { SawyerProfile } from '../models/sawyer.ts';
import { linkTo } from '../parties.ts';
import { bankPayouts, onboardingLink, openPayoutAccount, payoutDashboardLink, PaymentsProblem, readPayoutAccount, type BankPayout, type PayoutAccount } from '../services/payments.ts';
import { record } from '../transition.ts';
import { system, type Viewer } from '../viewer.ts';

const notNow = (error: unknown): never => {
  if (error instanceof PaymentsProblem) throw unavailable('The payment provider does not answer just now. Try again in a moment.');
  throw error;
};

function asSawyer(by: Viewer): void {
  if (!by.active || !by.isSawyer) throw forbidden('Only an account that works as a sawyer is paid out to.');
  if (!by.emailConfirmed) throw forbidden('Confirm your e-mail address first: the link is in the message we sent you.');
}

/**
 * The sawyer goes to set up, or to complete, the account that pay is released to.
 * @returns an address of the provider's that opens once
 */
export async function connectPayoutAccount(by: Viewer, at: Date): Promise<string> {
  asSawyer(by);
  const known = (await SawyerProfile.findByPk(by.id))?.payoutAccount ?? null;
  const account = known ?? (await openPayoutAccount(by.id, by.email).catch(notNow)).id;
  if (known === null) {
    await inTransaction(async () => {
      // Two clicks at once get the same account from the provider; the first to write it down wins.
      await execute(
        `INSERT INTO sawyer_profile (account_id, payout_account, updated_at) VALUES ($1, $2, $3)
         ON CONFLICT (account_id) DO UPDATE SET payout_account = coalesce(sawyer_profile.payout_account, excluded.payout_account)`,
        [by.id, account, at],
      );
      await record(by, 'openPayoutAccount', 'account', by.id, at);
    });
  }
  return onboardingLink(account, `${linkTo(paths.payouts)}?back=1`, `${linkTo(paths.payouts)}?again=1`).catch(notNow);
}

/** The sawyer goes to the provider's own page about the account. @returns its address, which opens once */
export async function openPayoutDashboard(by: Viewer): Promise<string> {
  asSawyer(by);
  const account = (await SawyerProfile.findByPk(by.id))?.payoutAccount;
  if (!account) throw conflict('Set up payouts first.');
  return payoutDashboardLink(account).catch(notNow);
}

/** What the provider pays out to the sawyer's bank, newest first; null when it does not answer. */
export async function readBankPayouts(by: Viewer): Promise<BankPayout[] | null> {
  asSawyer(by);
  const account = (await SawyerProfile.findByPk(by.id))?.payoutAccount;
  if (!account) return [];
  return bankPayouts(account).catch((error: unknown) => {
    if (error instanceof PaymentsProblem) return null;
    throw error;
  });
}

/** Reads the sawyer's account anew, for a sawyer who comes back from the provider before its message does. */
export async function refreshPayoutAccount(by: Viewer, at: Date): Promise<PayoutAccount | null> {
  const account = (await SawyerProfile.findByPk(by.id))?.payoutAccount;
  if (!account) return null;
  const seen = await readPayoutAccount(account).catch(notNow);
  await notePayoutAccount(seen, at);
  return seen;
}

/** Takes in what the provider says of a payout account now. When it has become ready, the pay that waited for it is released. */
export async function notePayoutAccount(seen: PayoutAccount, at: Date): Promise<'not ours' | 'ready' | 'not ready'> {
  return inTransaction(async () => {
    const profile = await SawyerProfile.findOne({ where: { payoutAccount: seen.id }, lock: true });
    if (!profile) return 'not ours';
    if (profile.payoutsReady !== seen.ready) {
      await profile.update({ payoutsReady: seen.ready, updatedAt: at });
      await record(system('payment provider'), seen.ready ? 'payoutsReady' : 'payoutsStopped', 'account', profile.accountId, at);
    }
    if (!seen.ready) return 'not ready';
    const waiting = await rows<{ id: string }>(
      `SELECT call.id FROM provider_call call JOIN booking ON booking.id = call.booking_id WHERE call.kind = 'transfer' AND call.status IN ('waiting', 'failed') AND booking.sawyer_id = $1`,
      [profile.accountId],
    );
    for (const { id } of waiting) await enqueue('make-provider-call', { callId: id });
    return 'ready';
  });
}
