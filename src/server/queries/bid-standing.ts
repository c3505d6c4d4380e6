import type { Cents } from '~/domain/money.ts';
import { oneRow } from '../db.ts';
import type { Viewer } from '../viewer.ts';

/** Fewer others than this, and a figure about them would tell on one of them. */
const LEAST_OTHERS = 5;
/** Figures about others are rounded to this many cents, for the same reason. */
const ROUNDED_CENTS = 5;
const LOOK_BACK_DAYS = 365;

/** How a sawyer's bids have done over a year, and how their estimates lie among those of others nearby. */
export interface BidStanding {
  readonly chosen: number;
  /** Bids that a landowner decided on: chosen, or another was. */
  readonly decided: number;
  /** The middle of the sawyer's own estimates, cents per bf sawn; null without any. */
  readonly ownPerBf: Cents | null;
  /** The miles within which others are looked at. */
  readonly miles: number;
  /** With fewer others than these nothing is told of them. */
  readonly leastOthers: number;
  /** Cost per bf of other sawyers' estimates, each sawyer counted once; null with too few of them. */
  readonly others: { readonly sawyers: number; readonly lower: Cents; readonly middle: Cents; readonly upper: Cents } | null;
}

/**
 * A sawyer's standing. Others count when they bid, within a year, on listings that lie within the miles this sawyer travels (measured
 * between coarse points). Leans on listing_open_near's geography, bid_of_listing and bid_of_sawyer.
 */
export async function bidStanding(viewer: Viewer, at: Date): Promise<BidStanding> {
  const since = new Date(at.getTime() - LOOK_BACK_DAYS * 86_400_000);
  const own = await oneRow<{ chosen: number; decided: number; perBf: number | null; miles: number | null }>(
    `SELECT count(*) FILTER (WHERE status IN ('chosen', 'released') AND decided_at > $2)::int AS chosen,
       count(*) FILTER (WHERE status IN ('chosen', 'released', 'declined') AND decided_at > $2)::int AS decided,
       percentile_cont(0.5) WITHIN GROUP (ORDER BY 100.0 * expected_cents / expected_bf_hundredths) FILTER (WHERE expected_bf_hundredths > 0 AND updated_at > $2) AS "perBf",
       (SELECT travel_miles FROM sawyer_profile WHERE account_id = $1) AS miles
     FROM bid WHERE sawyer_id = $1`,
    [viewer.id, since],
  );
  const others = await oneRow<{ sawyers: number; lower: number | null; middle: number | null; upper: number | null }>(
    `WITH each AS (
       SELECT bid.sawyer_id, percentile_cont(0.5) WITHIN GROUP (ORDER BY 100.0 * bid.expected_cents / bid.expected_bf_hundredths) AS per_bf
       FROM sawyer_profile me JOIN listing ON ST_DWithin(listing.coarse, me.base, me.travel_miles * 1609.344) JOIN bid ON bid.listing_id = listing.id
       WHERE me.account_id = $1 AND bid.sawyer_id <> $1 AND bid.status <> 'withdrawn' AND bid.updated_at > $2 AND bid.expected_bf_hundredths > 0
       GROUP BY bid.sawyer_id)
     SELECT count(*)::int AS sawyers, percentile_cont(0.25) WITHIN GROUP (ORDER BY per_bf) AS lower, percentile_cont(0.5) WITHIN GROUP (ORDER BY per_bf) AS middle,
       percentile_cont(0.75) WITHIN GROUP (ORDER BY per_bf) AS upper FROM each`,
    [viewer.id, since],
  );
  const rounded = (cents: number | null): Cents => Math.round((cents ?? 0) / ROUNDED_CENTS) * ROUNDED_CENTS;
  return {
    chosen: own?.chosen ?? 0,
    decided: own?.decided ?? 0,
    ownPerBf: own?.perBf === null || own?.perBf === undefined ? null : Math.round(own.perBf),
    miles: own?.miles ?? 50,
    leastOthers: LEAST_OTHERS,
    others: others && others.sawyers >= LEAST_OTHERS ? { sawyers: others.sawyers, lower: rounded(others.lower), middle: rounded(others.middle), upper: rounded(others.upper) } : null,
  };
}
