import { abilities, type Action } from '~/domain/permissions.ts';
import { bookingStates, type BookingState } from '~/domain/states/booking.ts';
import { rolesOnBooking } from '../../authorize.ts';
import { oneRow, rows } from '../../db.ts';
import { anywhere, DESK_PAGE, openDesk, pageOf } from '../../desk.ts';
import { notFound } from '../../errors.ts';
import { balances } from '../../ledger.ts';
import type { Viewer } from '../../viewer.ts';
import { sqlBuilder } from '../sql-builder.ts';
import { historyOf, type DeskEvent } from './events.ts';

export interface DeskBookingRow {
  readonly id: string;
  readonly number: number;
  readonly title: string;
  readonly listing: number;
  readonly status: BookingState;
  readonly landownerId: string;
  readonly landownerName: string;
  readonly sawyerId: string;
  readonly sawyerName: string;
  readonly startsAt: Date | null;
  readonly timeZone: string;
  readonly payment: string | null;
  readonly disputed: boolean;
}

const from = `FROM booking k JOIN listing l ON l.id = k.listing_id JOIN account a ON a.id = k.landowner_id JOIN account s ON s.id = k.sawyer_id LEFT JOIN held_payment h ON h.booking_id = k.id`;
const columns = `k.id, k.number, coalesce(l.title, '') AS title, l.number AS listing, k.status, k.landowner_id AS "landownerId", a.name AS "landownerName", k.sawyer_id AS "sawyerId", s.name AS "sawyerName",
  k.starts_at AS "startsAt", k.time_zone AS "timeZone", h.status AS payment, h.disputed_at IS NOT NULL AS disputed`;

export interface BookingsAsked {
  readonly q: string;
  /** A state, `live` for all that are not over, or empty. */
  readonly state: string;
  readonly before: number | null;
}
export const deskBookingStates = bookingStates.states;

/** Bookings, newest first. Walks the unique number backwards. */
export async function deskBookings(viewer: Viewer | null, asked: BookingsAsked): Promise<{ readonly bookings: readonly DeskBookingRow[]; readonly next: number | null }> {
  openDesk(viewer);
  const sql = sqlBuilder();
  const where = ['true'];
  if (asked.q !== '') {
    const pattern = sql.value(anywhere(asked.q));
    const number = sql.value(asked.q);
    where.push(`(k.number::text = ${number} OR l.number::text = ${number} OR l.title ILIKE ${pattern} OR a.name ILIKE ${pattern} OR s.name ILIKE ${pattern})`);
  }
  if (asked.state === 'live') where.push(`k.status NOT IN ('settled', 'lapsed', 'cancelled')`);
  else if (asked.state !== '') where.push(`k.status = ${sql.value(asked.state)}`);
  if (asked.before !== null) where.push(`k.number < ${sql.value(asked.before)}::int`);
  const found = await rows<DeskBookingRow>(`SELECT ${columns} ${from} WHERE ${where.join(' AND ')} ORDER BY k.number DESC LIMIT ${DESK_PAGE + 1}`, sql.values);
  const { rows: bookings, last } = pageOf(found);
  return { bookings, next: last?.number ?? null };
}

export interface DeskBooking extends DeskBookingRow {
  readonly holdCents: number | null;
  readonly payBy: Date | null;
  readonly signBy: Date | null;
  readonly cancelReason: string | null;
  readonly hasTally: boolean;
  readonly landownerStatus: string;
  readonly sawyerStatus: string;
  /** What the ledger says is held or owed on this booking, in cents. */
  readonly money: Awaited<ReturnType<typeof balances>>;
  readonly calls: readonly { readonly id: string; readonly kind: string; readonly status: string; readonly error: string | null; readonly createdAt: Date }[];
  readonly history: readonly DeskEvent[];
  readonly can: Record<Action<'booking'>, boolean>;
}

/** One booking at the desk, without the exact place. @throws Refusal `notFound` */
export async function deskBooking(viewer: Viewer | null, number: number | null): Promise<DeskBooking> {
  openDesk(viewer);
  const found = await oneRow<Omit<DeskBooking, 'money' | 'calls' | 'history' | 'can'>>(
    `SELECT ${columns}, h.due_cents AS "holdCents", k.pay_by AS "payBy", k.sign_by AS "signBy", k.cancel_reason AS "cancelReason",
       EXISTS (SELECT 1 FROM tally WHERE tally.booking_id = k.id) AS "hasTally", a.status AS "landownerStatus", s.status AS "sawyerStatus"
     ${from} WHERE k.number = $1`,
    [number],
  );
  if (!found) throw notFound('booking');
  const calls = await rows<DeskBooking['calls'][number]>('SELECT id, kind, status, error, created_at AS "createdAt" FROM provider_call WHERE booking_id = $1 ORDER BY created_at', [found.id]);
  return {
    ...found, calls, money: await balances(found.id), history: await historyOf(viewer, 'booking', found.id),
    can: abilities('booking', rolesOnBooking(viewer, found), found.status),
  };
}
