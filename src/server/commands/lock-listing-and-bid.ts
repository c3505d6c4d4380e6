import { isId } from '~/domain/id.ts';
import { notFound } from '../errors.ts';
import { Listing } from '../models/listing.ts';
import { Bid } from '../models/sawyer.ts';

/** Locks a bid and its listing for a deed, always the listing first, so that two deeds never wait for each other. */
export async function lockListingAndBid(bidId: string): Promise<{ readonly bid: Bid; readonly listing: Listing }> {
  const seen = isId(bidId) ? await Bid.findByPk(bidId, { attributes: ['listingId'] }) : null;
  if (!seen) throw notFound('bid');
  const listing = await Listing.findByPk(seen.listingId, { lock: true, rejectOnEmpty: true });
  const bid = await Bid.findByPk(bidId, { lock: true, rejectOnEmpty: true });
  return { bid, listing };
}
