import { paths } from '~/domain/paths.ts';
import type { BidForm } from '~/schemas/bid-form.ts';
import { bidReceived } from '~/emails/bids.ts';
import { authorize, rolesOnListing } from '../authorize.ts';
import { refuseBlocked } from '../blocks.ts';
import { inTransaction, refusedBy } from '../db.ts';
import { conflict, forbidden, invalid, notFound } from '../errors.ts';
import { countTry } from '../http/limits.ts';
import { enqueue } from '../jobs/queue.ts';
import { linkTo } from '../parties.ts';
import { Account } from '../models/account.ts';
import { Listing } from '../models/listing.ts';
import { Bid } from '../models/sawyer.ts';
import { holdActive } from '../standing.ts';
import { record } from '../transition.ts';
import type { Viewer } from '../viewer.ts';
import { bidFigures, checkBiddable, currentCard, foresee, millOf, refuseDaysOff, workOut } from '../bid-work.ts';

/**
 * Bids on an open listing: the estimate is worked out here, on the logs as they stand, and frozen with the mill and the rate card.
 * @returns the bid's id
 * @throws Refusal `conflict` when the listing has moved on or the sawyer has a live bid on it already, `tooMany`.
 */
export async function placeBid(by: Viewer, listingNumber: number, form: BidForm, at: Date): Promise<string> {
  await countTry('bid on a listing', `${by.id} ${listingNumber}`);
  const foreseen = await foresee(by.id, await Listing.findOne({ where: { number: listingNumber } }), form.millId);
  try {
    return await inTransaction(async () => {
      const listing = await Listing.findOne({ where: { number: listingNumber }, lock: true });
      if (!listing || listing.status === 'draft') throw notFound('listing');
      authorize(by, 'listing', 'bid', rolesOnListing(by, listing), listing.status);
      await refuseBlocked(by.id, listing.ownerId);
      if (!(await holdActive(by.id))) throw forbidden('This account is suspended.');
      await checkBiddable(listing, by.id, form.listingRevision, at);
      await refuseDaysOff(by.id, form.days);
      const card = await currentCard(by.id);
      if (card === null) throw invalid([{ path: '', message: 'Fill in your rate card before you bid.' }]);
      const mill = await millOf(by.id, form.millId);
      const worked = await workOut(form, listing, mill, card, at, foreseen);
      const bid = await Bid.create({
        ...bidFigures(worked), listingId: listing.id, listingRevision: listing.revision, sawyerId: by.id, millId: mill.id, mill, estimate: worked,
        overrideReason: form.ownBf === null ? null : form.ownReason, daysOffered: [...new Set(form.days)].sort(), message: form.message, createdAt: at, updatedAt: at,
      });
      await record(by, 'placeBid', 'bid', bid.id, at, { data: { listing: listing.number, revision: listing.revision } });
      await enqueue('plan-bid-list', { bidId: bid.id });
      const owner = await Account.findByPk(listing.ownerId, { rejectOnEmpty: true });
      await enqueue('send-mail', bidReceived(owner, by.name, listing, bid, linkTo(paths.listingBids(listing.number))));
      return bid.id;
    });
  } catch (error) {
    if (refusedBy(error, 'one_live_bid_per_sawyer')) throw conflict('You have a bid on this listing already. Change that one.');
    throw error;
  }
}
