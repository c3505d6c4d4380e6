import type { BookingState } from '~/domain/states/booking.ts';
import { rows } from '../db.ts';
import type { Viewer } from '../viewer.ts';

export interface BookingRow {
  readonly number: number;
  readonly status: BookingState;
  readonly side: 'landowner' | 'sawyer';
  readonly otherName: string;
  readonly title: string;
  readonly town: string;
  readonly startsAt: Date | null;
  readonly timeZone: string;
  /** Whether an open day proposal of the other side waits for this reader. */
  readonly toConfirm: boolean;
}

/** A reader's bookings on both sides, those that still go on first, then the newest. Leans on booking_of_landowner and booking_of_sawyer. */
export const bookingsOf = (viewer: Viewer): Promise<BookingRow[]> =>
  rows<BookingRow>(
    `SELECT booking.number, booking.status, booking.starts_at AS "startsAt", booking.time_zone AS "timeZone",
       CASE WHEN booking.landowner_id = $1 THEN 'landowner' ELSE 'sawyer' END AS side,
       other.name AS "otherName", listing.title, concat_ws(', ', listing.town, listing.state) AS town,
       EXISTS (SELECT 1 FROM day_proposal WHERE booking_id = booking.id AND status = 'open' AND proposed_by <> $1) AS "toConfirm"
     FROM booking
     JOIN listing ON listing.id = booking.listing_id
     JOIN account other ON other.id = CASE WHEN booking.landowner_id = $1 THEN booking.sawyer_id ELSE booking.landowner_id END
     WHERE booking.landowner_id = $1 OR booking.sawyer_id = $1
     ORDER BY booking.status IN ('settled', 'lapsed', 'cancelled'), booking.starts_at NULLS FIRST, booking.number DESC
     LIMIT 500`,
    [viewer.id],
  );
