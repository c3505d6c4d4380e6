import { listCover } from '~/domain/trade/list-cover.ts';
import type { BidMill } from '~/domain/trade/bid-estimate.ts';
import { sawnPieces } from '~/domain/sawing/sawn-piece.ts';
import { boardPlans } from '../board-plans.ts';
import { inTransaction } from '../db.ts';
import { listedShapes, listedPieces } from '../listed-pieces.ts';
import { Listing } from '../models/listing.ts';
import { Bid } from '../models/sawyer.ts';

/** Nobody compares these any more. */
const OVER: ReadonlySet<Bid['status']> = new Set(['declined', 'withdrawn', 'lapsed', 'released']);

/**
 * Works out what a bid's mill makes of the listing's cut list, and keeps it with the bid. A bid that was changed meanwhile, or whose
 * listing was, is left alone: its own job follows. May run as often as one likes.
 */
export async function planBidList(bidId: string): Promise<void> {
  const bid = await Bid.findByPk(bidId);
  const listing = bid && (await Listing.findByPk(bid.listingId));
  if (!bid || !listing || listing.revision !== bid.listingRevision || OVER.has(bid.status)) return;
  const pieces = sawnPieces(await listedPieces(listing.id));
  if (pieces.length === 0) return;
  const { list } = await boardPlans(await listedShapes(listing.id), pieces, bid.mill as BidMill);
  if (!list) return;
  const cutList = listCover(list, pieces, { revision: listing.revision, millId: bid.millId });
  await inTransaction(async () => {
    await Bid.update({ cutList }, { where: { id: bid.id, listingRevision: listing.revision, millId: bid.millId } });
  });
}
