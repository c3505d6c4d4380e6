import type { ChargeLeft } from '~/domain/trade/allocation.ts';
import { rows } from './db.ts';

/** The charges of a payment that count towards its hold, oldest first, with what of each is not refunded, transferred or promised. */
export const chargesLeft = (paymentId: string): Promise<ChargeLeft[]> =>
  rows<ChargeLeft>(
    `SELECT charge.id,
       (charge.amount_cents
         - coalesce((SELECT sum((call.request->>'amountCents')::int) FROM provider_call call WHERE call.charge_id = charge.id AND call.kind IN ('transfer', 'refund') AND call.status <> 'dropped'), 0)
         - coalesce((SELECT sum(amount_cents) FROM card_dispute WHERE charge_id = charge.id AND status <> 'won'), 0))::int AS "leftCents"
     FROM charge WHERE charge.payment_id = $1 AND charge.returned_because IS NULL ORDER BY charge.received_at, charge.id`,
    [paymentId],
  );
