import { cancelCutOff } from '~/domain/time.ts';
import { settleCancellation, split, type Settlement, type Split } from '~/domain/trade/settlement.ts';
import { conflict, notFound } from './errors.ts';
import { heldFor } from './ledger.ts';
import { Booking, HeldPayment, Tally, WorkAgreement } from './models/index.ts';
import type { BidTerms } from '~/domain/trade/rate-card.ts';
import { withShare } from './trip-share.ts';

/** A booking and its payment, both locked, the booking always first. */
export interface BookingMoney {
  readonly booking: Booking;
  readonly payment: HeldPayment | null;
}

/** Locks a booking and its payment by the booking's id. Call inside a transaction. @throws Refusal `notFound` */
export async function lockBookingMoney(bookingId: string): Promise<BookingMoney> {
  const booking = await Booking.findByPk(bookingId, { lock: true });
  if (!booking) throw notFound('booking');
  return { booking, payment: await HeldPayment.findOne({ where: { bookingId }, lock: true }) };
}

/** The terms frozen with the booking that its money obeys. */
export async function moneyTermsOf(bookingId: string): Promise<{ readonly terms: BidTerms; readonly feeBasisPoints: number }> {
  const agreement = await WorkAgreement.findByPk(bookingId, { rejectOnEmpty: true });
  const { terms, feeBasisPoints } = agreement.terms as { terms: BidTerms; feeBasisPoints: number };
  return { terms: await withShare(bookingId, terms), feeBasisPoints };
}

/** What the signed tally came to, by whom it was signed; null while nothing is signed. */
export async function signedSettlement(bookingId: string): Promise<{ readonly settlement: Settlement; readonly signedBy: string | null; readonly signedAt: Date } | null> {
  const tally = await Tally.findOne({ where: { bookingId }, order: [['part', 'DESC']] });
  return tally?.signedAt && tally.settlement ? { settlement: tally.settlement as Settlement, signedBy: tally.signedBy, signedAt: tally.signedAt } : null;
}

/** The settlement's cost split against what is held now: a top-up may have come since it was signed. */
export function splitNow(settlement: Settlement, heldCents: number, feeBasisPoints: number): Split {
  const costTax = settlement.overHold?.ifToppedUp.taxCents ?? settlement.taxCents;
  return split(settlement.costCents, costTax, { heldCents, feeBasisPoints });
}

/** What cancelling would come to now: who gets what of the money held. */
export async function cancellationOf(booking: Booking, by: 'landowner' | 'sawyer', at: Date): Promise<Settlement> {
  const { terms, feeBasisPoints } = await moneyTermsOf(booking.id);
  const startsAt = booking.startsAt;
  if (!startsAt) throw conflict('No day is agreed yet.');
  return settleCancellation(terms, { by, at, cutOffAt: cancelCutOff(startsAt) }, { heldCents: await heldFor(booking.id), feeBasisPoints });
}
