import type { Cents } from '~/domain/money.ts';
import { abilities } from '~/domain/permissions.ts';
import type { BidState } from '~/domain/states/bid.ts';
import type { ListCover } from '~/domain/trade/list-cover.ts';
import { formatDayWithYear, type Day } from '~/domain/time.ts';
import type { BidSort } from '~/domain/trade/comparison.ts';
import type { BidMill } from '~/domain/trade/bid-estimate.ts';
import { authorize, rolesOnListing } from '../authorize.ts';
import type { FrozenEstimate } from '../bid-work.ts';
import { rows } from '../db.ts';
import { notFound, signedOut } from '../errors.ts';
import { listedPieces } from '../listed-pieces.ts';
import { Booking } from '../models/booking.ts';
import { Listing } from '../models/listing.ts';
import type { Viewer } from '../viewer.ts';
import { sawyerDays } from './open-days.ts';
import { earliestOpenDay } from '~/domain/trade/milling-days.ts';

export interface ComparedBid {
  readonly id: string;
  readonly status: BidState;
  readonly sawyerId: string;
  readonly sawyer: string;
  readonly settledJobs: number;
  readonly reviews: number;
  readonly stars: number | null;
  /** `certificate seen, expires on …`; null when none was seen or it has expired. */
  readonly certificate: string | null;
  /** The same of the credential for lumber of a dwelling. */
  readonly lumberCertificate: string | null;
  /** The grade or certification for lumber of a dwelling that the sawyer states; empty for none. */
  readonly lumberCredential: string;
  readonly roadMiles: number;
  readonly mill: BidMill;
  /** What this mill makes of the cut list as it stands now; null while that is worked out. */
  readonly cover: ListCover | null;
  /** No cover has come for an hour: something hinders the planner. */
  readonly coverIsLate: boolean;
  readonly frozen: FrozenEstimate;
  readonly expectedCents: Cents;
  readonly lowCents: Cents;
  readonly highCents: Cents;
  readonly holdCents: Cents;
  readonly expectedBf: number;
  readonly expectedBy: string;
  readonly overrideReason: string | null;
  readonly earliestOpenDay: Day | null;
  readonly daysOffered: readonly Day[];
  readonly message: string;
}

interface Row {
  readonly id: string;
  readonly status: BidState;
  readonly sawyer_id: string;
  readonly sawyer: string;
  readonly settled_jobs: number;
  readonly reviews: number;
  readonly stars: number | null;
  readonly certificate_expires_on: string | null;
  readonly lumber_expires_on: string | null;
  readonly road_miles: number;
  readonly mill: BidMill;
  readonly mill_id: string;
  readonly listing_revision: number;
  readonly cut_list: ListCover | null;
  readonly updated_at: Date;
  readonly lumber_credential: string | null;
  readonly estimate: FrozenEstimate;
  readonly expected_cents: number;
  readonly low_cents: number;
  readonly high_cents: number;
  readonly hold_cents: number;
  readonly expected_bf_hundredths: number;
  readonly expected_by: string;
  readonly override_reason: string | null;
  readonly days_offered: string[];
  readonly message: string;
}

// Leans on bid_of_listing, booking_of_sawyer and review_of_subject; a listing has tens of bids at most.
const SQL = `
  SELECT b.id, b.status, b.sawyer_id, coalesce(nullif(p.business_name, ''), a.name) AS sawyer, b.road_miles, b.mill, b.mill_id, b.listing_revision, b.cut_list, b.updated_at, p.lumber_credential, b.estimate,
    b.expected_cents, b.low_cents, b.high_cents, b.hold_cents, b.expected_bf_hundredths, b.expected_by, b.override_reason,
    b.days_offered::text[] AS days_offered, b.message,
    (SELECT count(*)::int FROM booking k WHERE k.sawyer_id = b.sawyer_id AND k.status = 'settled') AS settled_jobs,
    r.reviews, r.stars,
    (SELECT c.expires_on::text FROM certificate c WHERE c.sawyer_id = b.sawyer_id AND c.kind = 'insurance' AND c.expires_on >= $2::date) AS certificate_expires_on,
    (SELECT c.expires_on::text FROM certificate c WHERE c.sawyer_id = b.sawyer_id AND c.kind = 'lumber' AND c.expires_on >= $2::date) AS lumber_expires_on
  FROM bid b
  JOIN account a ON a.id = b.sawyer_id
  LEFT JOIN sawyer_profile p ON p.account_id = b.sawyer_id
  CROSS JOIN LATERAL (SELECT count(*)::int AS reviews, avg(stars)::float8 AS stars FROM review WHERE subject_id = b.sawyer_id AND hidden_at IS NULL) r
  WHERE b.listing_id = $1 AND b.status IN ('open', 'toConfirm', 'chosen') AND a.status = 'active'
  ORDER BY b.created_at, b.id`;

/** Every live bid on a listing, worked on the same logs, for its owner to compare. Those to confirm come last: theirs are the old logs. */
export async function compareBids(viewer: Viewer | null, listingNumber: number, sort: BidSort, at: Date) {
  if (!viewer) throw signedOut();
  const listing = Number.isSafeInteger(listingNumber) ? await Listing.findOne({ where: { number: listingNumber } }) : null;
  if (!listing) throw notFound('listing');
  const roles = rolesOnListing(viewer, listing);
  if (!roles.has('owner') && !roles.has('moderator')) throw notFound('listing');
  authorize(viewer, 'listing', 'seeBids', roles, listing.status);
  const found = await rows<Row>(SQL, [listing.id, at.toISOString().slice(0, 10)]);
  const bids: ComparedBid[] = [];
  for (const row of found) {
    const days = await sawyerDays(row.sawyer_id, listing.timeZone ?? 'UTC', at, row.days_offered);
    bids.push(toBid(row, earliestOpenDay(days), at));
  }
  const booking = await Booking.findOne({ where: { listingId: listing.id }, order: [['createdAt', 'DESC']] });
  const pieces = await listedPieces(listing.id);
  return { listing, wants: { list: pieces.length > 0, dwelling: pieces.some(({ forDwelling }) => forDwelling) }, bids: bids.sort((a, b) => Number(a.status === 'toConfirm') - Number(b.status === 'toConfirm') || order[sort](a, b)), booking: listing.status === 'matched' || listing.status === 'done' ? booking : null, can: abilities('listing', roles, listing.status) };
}

const perBf = (bid: ComparedBid): number => bid.frozen.estimate.quote.costPerBfCents ?? Number.POSITIVE_INFINITY;
const order: Readonly<Record<BidSort, (a: ComparedBid, b: ComparedBid) => number>> = {
  estimate: (a, b) => a.expectedCents - b.expectedCents,
  perBf: (a, b) => perBf(a) - perBf(b),
  day: (a, b) => (a.earliestOpenDay ?? '9').localeCompare(b.earliestOpenDay ?? '9'),
  distance: (a, b) => a.roadMiles - b.roadMiles,
};

const seenWords = (until: Day | null): string | null => (until === null ? null : `certificate seen, expires on ${formatDayWithYear(until)}`);

const LATE_MS = 3_600_000;

const toBid = (row: Row, earliest: Day | null, at: Date): ComparedBid => ({
  id: row.id, status: row.status, sawyerId: row.sawyer_id, sawyer: row.sawyer, settledJobs: row.settled_jobs, reviews: row.reviews, stars: row.stars,
  certificate: seenWords(row.certificate_expires_on), lumberCertificate: seenWords(row.lumber_expires_on),
  roadMiles: row.road_miles, mill: row.mill, lumberCredential: row.lumber_credential ?? '',
  cover: row.cut_list?.revision === row.listing_revision && row.cut_list.millId === row.mill_id ? row.cut_list : null, coverIsLate: at.getTime() - row.updated_at.getTime() > LATE_MS, frozen: row.estimate, expectedCents: row.expected_cents, lowCents: row.low_cents, highCents: row.high_cents,
  holdCents: row.hold_cents, expectedBf: row.expected_bf_hundredths / 100, expectedBy: row.expected_by, overrideReason: row.override_reason,
  earliestOpenDay: earliest, daysOffered: row.days_offered, message: row.message,
});
