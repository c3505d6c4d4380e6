import { disputeNews } from '~/emails/money-letters.ts';
import { lockBookingMoney } from '../booking-money.ts';
import { inTransaction, oneRow } from '../db.ts';
import { enqueue } from '../jobs/queue.ts';
import { heldFor, post } from '../ledger.ts';
import { CardDispute, Charge, HeldPayment, type Booking } from '../models/index.ts';
import { bookingLink, partiesOf } from '../parties.ts';
import type { DisputeSeen } from '../services/card-payments.ts';
import { record } from '../transition.ts';
import { system } from '../viewer.ts';
import { settleBooking } from './settle-booking.ts';

const provider = system('payment provider');

/**
 * Takes in a card dispute as it stands at the provider now; told in any order, each step is entered once.
 * Opened: the money and the provider's fee have left. Won: the money is back. Lost: it comes out of what is still held, and
 * what was paid out already is owed by the sawyer.
 */
export async function noteDispute(seen: DisputeSeen, at: Date): Promise<'not ours' | 'noted' | 'nothing new'> {
  const charge = await Charge.findOne({ where: { providerChargeId: seen.chargeId } });
  const owner = charge && (await HeldPayment.findByPk(charge.paymentId));
  if (!charge || !owner) return 'not ours';
  return inTransaction(async () => {
    const { booking, payment } = await lockBookingMoney(owner.bookingId);
    if (!payment) return 'not ours';
    const known = await CardDispute.findByPk(seen.id, { lock: true });
    if (!known) await open(booking, payment, charge, seen, at);
    const dispute = known ?? (await CardDispute.findByPk(seen.id, { rejectOnEmpty: true }));
    if (seen.status === 'open' || dispute.status !== 'open') return known ? 'nothing new' : 'noted';
    await dispute.update({ status: seen.status, closedAt: at });
    await close(booking, charge, seen, at);
    const others = await CardDispute.count({ where: { bookingId: booking.id, status: 'open' } });
    if (others === 0) await payment.update({ disputedAt: null, updatedAt: at });
    await tell(booking, seen);
    await settleBooking(provider, booking.id, at);
    return 'noted';
  });
}

async function open(booking: Booking, payment: HeldPayment, charge: Charge, seen: DisputeSeen, at: Date): Promise<void> {
  await CardDispute.create({ id: seen.id, chargeId: charge.id, bookingId: booking.id, amountCents: seen.amountCents, openedAt: at });
  await payment.update({ disputedAt: at, updatedAt: at });
  await record(provider, 'dispute', 'heldPayment', payment.id, at, { data: { dispute: seen.id, cents: seen.amountCents } });
  await post({
    at, cause: 'dispute', causeId: seen.id, bookingId: booking.id,
    sides: [
      { account: 'dispute loss', amountCents: seen.amountCents },
      { account: 'provider fee', amountCents: seen.providerFeeCents },
      { account: 'provider balance', amountCents: -(seen.amountCents + seen.providerFeeCents) },
    ],
  });
  await tell(booking, { ...seen, status: 'open' });
}

async function close(booking: Booking, charge: Charge, seen: DisputeSeen, at: Date): Promise<void> {
  if (seen.status === 'won') {
    await post({
      at, cause: 'dispute won', causeId: seen.id, bookingId: booking.id,
      sides: [{ account: 'provider balance', amountCents: seen.amountCents }, { account: 'dispute loss', amountCents: -seen.amountCents }],
    });
    return;
  }
  const fromHeld = charge.returnedBecause === null ? Math.min(seen.amountCents, Math.max(0, await heldFor(booking.id))) : 0;
  const bySawyer = Math.min(seen.amountCents - fromHeld, await transferredFrom(charge.id));
  if (fromHeld + bySawyer === 0) return;
  await post({
    at, cause: 'dispute lost', causeId: seen.id, bookingId: booking.id,
    note: 'Out of what was held; what had been paid out is owed by the sawyer.',
    sides: [
      { account: 'landowner held', amountCents: fromHeld },
      { account: 'sawyer receivable', amountCents: bySawyer },
      { account: 'dispute loss', amountCents: -(fromHeld + bySawyer) },
    ],
  });
}

async function transferredFrom(chargeId: string): Promise<number> {
  const sum = await oneRow<{ cents: number }>(`SELECT coalesce(sum((request->>'amountCents')::int), 0)::int AS cents FROM provider_call WHERE charge_id = $1 AND kind = 'transfer' AND status = 'done'`, [chargeId]);
  return sum?.cents ?? 0;
}

async function tell(booking: Booking, seen: DisputeSeen): Promise<void> {
  const { sawyer } = await partiesOf(booking);
  await enqueue('send-mail', disputeNews(sawyer, booking.number, seen.status, seen.amountCents, bookingLink(booking)));
}

