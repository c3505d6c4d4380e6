import type { Cents } from '~/domain/money.ts';
import type { BidState } from '~/domain/states/bid.ts';
import { whyLost } from '~/domain/trade/why-lost.ts';
import type { DeskAsked, DeskGroup, DeskSort } from '~/schemas/bids-desk.ts';
import { authorize } from '../authorize.ts';
import { rows } from '../db.ts';
import { baseRoles, type Viewer } from '../viewer.ts';
import type { SawyerSetUp } from './sawyer-setup.ts';
import { setUpOf } from './sawyer-setup.ts';

/** The states of each group of the desk. */
const states: Readonly<Record<Exclude<DeskGroup, 'all'>, readonly BidState[]>> = {
  live: ['open', 'toConfirm'], toConfirm: ['toConfirm'], chosen: ['chosen'], lost: ['declined', 'lapsed', 'released'], withdrawn: ['withdrawn'],
};

export interface DeskBid {
  readonly id: string;
  readonly status: BidState;
  readonly listing: number;
  readonly title: string;
  readonly town: string;
  readonly roadMiles: number;
  readonly expectedCents: Cents;
  readonly holdCents: Cents;
  readonly expectedBf: number;
  readonly closesAt: Date | null;
  readonly timeZone: string;
  readonly updatedAt: Date;
  readonly mill: string;
  readonly booking: number | null;
  /** Why it is over; null while it is live or chosen. */
  readonly why: string | null;
  readonly can: { readonly withdraw: boolean };
}

export interface BidsDesk {
  readonly bids: readonly DeskBid[];
  readonly counts: Readonly<Record<DeskGroup, number>>;
  readonly setUp: SawyerSetUp;
  /** Whether there are more than are shown. */
  readonly more: boolean;
}

const MOST = 500;
const order: Readonly<Record<DeskSort, string>> = {
  updated: 'b.updated_at DESC',
  closing: 'l.closes_at ASC NULLS LAST',
  estimate: 'b.expected_cents DESC',
  miles: 'b.road_miles ASC',
};

type Found = Omit<DeskBid, 'why' | 'can'> & {
  readonly listingStatus: string;
  readonly bookingStatus: string | null;
  readonly daysOffered: string[];
  readonly chosenCents: number | null;
  readonly chosenDays: string[] | null;
};

const toDesk = ({ listingStatus, bookingStatus, daysOffered, chosenCents, chosenDays, ...bid }: Found): DeskBid => ({
  ...bid,
  why: whyLost({ status: bid.status, listingStatus, bookingStatus, expectedCents: bid.expectedCents, daysOffered, chosen: chosenCents === null ? null : { expectedCents: chosenCents, daysOffered: chosenDays ?? [] } }),
  can: { withdraw: states.live.includes(bid.status) },
});

/** A sawyer's own bids (at most 500 shown), with a count for each group. Leans on bid_of_sawyer and bid_of_listing. @throws Refusal when the viewer is no sawyer */
export async function bidsDesk(viewer: Viewer | null, { show, sort, words }: DeskAsked): Promise<BidsDesk> {
  authorize(viewer, 'sawyer', 'keepProfile', baseRoles(viewer));
  const wanted: readonly BidState[] = show === 'all' ? [...states.live, ...states.chosen, ...states.lost, ...states.withdrawn] : states[show];
  const pattern = words === '' ? null : `%${words.replace(/[\\%_]/g, (sign) => `\\${sign}`)}%`;
  // The bid chosen instead was decided at the very instant at which this one was declined.
  const found = await rows<Found>(
    `SELECT b.id, b.status, l.number AS listing, coalesce(l.title, '') AS title, concat_ws(', ', l.town, l.state) AS town, l.status AS "listingStatus", b.road_miles AS "roadMiles",
       b.expected_cents AS "expectedCents", b.hold_cents AS "holdCents", b.expected_bf_hundredths / 100.0::float8 AS "expectedBf", l.closes_at AS "closesAt",
       coalesce(l.time_zone, 'UTC') AS "timeZone", b.updated_at AS "updatedAt", b.mill ->> 'name' AS mill, b.days_offered::text[] AS "daysOffered",
       k.number AS booking, k.status AS "bookingStatus", c.expected_cents AS "chosenCents", c.days_offered::text[] AS "chosenDays"
     FROM bid b JOIN listing l ON l.id = b.listing_id LEFT JOIN booking k ON k.bid_id = b.id
       LEFT JOIN bid c ON b.status = 'declined' AND c.listing_id = b.listing_id AND c.status IN ('chosen', 'released') AND c.decided_at = b.decided_at
     WHERE b.sawyer_id = $1 AND b.status = ANY ($2) AND ($3::text IS NULL OR l.title ILIKE $3 OR l.town ILIKE $3 OR l.number::text = $4)
     ORDER BY ${order[sort]}, b.id LIMIT ${MOST + 1}`,
    [viewer.id, wanted, pattern, words],
  );
  const counted = await rows<{ status: BidState; count: number }>('SELECT status, count(*)::int AS count FROM bid WHERE sawyer_id = $1 GROUP BY status', [viewer.id]);
  const of = (some: readonly BidState[]): number => counted.filter(({ status }) => some.includes(status)).reduce((sum, { count }) => sum + count, 0);
  return {
    bids: found.slice(0, MOST).map(toDesk),
    more: found.length > MOST,
    counts: { live: of(states.live), toConfirm: of(states.toConfirm), chosen: of(states.chosen), lost: of(states.lost), withdrawn: of(states.withdrawn), all: counted.reduce((sum, { count }) => sum + count, 0) },
    setUp: await setUpOf(viewer.id),
  };
}
