import { allocate } from '~/domain/trade/allocation.ts';
import type { Split } from '~/domain/trade/settlement.ts';
import { paymentStates } from '~/domain/states/payment.ts';
import { payoutNeeded } from '~/emails/money-letters.ts';
import { paths } from '~/domain/paths.ts';
import { cancellationOf, lockBookingMoney, moneyTermsOf, signedSettlement, splitNow } from '../booking-money.ts';
import { chargesLeft } from '../charges-left.ts';
import { inTransaction } from '../db.ts';
import { enqueue } from '../jobs/queue.ts';
import { heldFor, post } from '../ledger.ts';
import { SawyerProfile, type Booking, type HeldPayment } from '../models/index.ts';
import { linkTo, partiesOf } from '../parties.ts';
import { transition } from '../transition.ts';
import { endWhenPaid } from './end-payment.ts';
import type { Actor } from '../viewer.ts';
import { queueProviderCalls } from './queue-provider-call.ts';

/** What came of it: paying out began, or what it waits for. */
export type SettleOutcome = 'settling' | 'not signed' | 'disputed' | 'over the hold';

/**
 * Begins to pay out a signed booking: the ledger says who is owed what, and the transfer and the refund are written to the outbox.
 * Called by the signing, and again whenever something it waited for has come (a top-up, the sawyer's word, the end of a dispute);
 * it does its work once.
 * Above the hold it waits for a top-up or for the sawyer to accept the held amount, except when the deadline signed. A booking that was
 * cancelled while its charge was disputed is settled as of its cancellation.
 */
export async function settleBooking(by: Actor, bookingId: string, at: Date): Promise<SettleOutcome> {
  return inTransaction(async () => {
    const { booking, payment } = await lockBookingMoney(bookingId);
    if (payment?.status === 'held' && booking.status === 'cancelled') return settleCancelled(by, booking, payment, at);
    const signed = await signedSettlement(bookingId);
    if (booking.status !== 'signed' || payment?.status !== 'held' || !signed) return 'not signed';
    if (payment.disputedAt !== null) return 'disputed';
    const heldCents = await heldFor(bookingId);
    const { feeBasisPoints } = await moneyTermsOf(bookingId);
    if (signed.settlement.costCents > heldCents && payment.heldAcceptedAt === null && signed.signedBy !== 'deadline') return 'over the hold';
    await payOut(by, booking, payment, splitNow(signed.settlement, heldCents, feeBasisPoints), 'settlement', at);
    return 'settling';
  });
}

async function settleCancelled(by: Actor, booking: Booking, payment: HeldPayment, at: Date): Promise<SettleOutcome> {
  if (payment.disputedAt !== null) return 'disputed';
  // Nothing is held any more when the bank gave it back, or when it is promised already: then only the end may be due.
  if ((await heldFor(booking.id)) <= 0) await endWhenPaid(by, booking, payment, at);
  else await payOut(by, booking, payment, await cancellationOf(booking, booking.cancelledBy === booking.landownerId ? 'landowner' : 'sawyer', booking.cancelledAt ?? at), 'cancellation', at);
  return 'settling';
}

/** Promises what is held to its receivers and queues the calls that pay it. The booking and the payment are locked by the caller. */
export async function payOut(by: Actor, booking: Booking, payment: HeldPayment, parts: Split, cause: 'settlement' | 'cancellation', at: Date): Promise<void> {
  const { transferCents, refundCents, feeCents } = parts;
  // The bank has given the whole hold back already, after a dispute.
  if (transferCents + refundCents + feeCents === 0) return endWhenPaid(by, booking, payment, at);
  await post({
    at, cause, causeId: booking.id, bookingId: booking.id, actorId: by.id,
    sides: [
      { account: 'landowner held', amountCents: transferCents + refundCents + feeCents },
      { account: 'sawyer payable', amountCents: -transferCents },
      { account: 'refund payable', amountCents: -refundCents },
      { account: 'platform fee', amountCents: -feeCents },
    ],
  });
  const { transfers, refunds } = allocate(await chargesLeft(payment.id), transferCents, refundCents);
  // A cancelled booking that owes nothing stays held until its refund is made, then is refunded.
  if (cause === 'settlement' || transferCents > 0) await transition(paymentStates, 'beginSettling', payment, by, at, { updatedAt: at }, { data: { transferCents, refundCents, feeCents } });
  await queueProviderCalls('refund', payment, refunds, at);
  await queueProviderCalls('transfer', payment, transfers, at);
  if (transferCents > 0) await askForPayoutAccount(booking);
}

async function askForPayoutAccount(booking: Booking): Promise<void> {
  const profile = await SawyerProfile.findByPk(booking.sawyerId);
  if (profile?.payoutsReady) return;
  const { sawyer } = await partiesOf(booking);
  await enqueue('send-mail', payoutNeeded(sawyer, booking.number, linkTo(paths.payouts)));
}
