import { oneRow } from '../db.ts';

/** What keeps an account from being closed, counted. */
export interface OpenAffairs {
  readonly liveBookings: number;
  /** Payments that are held, being paid out, or paid and not yet accounted for. */
  readonly openPayments: number;
  /** Bookings on which something is still held or owed in the ledger. */
  readonly owedBookings: number;
}

/** Bookings that are not over and money that is not settled, of one account on either side. Indexes: booking_of_landowner, booking_of_sawyer. */
export async function openAffairs(accountId: string): Promise<OpenAffairs> {
  const found = await oneRow<OpenAffairs>(
    `WITH mine AS (SELECT id, status FROM booking WHERE landowner_id = $1 OR sawyer_id = $1),
     owed AS (
       SELECT booking_id FROM ledger_entry
       WHERE booking_id IN (SELECT id FROM mine) AND account IN ('landowner held', 'sawyer payable', 'refund payable', 'sawyer receivable')
       GROUP BY booking_id, account HAVING sum(amount_cents) <> 0)
     SELECT (SELECT count(*)::int FROM mine WHERE status NOT IN ('settled', 'lapsed', 'cancelled')) AS "liveBookings",
       (SELECT count(*)::int FROM held_payment WHERE booking_id IN (SELECT id FROM mine) AND status IN ('held', 'settling')) AS "openPayments",
       (SELECT count(DISTINCT booking_id)::int FROM owed) AS "owedBookings"`,
    [accountId],
  );
  return found ?? { liveBookings: 0, openPayments: 0, owedBookings: 0 };
}

const several = (count: number, one: string, many: string): string => `${count} ${count === 1 ? one : many}`;

/** The same in words for the person; null when nothing is open. */
export function openAffairsWords({ liveBookings, openPayments, owedBookings }: OpenAffairs): string | null {
  if (liveBookings > 0) return `You have ${several(liveBookings, 'booking', 'bookings')} under way. Finish or cancel ${liveBookings === 1 ? 'it' : 'them'} first; then come back.`;
  if (openPayments > 0 || owedBookings > 0) return 'Money of a finished booking is still on its way. It usually takes a few minutes; then come back.';
  return null;
}
