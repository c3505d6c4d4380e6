import type { ListingState } from '~/domain/states/listing.ts';
import { rows } from '../db.ts';
import { signedOut } from '../errors.ts';
import type { Viewer } from '../viewer.ts';

export interface MyListing {
  readonly number: number;
  readonly status: ListingState;
  readonly title: string | null;
  readonly updatedAt: Date;
  readonly closesAt: Date | null;
  readonly lapsesAt: Date | null;
  readonly timeZone: string | null;
  readonly boardFeet: number;
  readonly isHidden: boolean;
  /** Bids that can be chosen now. */
  readonly openBids: number;
  /** Bids that wait for their sawyer to confirm them. */
  readonly toConfirm: number;
  /** The live or finished booking. */
  readonly booking: number | null;
}

const order = `array_position(ARRAY['closed', 'open', 'draft', 'matched', 'done', 'withdrawn', 'lapsed'], listing.status)`;

/** An owner's listings, those that want something first. Leans on `listing_of_owner`, `bid_of_listing` and `one_live_booking_per_listing`. */
export async function myListings(viewer: Viewer | null): Promise<MyListing[]> {
  if (!viewer) throw signedOut();
  return rows<MyListing>(
    `SELECT listing.number, listing.status, listing.title, listing.updated_at AS "updatedAt", listing.closes_at AS "closesAt", listing.lapses_at AS "lapsesAt",
       listing.time_zone AS "timeZone", listing.board_feet AS "boardFeet", listing.hidden_at IS NOT NULL AS "isHidden",
       (SELECT count(*)::int FROM bid WHERE bid.listing_id = listing.id AND bid.status = 'open') AS "openBids",
       (SELECT count(*)::int FROM bid WHERE bid.listing_id = listing.id AND bid.status = 'toConfirm') AS "toConfirm",
       (SELECT booking.number FROM booking WHERE booking.listing_id = listing.id AND booking.status NOT IN ('lapsed', 'cancelled')) AS booking
     FROM listing WHERE listing.owner_id = $1 ORDER BY ${order}, listing.updated_at DESC LIMIT 500`,
    [viewer.id],
  );
}
