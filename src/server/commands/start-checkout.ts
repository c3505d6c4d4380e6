import { formatCents, type Cents } from '~/domain/money.ts';
import { paths } from '~/domain/paths.ts';
import { addHours } from '~/domain/time.ts';
import { authorize, rolesOnBooking } from '../authorize.ts';
import { signedSettlement } from '../booking-money.ts';
import { inTransaction } from '../db.ts';
import { conflict, invalid, unavailable } from '../errors.ts';
import { heldFor } from '../ledger.ts';
import { lockBooking } from '../locks.ts';
import { Checkout, HeldPayment, Listing, type Booking } from '../models/index.ts';
import { linkTo } from '../parties.ts';
import { expireCheckout, openCheckout, type CheckoutWanted } from '../services/card-payments.ts';
import { PaymentsProblem } from '../services/payments.ts';
import { record } from '../transition.ts';
import type { Viewer } from '../viewer.ts';
import { receiveCheckout } from './receive-checkout.ts';

export type Purpose = Checkout['purpose'];

/** A checkout lives an hour: the provider takes 30 minutes to 24 hours, and a repeated opening still needs 30 of them. */
const LIVES_HOURS = 1;
/** One that ends sooner than this is not offered again. */
const TOO_SHORT_MS = 3 * 60_000;
const LARGEST_INCREASE: Cents = 2_000_000;

/** What is to be paid for this purpose now. @throws Refusal when nothing is */
async function amountDue(purpose: Purpose, booking: Booking, payment: HeldPayment, asked: Cents | undefined, at: Date): Promise<Cents> {
  if (purpose === 'hold') {
    if (payment.status !== 'due') throw conflict('The hold is paid already, or no longer needed.');
    if (booking.payBy && booking.payBy <= at) throw conflict('The time to pay has passed, so the booking lapses.');
    return payment.dueCents;
  }
  if (payment.status !== 'held') throw conflict('Nothing more can be added to this payment.');
  if (purpose === 'increase') {
    if (asked === undefined || asked < 100 || asked > LARGEST_INCREASE) throw invalid([{ path: 'amount', message: `Type an amount from $1 to ${formatCents(LARGEST_INCREASE)}.` }]);
    return asked;
  }
  const signed = await signedSettlement(booking.id);
  const lacking = (signed?.settlement.costCents ?? 0) - (await heldFor(booking.id));
  if (!signed || lacking <= 0 || payment.heldAcceptedAt) throw conflict('Nothing is lacking: the hold covers the tally.');
  return Math.max(lacking, 50);
}

const WORDS: Readonly<Record<Purpose, string>> = { hold: 'Hold for milling', 'top-up': 'What the tally came to above the hold', increase: 'Increase of the hold' };

interface Step {
  readonly checkout: Checkout;
  readonly wanted: CheckoutWanted;
  /** An older checkout that must end at the provider first. */
  readonly toEnd: Checkout | null;
}

async function prepare(by: Viewer, input: CheckoutInput, at: Date): Promise<Step> {
  return inTransaction(async () => {
    const purpose = input.purpose ?? 'hold';
    const booking = await lockBooking(input.booking);
    authorize(by, 'booking', purpose === 'hold' ? 'pay' : 'topUp', rolesOnBooking(by, booking), booking.status);
    const payment = await HeldPayment.findOne({ where: { bookingId: booking.id }, lock: true });
    if (!payment) throw conflict('No payment is due for this booking yet.');
    const live = await Checkout.findOne({ where: { paymentId: payment.id, status: ['creating', 'open'] }, lock: true });
    const amountCents = await amountDue(purpose, booking, payment, input.amountCents, at);
    const fits = live && live.purpose === purpose && live.amountCents === amountCents && live.expiresAt.getTime() - at.getTime() > TOO_SHORT_MS;
    const checkout = fits || live
      ? live
      : await Checkout.create({ paymentId: payment.id, purpose, amountCents, idempotencyKey: `checkout-${crypto.randomUUID()}`, expiresAt: input.cardPageUntil ?? addHours(at, LIVES_HOURS), createdAt: at });
    if (!live) await record(by, 'startCheckout', 'heldPayment', payment.id, at, { data: { purpose, amountCents } });
    const listing = await Listing.findByPk(booking.listingId, { rejectOnEmpty: true });
    const wanted: CheckoutWanted = {
      checkoutId: checkout.id,
      idempotencyKey: checkout.idempotencyKey,
      bookingNumber: booking.number,
      amountCents: checkout.amountCents,
      what: `${WORDS[checkout.purpose]}: ${listing.title ?? 'logs'}, booking ${booking.number}`,
      email: by.email,
      transferGroup: payment.transferGroup,
      expiresAt: checkout.expiresAt,
      paidUrl: linkTo(paths.paid(booking.number)),
      backUrl: linkTo(paths.booking(booking.number)),
    };
    return { checkout, wanted, toEnd: live && !fits ? live : null };
  });
}

/** Opens the prepared checkout at the provider under its stored key, and keeps where it is. */
async function open({ checkout, wanted }: Step): Promise<string> {
  if (checkout.status === 'open' && checkout.url) return checkout.url;
  try {
    const { sessionId, url } = await openCheckout(wanted);
    await Checkout.update({ status: 'open', providerSessionId: sessionId, url }, { where: { id: checkout.id, status: 'creating' } });
    if (url === null) throw conflict('This payment has just been made. Load the booking again.');
    return url;
  } catch (error) {
    if (!(error instanceof PaymentsProblem)) throw error;
    // A refusal is final under this key (the time was too short, say): the next try begins a new checkout.
    if (error.kind !== 'unknown') await Checkout.update({ status: 'expired' }, { where: { id: checkout.id, status: 'creating' } });
    throw unavailable('The payment provider does not answer just now. Nothing was charged; try again in a moment.');
  }
}

/** Ends an older checkout at the provider. If it was paid in the meantime, the money is received instead. */
async function end(checkout: Checkout, at: Date): Promise<void> {
  if (!checkout.providerSessionId) {
    // It was never known to open: opening it under its own key tells whether it did.
    await Checkout.update({ status: 'expired' }, { where: { id: checkout.id, status: 'creating' } });
    return;
  }
  const seen = await expireCheckout(checkout.providerSessionId).catch((error: unknown) => {
    if (error instanceof PaymentsProblem) throw unavailable('The payment provider does not answer just now. Nothing was charged; try again in a moment.');
    throw error;
  });
  await receiveCheckout(seen, at);
  if (seen.status === 'complete') throw conflict('This was paid in another window. Load the booking again.');
}

export interface CheckoutInput {
  readonly booking: number;
  readonly purpose?: Purpose;
  /** For an increase: how much the landowner adds. */
  readonly amountCents?: Cents;
  /** When the card page closes; an hour after `at` when left out. For a payment told of the past, whose page is open today. */
  readonly cardPageUntil?: Date;
}

/**
 * The landowner goes to pay: opens the provider's card page for the hold, a top-up or an increase. There is one live checkout per
 * payment: two tabs get the same one, and an old one is ended before a new one is made.
 * @returns the address of the card page
 */
export async function startCheckout(by: Viewer, input: CheckoutInput, at: Date): Promise<string> {
  const first = await prepare(by, input, at);
  if (!first.toEnd) return open(first);
  await end(first.toEnd, at);
  const second = await prepare(by, input, at);
  if (second.toEnd) throw conflict('Another window is opening this payment. Try again in a moment.');
  return open(second);
}
