import { isId } from '~/domain/id.ts';
import { abilities, rolesOnBid } from '../authorize.ts';
import { agreedTerms, termsSha256 } from '../agreed-terms.ts';
import { notFound } from '../errors.ts';
import { Account } from '../models/account.ts';
import { Bid } from '../models/sawyer.ts';
import type { Viewer } from '../viewer.ts';
import { compareBids } from './compare-bids.ts';

/**
 * One bid before it is chosen, with the terms that choosing would freeze.
 * @throws Refusal `notFound` for a bid that is not on this listing, and for readers who may not compare
 */
export async function bidToChoose(viewer: Viewer | null, listingNumber: number, bidId: string, at: Date) {
  const { listing, bids, booking, can } = await compareBids(viewer, listingNumber, 'estimate', at);
  const row = isId(bidId) ? await Bid.findOne({ where: { id: bidId, listingId: listing.id } }) : null;
  if (!row) throw notFound('bid');
  const name = async (id: string): Promise<string> => (await Account.findByPk(id, { attributes: ['name'], rejectOnEmpty: true })).name;
  const terms = agreedTerms(row, listing, await name(listing.ownerId), await name(row.sawyerId));
  return {
    listing,
    booking,
    /** As it is compared; null once it is no longer live. */
    bid: bids.find(({ id }) => id === row.id) ?? null,
    terms,
    termsSha256: termsSha256(terms),
    others: bids.filter(({ id }) => id !== row.id).length,
    canChoose: can.chooseBid && abilities('bid', rolesOnBid(viewer, row, listing), row.status).choose,
  };
}
