import type { BidMill, ListedLog } from '~/domain/trade/bid-estimate.ts';
import { jobForMills, type JobForMill, type SawyerMeans } from '~/domain/trade/job-worth.ts';
import { fitPiece } from '~/domain/trade/mill-fit.ts';
import type { RateCard } from '~/domain/trade/rate-card.ts';
import { roadMiles } from '~/domain/trade/road-miles.ts';
import type { Point } from '~/domain/geo.ts';
import type { Defect } from '~/domain/timber/defects.ts';
import { bidMill } from '../bid-work.ts';
import { rows } from '../db.ts';
import { env } from '../env.ts';
import type { Viewer } from '../viewer.ts';
import { setUpOf } from './sawyer-setup.ts';
import { type ListingPage, pointOf } from './listing-page.ts';

/** A sawyer with what listings are held against: mills, rate card and base. */
export interface SawyerAtWork extends SawyerMeans {
  readonly id: string;
  readonly mills: readonly BidMill[];
  readonly card: RateCard | null;
  readonly base: Point | null;
}

/** The sawyer's mills, card and base; null for anybody without a mill. */
export async function sawyerAtWork(sawyerId: string): Promise<SawyerAtWork | null> {
  const { profile, mills, card } = await setUpOf(sawyerId);
  if (mills.length === 0) return null;
  return { id: sawyerId, mills: mills.map(bidMill), card, base: profile?.base ? pointOf(profile.base) : null, feeBasisPoints: env().FEE_BASIS_POINTS };
}

/** The same for a viewer, who may not be signed in or may not saw. */
export const viewerAtWork = async (viewer: Viewer | null): Promise<SawyerAtWork | null> => (viewer?.isSawyer ? sawyerAtWork(viewer.id) : null);

/** A listing as a sawyer's figures need it. */
export interface ListingToWeigh {
  readonly id: string;
  readonly coarse: Point;
  /** Grown people the landowner has to help; with none the sawyer brings the off-bearer. */
  readonly helpers: number;
}

interface LogRow {
  listingId: string;
  id: string;
  species: string;
  smallEndIn: number;
  largeEndIn: number | null;
  lengthFt: number;
  defects: Defect[];
}

/** The logs of these listings by listing, each in the order they lie. One query, by the index `log_position`. */
export async function logsOfListings(ids: readonly string[]): Promise<ReadonlyMap<string, readonly ListedLog[]>> {
  const found = await rows<LogRow>(
    `SELECT listing_id AS "listingId", id, species, small_end_in AS "smallEndIn", large_end_in AS "largeEndIn", length_ft AS "lengthFt", defects
     FROM log WHERE listing_id = ANY($1::uuid[]) AND removed_at IS NULL AND NOT added_on_the_day ORDER BY listing_id, position`,
    [ids],
  );
  const byListing = new Map<string, ListedLog[]>();
  for (const { listingId, largeEndIn, ...log } of found) {
    byListing.set(listingId, [...(byListing.get(listingId) ?? []), { ...log, ...(largeEndIn === null ? {} : { largeEndIn }) }]);
  }
  return byListing;
}

/** What each listing is to this sawyer, by the listing's id: fit, estimate, hours, miles and money an hour, from the coarse points. */
export async function jobsForSawyer(sawyer: SawyerAtWork, listings: readonly ListingToWeigh[]): Promise<ReadonlyMap<string, JobForMill>> {
  const logs = await logsOfListings(listings.map(({ id }) => id));
  return new Map(
    listings.flatMap(({ id, coarse, helpers }) => {
      const job = jobForMills(logs.get(id) ?? [], sawyer, sawyer.base && roadMiles(sawyer.base, coarse), helpers > 0 ? 'landowner-provides' : 'sawyer-brings');
      return job ? [[id, job] as const] : [];
    }),
  );
}

/** What a listing's page tells a sawyer. */
export interface JobOnListing {
  readonly job: JobForMill;
  /** Wanted pieces that the mill cannot make, in words. */
  readonly pieces: readonly string[];
  /** What must be filled in before it can be said what the job would bring. */
  readonly missing: 'rates' | 'base' | null;
}

/** What this listing is to the viewer's mills; null for who does not saw or has no mill. */
export async function jobOnListing(viewer: Viewer | null, listing: Pick<ListingPage, 'id' | 'coarse' | 'access' | 'pieces'>): Promise<JobOnListing | null> {
  const sawyer = await viewerAtWork(viewer);
  if (!sawyer) return null;
  const job = (await jobsForSawyer(sawyer, [{ id: listing.id, coarse: listing.coarse, helpers: listing.access.helpers }])).get(listing.id);
  const mill = sawyer.mills.find(({ id }) => id === job?.mill.id);
  if (!job || !mill) return null;
  const pieces = listing.pieces.flatMap(({ label, widthIn, lengthFt }) => fitPiece(mill, { widthIn, lengthFt }).reasons.map((reason) => `${label || 'A piece'}: ${reason}.`));
  return { job, pieces, missing: sawyer.card === null ? 'rates' : sawyer.base === null ? 'base' : null };
}
