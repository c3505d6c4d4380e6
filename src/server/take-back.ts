import { paths } from '~/domain/paths.ts';
import { bidStates } from '~/domain/states/bid.ts';
import { listingStates } from '~/domain/states/listing.ts';
import { bidTakenBack } from '~/emails/account-letters.ts';
import { listingWithdrawn } from '~/emails/listing-letters.ts';
import { moveBids, readerOf } from './bidders.ts';
import { enqueue } from './jobs/queue.ts';
import { Bid, Listing } from './models/index.ts';
import { linkTo } from './parties.ts';
import { transition } from './transition.ts';
import type { Actor } from './viewer.ts';

/** How many of each were taken back. */
export interface TakenBack {
  readonly listings: number;
  readonly bids: number;
}

/**
 * Takes back what an account offers, in the caller's transaction: open listings are withdrawn, those closed to bids lapse, live bids
 * are withdrawn, and the other sides are told. Bookings are not touched: end those first, for an ended booking opens its listing.
 */
export async function takeBack(accountId: string, by: Actor, reason: string, at: Date): Promise<TakenBack> {
  const listings = await Listing.findAll({ where: { ownerId: accountId, status: ['open', 'closed'] }, order: ['id'], lock: true });
  for (const listing of listings) {
    await transition(listingStates, listing.status === 'open' ? 'withdraw' : 'lapse', listing, by, at, { updatedAt: at }, { data: { reason } });
    await moveBids(listing.id, ['open', 'toConfirm'], 'lapse', by, at, (sawyer) => listingWithdrawn(sawyer, listing.title ?? '', '', linkTo(paths.logs)));
  }
  const found = await Bid.findAll({ where: { sawyerId: accountId, status: ['open', 'toConfirm'] }, attributes: ['id', 'listingId'], order: ['listingId'] });
  let bids = 0;
  for (const { id, listingId } of found) {
    // Listing first, then bid: the order in which every deed locks them.
    const listing = await Listing.findByPk(listingId, { lock: true, rejectOnEmpty: true });
    const bid = await Bid.findByPk(id, { lock: true, rejectOnEmpty: true });
    if (bid.status !== 'open' && bid.status !== 'toConfirm') continue;
    await transition(bidStates, 'withdraw', bid, by, at, { decidedAt: at, updatedAt: at });
    bids += 1;
    await enqueue('send-mail', bidTakenBack(await readerOf(listing.ownerId), listing.title ?? '', linkTo(paths.listingBids(listing.number))));
  }
  return { listings: listings.length, bids };
}
