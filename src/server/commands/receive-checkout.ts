import { bookingStates } from '~/domain/states/booking.ts';
import { paymentStates } from '~/domain/states/payment.ts';
import { holdGrew, moneyHeld, moneyReturned } from '~/emails/money-letters.ts';
import { lockBookingMoney } from '../booking-money.ts';
import { inTransaction } from '../db.ts';
import { bookedDaysOf, sendInvitations } from '../invitations.ts';
import { enqueue } from '../jobs/queue.ts';
import { heldFor, post } from '../ledger.ts';
import { Charge, Checkout, HeldPayment, type Booking } from '../models/index.ts';
import { bookingLink, partiesOf } from '../parties.ts';
import type { ChargeSeen, CheckoutSeen } from '../services/card-payments.ts';
import { record, transition } from '../transition.ts';
import { system } from '../viewer.ts';
import { queueProviderCalls } from './queue-provider-call.ts';
import { settleBooking } from './settle-booking.ts';

const provider = system('payment provider');

/** What became of a checkout's message. */
export type ReceiveOutcome = 'not ours' | 'nothing new' | 'held' | 'added' | 'returned' | 'expired';

/**
 * Takes in what the provider says of a checkout, as it stands there now. May be told any number of times and in any order: money is
 * entered once, and money for a payment that is void, held already or being settled goes back whole.
 */
export async function receiveCheckout(seen: CheckoutSeen, at: Date): Promise<ReceiveOutcome> {
  if (seen.checkoutId === null || !/^[0-9a-f-]{36}$/.test(seen.checkoutId)) return 'not ours';
  const found = await Checkout.findByPk(seen.checkoutId);
  const owner = found && (await HeldPayment.findByPk(found.paymentId));
  if (!found || !owner) return 'not ours';
  return inTransaction(async () => {
    const { booking, payment } = await lockBookingMoney(owner.bookingId);
    const checkout = await Checkout.findByPk(found.id, { lock: true, rejectOnEmpty: true });
    if (!payment) return 'not ours';
    if (!seen.paid) {
      if (seen.status !== 'expired' || checkout.status === 'complete' || checkout.status === 'expired') return 'nothing new';
      await checkout.update({ status: 'expired', providerSessionId: seen.sessionId });
      return 'expired';
    }
    if (await Charge.findOne({ where: { providerChargeId: seen.paid.chargeId } })) return 'nothing new';
    await checkout.update({ status: 'complete', providerSessionId: seen.sessionId, completedAt: at });
    return takeIn(booking, payment, checkout, seen.paid, at);
  });
}

async function takeIn(booking: Booking, payment: HeldPayment, checkout: Checkout, paid: ChargeSeen, at: Date): Promise<ReceiveOutcome> {
  const isHold = checkout.purpose === 'hold' && payment.status === 'due' && booking.status === 'agreed';
  const isAddition = checkout.purpose !== 'hold' && payment.status === 'held' && ['sawing', 'tallied', 'queried', 'signed'].includes(booking.status);
  const why = isHold || isAddition ? null : 'The payment came when nothing was due any more.';
  const charge = await Charge.create({
    paymentId: payment.id, checkoutId: checkout.id, providerChargeId: paid.chargeId, providerIntentId: paid.intentId, amountCents: paid.amountCents, receivedAt: at, returnedBecause: why,
  });
  await post({
    at, cause: 'charge', causeId: charge.providerChargeId, bookingId: booking.id,
    sides: [
      { account: 'provider balance', amountCents: paid.amountCents - paid.providerFeeCents },
      { account: 'provider fee', amountCents: paid.providerFeeCents },
      { account: why ? 'refund payable' : 'landowner held', amountCents: -paid.amountCents },
    ],
  });
  if (why) return giveBack(booking, payment, charge, why, at);
  if (isHold) return hold(booking, payment, at);
  return add(booking, payment, paid.amountCents, at);
}

async function giveBack(booking: Booking, payment: HeldPayment, charge: Charge, why: string, at: Date): Promise<ReceiveOutcome> {
  await record(provider, 'returnMoney', 'heldPayment', payment.id, at, { data: { charge: charge.providerChargeId, cents: charge.amountCents } });
  await queueProviderCalls('refund', payment, [{ chargeId: charge.id, amountCents: charge.amountCents }], at);
  const { landowner } = await partiesOf(booking);
  await enqueue('send-mail', moneyReturned(landowner, charge.amountCents, why, bookingLink(booking)));
  return 'returned';
}

async function hold(booking: Booking, payment: HeldPayment, at: Date): Promise<ReceiveOutcome> {
  await transition(paymentStates, 'receive', payment, provider, at, { updatedAt: at });
  await transition(bookingStates, 'hold', booking, provider, at, { payBy: null, updatedAt: at });
  const { landowner, sawyer } = await partiesOf(booking);
  const told = { cents: await heldFor(booking.id), startsAt: booking.startsAt ?? at, zone: booking.timeZone };
  await enqueue('send-mail', moneyHeld(landowner, sawyer, { ...told, mine: true }, bookingLink(booking)));
  await enqueue('send-mail', moneyHeld(sawyer, landowner, { ...told, mine: false }, bookingLink(booking)));
  // The invitation may name the exact place from now on.
  await sendInvitations(booking, await bookedDaysOf(booking.id));
  return 'held';
}

async function add(booking: Booking, payment: HeldPayment, cents: number, at: Date): Promise<ReceiveOutcome> {
  await record(provider, 'addToHold', 'heldPayment', payment.id, at, { data: { cents } });
  const { landowner, sawyer } = await partiesOf(booking);
  const held = await heldFor(booking.id);
  for (const person of [landowner, sawyer]) await enqueue('send-mail', holdGrew(person, cents, held, bookingLink(booking)));
  await settleBooking(provider, booking.id, at);
  return 'added';
}
