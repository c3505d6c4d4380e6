import type { Cents } from '~/domain/money.ts';
import type { BidState } from '~/domain/states/bid.ts';
import { authorize } from '../authorize.ts';
import { rows } from '../db.ts';
import { baseRoles, type Viewer } from '../viewer.ts';
import type { SawyerSetUp } from './sawyer-setup.ts';
import { setUpOf } from './sawyer-setup.ts';

/** How the desk groups bids. */
export const bidGroups = { live: ['open', 'toConfirm'], won: ['chosen'], over: ['declined', 'withdrawn', 'lapsed', 'released'] } as const satisfies Record<string, readonly BidState[]>;
export type BidGroup = keyof typeof bidGroups | 'all';

export interface DeskBid {
  readonly id: string;
  readonly status: BidState;
  readonly listing: number;
  readonly title: string;
  readonly town: string;
  readonly listingStatus: string;
  readonly listingRevision: number;
  readonly roadMiles: number;
  readonly expectedCents: Cents;
  readonly holdCents: Cents;
  readonly expectedBf: number;
  readonly expectedBy: string;
  readonly closesAt: Date;
  readonly timeZone: string;
  readonly updatedAt: Date;
  readonly booking: number | null;
}

const MOST = 500;

/** A sawyer's own bids, newest first (at most 500 shown), with a count for each group. Leans on bid_of_sawyer. */
export async function bidsDesk(viewer: Viewer | null, group: BidGroup): Promise<{ readonly bids: readonly DeskBid[]; readonly counts: Readonly<Record<BidGroup, number>>; readonly setUp: SawyerSetUp }> {
  authorize(viewer, 'sawyer', 'keepProfile', baseRoles(viewer));
  const wanted: readonly BidState[] = group === 'all' ? Object.values(bidGroups).flat() : bidGroups[group];
  const bids = await rows<DeskBid>(
    `SELECT b.id, b.status, l.number AS listing, l.title, coalesce(l.town, '') AS town, l.status AS "listingStatus", l.revision AS "listingRevision", b.road_miles AS "roadMiles",
       b.expected_cents AS "expectedCents", b.hold_cents AS "holdCents", b.expected_bf_hundredths / 100.0::float8 AS "expectedBf", b.expected_by AS "expectedBy",
       l.closes_at AS "closesAt", coalesce(l.time_zone, 'UTC') AS "timeZone", b.updated_at AS "updatedAt", k.number AS booking
     FROM bid b JOIN listing l ON l.id = b.listing_id LEFT JOIN booking k ON k.bid_id = b.id
     WHERE b.sawyer_id = $1 AND b.status = ANY ($2) ORDER BY b.updated_at DESC, b.id LIMIT ${MOST}`,
    [viewer.id, wanted],
  );
  const counted = await rows<{ status: BidState; count: number }>('SELECT status, count(*)::int AS count FROM bid WHERE sawyer_id = $1 GROUP BY status', [viewer.id]);
  const of = (states: readonly BidState[]): number => counted.filter(({ status }) => states.includes(status)).reduce((sum, { count }) => sum + count, 0);
  return { bids, counts: { live: of(bidGroups.live), won: of(bidGroups.won), over: of(bidGroups.over), all: counted.reduce((sum, { count }) => sum + count, 0) }, setUp: await setUpOf(viewer.id) };
}
