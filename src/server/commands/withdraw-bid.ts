import { paths } from '~/domain/paths.ts';
import { bidStates } from '~/domain/states/bid.ts';
import { bidWithdrawn } from '~/emails/bids.ts';
import { authorize, rolesOnBid } from '../authorize.ts';
import { inTransaction } from '../db.ts';
import { enqueue } from '../jobs/queue.ts';
import { linkTo } from '../parties.ts';
import { Account } from '../models/account.ts';
import { transition } from '../transition.ts';
import type { Viewer } from '../viewer.ts';
import { lockListingAndBid } from './lock-listing-and-bid.ts';

/** Takes a live bid back; the landowner is told. The sawyer may bid again while the listing is open. */
export async function withdrawBid(by: Viewer, bidId: string, at: Date): Promise<void> {
  await inTransaction(async () => {
    const { bid, listing } = await lockListingAndBid(bidId);
    authorize(by, 'bid', 'withdraw', rolesOnBid(by, bid, listing), bid.status);
    await transition(bidStates, 'withdraw', bid, by, at, { decidedAt: at, updatedAt: at });
    const owner = await Account.findByPk(listing.ownerId, { rejectOnEmpty: true });
    await enqueue('send-mail', bidWithdrawn(owner, by.name, listing, linkTo(paths.listingBids(listing.number))));
  });
}
