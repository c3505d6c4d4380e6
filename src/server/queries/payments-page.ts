import type { PaymentState } from '~/domain/states/payment.ts';
import { rows } from '../db.ts';
import type { Viewer } from '../viewer.ts';

/** One booking's payment, as the landowner who pays sees it. */
export interface PaymentLine {
  readonly bookingNumber: number;
  readonly title: string;
  readonly status: PaymentState;
  readonly disputed: boolean;
  readonly dueCents: number;
  readonly paidCents: number;
  readonly backCents: number;
  readonly heldCents: number;
  readonly at: Date;
}

/** Every payment of a landowner, newest first. Leans on `booking_of_landowner`. */
export const paymentsPage = (viewer: Viewer): Promise<PaymentLine[]> =>
  rows<PaymentLine>(
    `SELECT booking.number AS "bookingNumber", coalesce(listing.title, '') AS title, payment.status, payment.disputed_at IS NOT NULL AS disputed, payment.due_cents AS "dueCents",
       coalesce((SELECT sum(amount_cents) FROM charge WHERE payment_id = payment.id), 0)::int AS "paidCents",
       coalesce((SELECT sum((request->>'amountCents')::int) FROM provider_call WHERE payment_id = payment.id AND kind = 'refund' AND status = 'done'), 0)::int AS "backCents",
       coalesce((SELECT -sum(amount_cents) FROM ledger_entry WHERE booking_id = booking.id AND account = 'landowner held'), 0)::int AS "heldCents",
       payment.updated_at AS at
     FROM held_payment payment JOIN booking ON booking.id = payment.booking_id JOIN listing ON listing.id = booking.listing_id
     WHERE booking.landowner_id = $1 ORDER BY payment.created_at DESC LIMIT 100`,
    [viewer.id],
  );

/** The months, newest first, in which something of a landowner's was paid or came back. */
export async function paidMonths(viewer: Viewer): Promise<string[]> {
  const found = await rows<{ month: string }>(
    `SELECT DISTINCT to_char(moved.at AT TIME ZONE booking.time_zone, 'YYYY-MM') AS month
     FROM booking JOIN held_payment payment ON payment.booking_id = booking.id
       CROSS JOIN LATERAL (SELECT received_at AS at FROM charge WHERE payment_id = payment.id UNION ALL SELECT done_at FROM provider_call WHERE payment_id = payment.id AND kind = 'refund' AND status = 'done') moved
     WHERE booking.landowner_id = $1 ORDER BY month DESC LIMIT 120`,
    [viewer.id],
  );
  return found.map(({ month }) => month);
}
