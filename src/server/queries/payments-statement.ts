import type { Cents } from '~/domain/money.ts';
import { rows } from '../db.ts';

/** One movement on a landowner's card. */
export interface PaymentsLine {
  readonly day: string;
  readonly booking: number;
  readonly title: string;
  readonly sawyer: string;
  readonly what: 'hold' | 'top-up' | 'increase' | 'refund' | 'dispute';
  readonly paidCents: Cents;
  readonly backCents: Cents;
}

export interface PaymentsStatement {
  readonly period: string;
  readonly lines: readonly PaymentsLine[];
  readonly totals: { readonly paidCents: Cents; readonly backCents: Cents };
}

/** What a landowner paid and got back in a year or month, by the site's own calendar. Leans on `booking_of_landowner`. */
export async function paymentsStatement(landownerId: string, period: string): Promise<PaymentsStatement> {
  const lines = await rows<PaymentsLine>(
    `WITH mine AS (
       SELECT booking.id, booking.number, booking.time_zone, coalesce(listing.title, '') AS title, sawyer.name AS sawyer, payment.id AS payment_id
       FROM booking JOIN listing ON listing.id = booking.listing_id JOIN account sawyer ON sawyer.id = booking.sawyer_id JOIN held_payment payment ON payment.booking_id = booking.id WHERE booking.landowner_id = $1),
     moved AS (
       SELECT mine.id, charge.received_at AS at, coalesce(checkout.purpose, 'hold') AS what, charge.amount_cents AS paid, 0 AS back FROM mine JOIN charge ON charge.payment_id = mine.payment_id LEFT JOIN checkout ON checkout.id = charge.checkout_id
       UNION ALL
       SELECT mine.id, call.done_at, 'refund', 0, (call.request->>'amountCents')::int FROM mine JOIN provider_call call ON call.booking_id = mine.id WHERE call.kind = 'refund' AND call.status = 'done'
       UNION ALL
       SELECT mine.id, dispute.closed_at, 'dispute', 0, dispute.amount_cents FROM mine JOIN card_dispute dispute ON dispute.booking_id = mine.id WHERE dispute.status = 'lost')
     SELECT to_char(moved.at AT TIME ZONE mine.time_zone, 'YYYY-MM-DD') AS day, mine.number AS booking, mine.title, mine.sawyer, moved.what, moved.paid AS "paidCents", moved.back AS "backCents"
     FROM moved JOIN mine ON mine.id = moved.id WHERE to_char(moved.at AT TIME ZONE mine.time_zone, 'YYYY-MM') LIKE $2 ORDER BY moved.at, mine.number`,
    [landownerId, `${period}%`],
  );
  return { period, lines, totals: { paidCents: lines.reduce((sum, line) => sum + line.paidCents, 0), backCents: lines.reduce((sum, line) => sum + line.backCents, 0) } };
}
