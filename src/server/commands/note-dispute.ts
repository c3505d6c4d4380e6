import { bookingStates } from '~/domain/states/booking.ts';
import { disputeNews } from '~/emails/money-letters.ts';
import { lockBookingMoney } from '../booking-money.ts';
import { inTransaction } from '../db.ts';
import { afterEnding } from '../end-booking.ts';
import { enqueue } from '../jobs/queue.ts';
import { heldFor, post } from '../ledger.ts';
import { oweBack } from '../lost-charges.ts';
import { CardDispute, Charge, HeldPayment, ProviderCall, type Booking } from '../models/index.ts';
import { bookingLink, partiesOf } from '../parties.ts';
import { checkoutOfCharge, type DisputeSeen } from '../services/card-payments.ts';
import { record, transition } from '../transition.ts';
import { system } from '../viewer.ts';
import { receiveCheckout } from './receive-checkout.ts';
import { settleBooking } from './settle-booking.ts';

const provider = system('payment provider');

/** A charge of ours. The message of its payment may be late or lost: then the provider is asked for it, and it is taken in first. */
async function chargeOf(chargeId: string, at: Date): Promise<Charge | null> {
  const known = await Charge.findOne({ where: { providerChargeId: chargeId } });
  if (known) return known;
  const paid = await checkoutOfCharge(chargeId);
  if (!paid) return null;
  await receiveCheckout(paid, at);
  return Charge.findOne({ where: { providerChargeId: chargeId } });
}

/**
 * Takes in a card dispute as it stands at the provider now; told in any order, each step is entered once.
 * Opened: the money and the provider's fee have left, and nothing is paid out of the charge. Won: the money is back, and what waited
 * goes on. Lost: it comes out of what is still held or promised, and what was paid out already is owed by the sawyer and taken back
 * where it can be had. A booking that has no hold left before sawing ends.
 */
export async function noteDispute(seen: DisputeSeen, at: Date): Promise<'not ours' | 'noted' | 'nothing new'> {
  const charge = await chargeOf(seen.chargeId, at);
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
    await record(provider, seen.status === 'won' ? 'winDispute' : 'loseDispute', 'heldPayment', payment.id, at, { data: { dispute: seen.id, cents: seen.amountCents } });
    if (seen.status === 'won') await win(booking, seen, at);
    else await lose(booking, charge, seen, at);
    const others = await CardDispute.count({ where: { bookingId: booking.id, status: 'open' } });
    if (others === 0) await payment.update({ disputedAt: null, updatedAt: at });
    await goOn(charge);
    await endUnheld(booking, at);
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

async function win(booking: Booking, seen: DisputeSeen, at: Date): Promise<void> {
  await post({
    at, cause: 'dispute won', causeId: seen.id, bookingId: booking.id,
    sides: [{ account: 'provider balance', amountCents: seen.amountCents }, { account: 'dispute loss', amountCents: -seen.amountCents }],
  });
}

async function lose(booking: Booking, charge: Charge, seen: DisputeSeen, at: Date): Promise<void> {
  const fromHeld = charge.returnedBecause === null ? Math.min(seen.amountCents, Math.max(0, await heldFor(booking.id))) : 0;
  if (fromHeld > 0) {
    await post({
      at, cause: 'dispute lost', causeId: seen.id, bookingId: booking.id, note: 'Out of what was held.',
      sides: [{ account: 'landowner held', amountCents: fromHeld }, { account: 'dispute loss', amountCents: -fromHeld }],
    });
  }
  for (const transfer of await ProviderCall.findAll({ where: { chargeId: charge.id, kind: 'transfer', status: 'done' }, lock: true })) await oweBack(booking, transfer, at);
}

/** What waited for the bank is taken up again: made when the dispute was won, given up when it was lost. */
async function goOn(charge: Charge): Promise<void> {
  await ProviderCall.update({ status: 'waiting' }, { where: { chargeId: charge.id, kind: ['transfer', 'refund'], status: 'stuck' } });
  for (const call of await ProviderCall.findAll({ where: { chargeId: charge.id, kind: ['transfer', 'refund'], status: ['waiting', 'failed'] } })) await enqueue('make-provider-call', { callId: call.id });
}

/** Before sawing, a booking whose whole hold the bank gave back ends: the sawyer does not set out on nothing. */
async function endUnheld(booking: Booking, at: Date): Promise<void> {
  if (booking.status !== 'held' || (await heldFor(booking.id)) > 0) return;
  await transition(bookingStates, 'cancel', booking, provider, at, { cancelReason: 'The bank gave the hold back to the card after a dispute.', cancelledAt: at, updatedAt: at });
  await afterEnding(provider, booking, at);
}

async function tell(booking: Booking, seen: DisputeSeen): Promise<void> {
  const { landowner, sawyer } = await partiesOf(booking);
  const ended = booking.status === 'cancelled';
  await enqueue('send-mail', disputeNews(sawyer, booking.number, seen.status, seen.amountCents, { mine: 'sawyer', ended }, bookingLink(booking)));
  await enqueue('send-mail', disputeNews(landowner, booking.number, seen.status, seen.amountCents, { mine: 'landowner', ended }, bookingLink(booking)));
}
