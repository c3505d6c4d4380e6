import { paths } from '~/domain/paths.ts';
import { bidStates } from '~/domain/states/bid.ts';
import type { BidMill } from '~/domain/trade/bid-estimate.ts';
import { checkMillingDay } from '~/domain/time.ts';
import { bidChanged } from '~/emails/bids.ts';
import { authorize, rolesOnBid } from '../authorize.ts';
import { inTransaction } from '../db.ts';
import { conflict } from '../errors.ts';
import { enqueue } from '../jobs/queue.ts';
import { linkTo } from '../parties.ts';
import { Account } from '../models/account.ts';
import { Listing } from '../models/listing.ts';
import { Bid } from '../models/sawyer.ts';
import { transition } from '../transition.ts';
import type { Viewer } from '../viewer.ts';
import { bidFigures, checkBiddable, estimateOn, type FrozenEstimate, lumberOn } from '../bid-work.ts';
import { lockListingAndBid } from './lock-listing-and-bid.ts';

/**
 * Confirms a bid on a listing that was revised: the same mill, rate card and terms, worked out on the logs as they stand now.
 * An expected figure of the sawyer's own belonged to the old logs and is dropped. Days that have passed are dropped too.
 * @param listingRevision the revision the sawyer saw
 */
export async function confirmBid(by: Viewer, bidId: string, listingRevision: number, at: Date): Promise<void> {
  const seen = await Bid.findOne({ where: { id: bidId, sawyerId: by.id } });
  const before = seen && (await Listing.findByPk(seen.listingId));
  const foreseen = seen && before ? await lumberOn(before, seen.mill as BidMill) : null;
  await inTransaction(async () => {
    const { bid, listing } = await lockListingAndBid(bidId);
    authorize(by, 'bid', 'confirm', rolesOnBid(by, bid, listing), bid.status);
    await checkBiddable(listing, by.id, listingRevision, at);
    const daysOffered = bid.daysOffered.filter((day) => checkMillingDay(day, listing.timeZone ?? 'UTC', at).ok);
    if (daysOffered.length === 0) throw conflict('The days you offered have passed. Change the bid and offer new ones.');
    const { terms, options } = bid.estimate as FrozenEstimate;
    const worked = await estimateOn(listing, bid.mill as BidMill, terms, options, null, foreseen);
    await transition(bidStates, 'confirm', bid, by, at, { ...bidFigures(worked), estimate: worked, cutList: null, overrideReason: null, listingRevision: listing.revision, daysOffered, updatedAt: at });
    await enqueue('plan-bid-list', { bidId: bid.id });
    const owner = await Account.findByPk(listing.ownerId, { rejectOnEmpty: true });
    await enqueue('send-mail', bidChanged(owner, by.name, listing, bid, linkTo(paths.listingBids(listing.number))));
  });
}
