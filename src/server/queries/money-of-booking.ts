import { abilities, type Action } from '~/domain/permissions.ts';
import type { BookingState } from '~/domain/states/booking.ts';
import type { PaymentState } from '~/domain/states/payment.ts';
import type { Settlement, Split } from '~/domain/trade/settlement.ts';
import { rolesOnBooking } from '../authorize.ts';
import { signedSettlement, splitNow } from '../booking-money.ts';
import { inSnapshot, oneRow, rows } from '../db.ts';
import { notFound } from '../errors.ts';
import { heldFor, balances } from '../ledger.ts';
import { Booking, Checkout, HeldPayment, Listing, WorkAgreement } from '../models/index.ts';
import { partiesOf } from '../parties.ts';
import type { Viewer } from '../viewer.ts';

/** One movement of a booking's money, in the order it began. */
export interface MoneyStep {
  readonly kind: 'charge' | 'returned' | 'refund' | 'transfer' | 'reversal' | 'dispute';
  readonly purpose: Checkout['purpose'] | null;
  readonly cents: number;
  readonly state: 'done' | 'under way' | 'waits' | 'stuck' | 'open' | 'won' | 'lost';
  readonly at: Date;
}

export interface MoneyOfBooking {
  readonly number: number;
  readonly status: BookingState;
  readonly title: string;
  readonly timeZone: string;
  readonly side: 'landowner' | 'sawyer' | 'moderator';
  readonly landownerName: string;
  readonly sawyerName: string;
  readonly payment: PaymentState | null;
  readonly disputed: boolean;
  readonly dueCents: number;
  readonly payBy: Date | null;
  readonly heldCents: number;
  readonly feeBasisPoints: number;
  /** What the signed tally came to, and how it is split against what was or is held. */
  readonly settlement: { readonly signedAt: Date; readonly whole: Settlement; readonly parts: Split; readonly lackingCents: number; /** Given back to the card by the bank. */ readonly lostCents: number } | null;
  readonly waitsFor: 'payout account' | 'top-up' | 'bank' | 'moderator' | null;
  readonly steps: readonly MoneyStep[];
  readonly newestCheckout: { readonly status: Checkout['status']; readonly purpose: Checkout['purpose']; readonly cents: number; readonly createdAt: Date } | null;
  readonly can: Record<Action<'booking'>, boolean>;
}

// Each part leans on an index by booking or payment; a booking has a handful of rows.
const stepsOf = (bookingId: string): Promise<MoneyStep[]> =>
  rows<MoneyStep>(
    `SELECT * FROM (
       SELECT CASE WHEN charge.returned_because IS NULL THEN 'charge' ELSE 'returned' END AS kind, checkout.purpose, charge.amount_cents AS cents, 'done' AS state, charge.received_at AS at
       FROM charge JOIN held_payment payment ON payment.id = charge.payment_id LEFT JOIN checkout ON checkout.id = charge.checkout_id WHERE payment.booking_id = $1
       UNION ALL
       SELECT call.kind, NULL, (call.request->>'amountCents')::int,
         CASE WHEN call.status = 'done' THEN 'done' WHEN call.status = 'stuck' THEN 'stuck' WHEN call.kind = 'transfer' AND NOT coalesce(profile.payouts_ready, false) THEN 'waits' ELSE 'under way' END,
         coalesce(call.done_at, call.created_at)
       FROM provider_call call JOIN booking ON booking.id = call.booking_id LEFT JOIN sawyer_profile profile ON profile.account_id = booking.sawyer_id
       WHERE call.booking_id = $1 AND call.kind IN ('transfer', 'refund', 'reversal') AND call.status <> 'dropped'
       UNION ALL
       SELECT 'dispute', NULL, amount_cents, status, coalesce(closed_at, opened_at) FROM card_dispute WHERE booking_id = $1
     ) step ORDER BY at`,
    [bookingId],
  );

async function settlementOf(booking: Booking, payment: HeldPayment | null, heldCents: number, feeBasisPoints: number): Promise<MoneyOfBooking['settlement']> {
  const signed = await signedSettlement(booking.id);
  if (!signed) return null;
  const ledger = await balances(booking.id);
  // Once paid out nothing is held any more: the split then is against what was held, which is what was charged for it.
  const [sum] = await rows<{ cents: number }>('SELECT coalesce(sum(amount_cents), 0)::int AS cents FROM charge WHERE payment_id = $1 AND returned_because IS NULL', [payment?.id ?? null]);
  const against = ledger['landowner held'] === 0 ? (sum?.cents ?? 0) : heldCents;
  const lackingCents = payment?.status === 'held' && !payment.heldAcceptedAt && signed.signedBy !== 'deadline' ? Math.max(0, signed.settlement.costCents - heldCents) : 0;
  const lost = await oneRow<{ cents: number }>(`SELECT coalesce(sum(dispute.amount_cents), 0)::int AS cents FROM card_dispute dispute JOIN charge ON charge.id = dispute.charge_id WHERE dispute.booking_id = $1 AND dispute.status = 'lost' AND charge.returned_because IS NULL`, [booking.id]);
  return { signedAt: signed.signedAt, whole: signed.settlement, lostCents: lost?.cents ?? 0, parts: splitNow(signed.settlement, against, feeBasisPoints), lackingCents };
}

function waitingFor(status: BookingState, disputed: boolean, steps: readonly MoneyStep[], lackingCents: number): MoneyOfBooking['waitsFor'] {
  if (steps.some(({ state }) => state === 'stuck')) return 'moderator';
  if (disputed) return 'bank';
  if (status === 'signed' && lackingCents > 0) return 'top-up';
  return steps.some(({ state }) => state === 'waits') ? 'payout account' : null;
}

/**
 * The money of one booking, as its sides and moderators may see it, as of one instant: a payment that arrives meanwhile is not shown
 * half, as received and due.
 * @throws Refusal `notFound` for anyone else
 */
export const moneyOfBooking = (viewer: Viewer, number: number): Promise<MoneyOfBooking> => inSnapshot(() => moneyNow(viewer, number));

async function moneyNow(viewer: Viewer, number: number): Promise<MoneyOfBooking> {
  const booking = Number.isSafeInteger(number) ? await Booking.findOne({ where: { number } }) : null;
  const can = booking && abilities('booking', rolesOnBooking(viewer, booking), booking.status);
  if (!booking || !can?.see) throw notFound('booking');
  const payment = await HeldPayment.findOne({ where: { bookingId: booking.id } });
  const listing = await Listing.findByPk(booking.listingId, { rejectOnEmpty: true });
  const { landowner, sawyer } = await partiesOf(booking);
  const agreement = await WorkAgreement.findByPk(booking.id);
  const feeBasisPoints = (agreement?.terms as { feeBasisPoints?: number } | undefined)?.feeBasisPoints ?? 0;
  const heldCents = await heldFor(booking.id);
  const all = await stepsOf(booking.id);
  // What a sawyer owes back is between them and Skidway.
  const steps = viewer.id === booking.landownerId ? all.filter(({ kind }) => kind !== 'reversal') : all;
  const settlement = await settlementOf(booking, payment, heldCents, feeBasisPoints);
  const newest = payment && (await Checkout.findOne({ where: { paymentId: payment.id }, order: [['createdAt', 'DESC']] }));
  const disputed = payment?.disputedAt != null;
  return {
    number: booking.number,
    status: booking.status,
    title: listing.title ?? '',
    timeZone: booking.timeZone,
    side: viewer.id === booking.landownerId ? 'landowner' : viewer.id === booking.sawyerId ? 'sawyer' : 'moderator',
    landownerName: landowner.name,
    sawyerName: sawyer.name,
    payment: payment?.status ?? null,
    disputed,
    dueCents: payment?.dueCents ?? 0,
    payBy: booking.payBy,
    heldCents,
    feeBasisPoints,
    settlement,
    waitsFor: waitingFor(booking.status, disputed, steps, settlement?.lackingCents ?? 0),
    steps,
    newestCheckout: newest ? { status: newest.status, purpose: newest.purpose, cents: newest.amountCents, createdAt: newest.createdAt } : null,
    can,
  };
}

