import { paths } from '~/domain/paths.ts';
import { bidStates } from '~/domain/states/bid.ts';
import type { BidForm } from '~/schemas/bid-form.ts';
import { bidChanged } from '~/emails/bids.ts';
import { authorize, rolesOnBid } from '../authorize.ts';
import { inTransaction } from '../db.ts';
import { invalid } from '../errors.ts';
import { countTry } from '../http/limits.ts';
import { enqueue } from '../jobs/queue.ts';
import { linkTo } from '../parties.ts';
import { Account } from '../models/account.ts';
import { Listing } from '../models/listing.ts';
import { Bid } from '../models/sawyer.ts';
import { transition } from '../transition.ts';
import type { Viewer } from '../viewer.ts';
import { bidFigures, checkBiddable, currentCard, foresee, millOf, refuseDaysOff, workOut } from '../bid-work.ts';
import { lockListingAndBid } from './lock-listing-and-bid.ts';

/** Changes a live bid: worked out anew on the logs, with the sawyer's rate card as it is now. A bid to confirm is thereby confirmed. */
export async function changeBid(by: Viewer, bidId: string, form: BidForm, at: Date): Promise<void> {
  const seen = await Bid.findOne({ where: { id: bidId, sawyerId: by.id }, attributes: ['listingId'] });
  const before = seen && (await Listing.findByPk(seen.listingId));
  if (before) await countTry('bid on a listing', `${by.id} ${before.number}`);
  const foreseen = await foresee(by.id, before, form.millId);
  await inTransaction(async () => {
    const { bid, listing } = await lockListingAndBid(bidId);
    authorize(by, 'bid', 'change', rolesOnBid(by, bid, listing), bid.status);
    await checkBiddable(listing, by.id, form.listingRevision, at);
    await refuseDaysOff(by.id, form.days);
    const card = await currentCard(by.id);
    if (card === null) throw invalid([{ path: '', message: 'Fill in your rate card before you bid.' }]);
    const mill = await millOf(by.id, form.millId);
    const worked = await workOut(form, listing, mill, card, at, foreseen);
    // What it made of the list on other logs or another mill is of no use any more.
    const cutList = bid.listingRevision === listing.revision && bid.millId === mill.id ? bid.cutList : null;
    await transition(bidStates, 'change', bid, by, at, {
      ...bidFigures(worked), cutList, listingRevision: listing.revision, millId: mill.id, mill, estimate: worked,
      overrideReason: form.ownBf === null ? null : form.ownReason, daysOffered: [...new Set(form.days)].sort(), message: form.message, updatedAt: at,
    });
    await enqueue('plan-bid-list', { bidId: bid.id });
    const owner = await Account.findByPk(listing.ownerId, { rejectOnEmpty: true });
    await enqueue('send-mail', bidChanged(owner, by.name, listing, bid, linkTo(paths.listingBids(listing.number))));
  });
}
