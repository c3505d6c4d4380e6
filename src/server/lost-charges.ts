import { queueReversal } from './commands/queue-provider-call.ts';
import { balances, post } from './ledger.ts';
import { CardDispute, ProviderCall, type Booking } from './models/index.ts';

const centsOf = (call: ProviderCall): number => Number(call.request['amountCents']);

/** Where a charge stands with the bank; null when it was never disputed or stands again. Leans on the few disputes there are. */
export async function disputeOf(chargeId: string): Promise<'open' | 'lost' | null> {
  const disputes = await CardDispute.findAll({ where: { chargeId, status: ['open', 'lost'] } });
  return disputes.some(({ status }) => status === 'lost') ? 'lost' : disputes.length > 0 ? 'open' : null;
}

/**
 * A transfer had been made from a charge that the bank then gave back: the sawyer owes it, and it is taken back out of their balance
 * at the provider if that has it. In the caller's transaction; does its work once.
 */
export async function oweBack(booking: Booking, transfer: ProviderCall, at: Date): Promise<void> {
  const cents = centsOf(transfer);
  const news = await post({
    at, cause: 'transfer owed back', causeId: transfer.id, bookingId: booking.id, note: 'The bank gave the charge back to the card after the pay was released.',
    sides: [{ account: 'sawyer receivable', amountCents: cents }, { account: 'dispute loss', amountCents: -cents }],
  });
  if (news) await queueReversal(transfer, cents, at);
}

/**
 * A refund or transfer was promised from a charge that the bank gave back before it was made: it is not made any more. When nothing of
 * the payment reaches the sawyer, the fee is not kept either. In the caller's transaction, the call locked.
 */
export async function dropCall(booking: Booking, call: ProviderCall, at: Date): Promise<void> {
  if (call.status === 'done' || call.status === 'dropped') return;
  const cents = centsOf(call);
  await call.update({ status: 'dropped', claimedUntil: null, error: null, doneAt: at });
  await post({
    at, cause: 'call dropped', causeId: call.id, bookingId: booking.id, note: 'The bank had given the charge back to the card.',
    sides: [{ account: call.kind === 'transfer' ? 'sawyer payable' : 'refund payable', amountCents: cents }, { account: 'dispute loss', amountCents: -cents }],
  });
  const others = await ProviderCall.findAll({ where: { paymentId: call.paymentId, kind: 'transfer' } });
  if (others.length === 0 || others.some(({ status }) => status !== 'dropped')) return;
  const now = await balances(booking.id);
  const feeCents = Math.min(-now['platform fee'], now['dispute loss']);
  if (feeCents <= 0) return;
  await post({
    at, cause: 'fee dropped', causeId: call.id, bookingId: booking.id, note: 'Nothing of the payment reached the sawyer.',
    sides: [{ account: 'platform fee', amountCents: feeCents }, { account: 'dispute loss', amountCents: -feeCents }],
  });
}
