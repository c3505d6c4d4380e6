import { inTransaction, rows } from '../db.ts';
import { FoundListing } from '../models/finding.ts';
import { Listing } from '../models/listing.ts';
import { jobsForSawyer, sawyerAtWork } from '../queries/jobs-for-sawyer.ts';
import { pointOf } from '../queries/listing-page.ts';
import { perHourOfJob } from '../queries/logs-by-worth.ts';
import { tellSearch } from './tell-searches.ts';

interface Asking {
  id: string;
  sawyerId: string;
  tells: 'at-once' | 'daily';
  fits: boolean;
  minPerHourCents: number | null;
}

/**
 * The searches that ask for this listing in everything the database can tell, those that write at once first. Leans on
 * `saved_search_near`: no search reaches farther than 500 miles. Nobody is told of their own listing, of one whose owner they have
 * blocked or who has blocked them, or of one they have been told of before.
 */
const askingFor = (listingId: string, at: Date): Promise<Asking[]> =>
  rows<Asking>(
    `SELECT s.id, s.sawyer_id AS "sawyerId", s.tells, s.fits, s.min_per_hour_cents AS "minPerHourCents"
     FROM listing l
     JOIN saved_search s ON s.tells <> 'stopped' AND (s.origin IS NULL OR (ST_DWithin(s.origin, l.coarse, 804672, false) AND ST_DWithin(s.origin, l.coarse, s.radius_mi * 1609.344, false)))
     JOIN account a ON a.id = s.sawyer_id AND a.status = 'active' AND a.is_sawyer AND a.email_confirmed_at IS NOT NULL
     WHERE l.id = $1 AND l.status = 'open' AND l.hidden_at IS NULL AND l.closes_at > $2 AND s.sawyer_id <> l.owner_id
       AND (s.species IS NULL OR l.species @> ARRAY[s.species])
       AND (s.min_board_feet IS NULL OR l.board_feet >= s.min_board_feet)
       AND (s.max_largest_end_in IS NULL OR l.largest_end_ob_in <= s.max_largest_end_in + 0.005)
       AND (NOT s.closing OR l.closes_at <= $2 + interval '7 days')
       AND NOT EXISTS (SELECT 1 FROM account_block b WHERE (b.blocker_id, b.blocked_id) IN ((s.sawyer_id, l.owner_id), (l.owner_id, s.sawyer_id)))
       AND NOT EXISTS (SELECT 1 FROM found_listing f WHERE f.sawyer_id = s.sawyer_id AND f.listing_id = l.id)
     ORDER BY s.tells = 'daily', s.created_at, s.id`,
    [listingId, at],
  );

/** Whether the listing passes what only the sawyer's mill and rates can tell. */
async function suits({ sawyerId, fits, minPerHourCents }: Asking, listing: Listing): Promise<boolean> {
  if (!fits && minPerHourCents === null) return true;
  const sawyer = await sawyerAtWork(sawyerId);
  if (!sawyer || !listing.coarse) return false;
  const helpers = (listing.access as { helpers?: number } | null)?.helpers ?? 0;
  const job = (await jobsForSawyer(sawyer, [{ id: listing.id, coarse: pointOf(listing.coarse), helpers }])).get(listing.id);
  return job !== undefined && (!fits || job.fit.fits) && (minPerHourCents === null || perHourOfJob(job) >= minPerHourCents);
}

/**
 * Finds who asked to be told of a listing that has come on show, opened again or changed. Each sawyer is told of a listing once
 * ever, whichever search found it; a search that writes at once does so in the same transaction. May run as often as one likes.
 */
export async function matchSearches(listingId: string, at: Date): Promise<void> {
  const listing = await Listing.findByPk(listingId);
  if (!listing) return;
  const done = new Set<string>();
  for (const asking of await askingFor(listingId, at)) {
    if (done.has(asking.sawyerId) || !(await suits(asking, listing))) continue;
    done.add(asking.sawyerId);
    await inTransaction(async () => {
      // The key decides between two that find it at once.
      const [, made] = await FoundListing.findOrCreate({ where: { sawyerId: asking.sawyerId, listingId }, defaults: { sawyerId: asking.sawyerId, listingId, searchId: asking.id, foundAt: at } });
      if (made && asking.tells === 'at-once') await tellSearch(asking.id, at);
    });
  }
}
