import { paths } from '~/domain/paths.ts';
import { bidStates } from '~/domain/states/bid.ts';
import { listingStates } from '~/domain/states/listing.ts';
import { AGREEMENT_VERSION } from '~/domain/trade/agreement.ts';
import { bidChosen, bidDeclined, choiceConfirmed } from '~/emails/bids.ts';
import { agreedTerms, termsSha256 } from '../agreed-terms.ts';
import type { Reader } from '../bidders.ts';
import { authorize, rolesOnBid, rolesOnListing } from '../authorize.ts';
import { refuseBlocked } from '../blocks.ts';
import { inTransaction, refusedBy } from '../db.ts';
import { conflict, forbidden } from '../errors.ts';
import { enqueue } from '../jobs/queue.ts';
import { linkTo } from '../parties.ts';
import { Account } from '../models/account.ts';
import { Booking, Conversation, Outing, WorkAgreement } from '../models/booking.ts';
import type { Listing } from '../models/listing.ts';
import { Bid } from '../models/sawyer.ts';
import { holdActive } from '../standing.ts';
import { record, transition } from '../transition.ts';
import type { Viewer } from '../viewer.ts';
import { lockListingAndBid } from './lock-listing-and-bid.ts';

const MOVED_ON = 'Someone chose on this listing already. Load the page again to see where it stands.';

/**
 * Chooses one bid: it is chosen, the others are declined, the listing is matched, a booking is opened and the terms are frozen in a
 * work agreement, all in one step. Of several who choose at once exactly one succeeds.
 * @param listingRevision the revision the landowner was looking at: a stale one is refused
 * @param terms that the landowner read, by `termsSha256`: others are refused. Only who reads no page leaves it out
 * @returns the booking's number
 */
export async function chooseBid(by: Viewer, bidId: string, listingRevision: number, at: Date, terms?: string): Promise<number> {
  try {
    return await inTransaction(async () => {
      const { bid, listing } = await lockListingAndBid(bidId);
      authorize(by, 'listing', 'chooseBid', rolesOnListing(by, listing), listing.status);
      if (listing.revision !== listingRevision || bid.listingRevision !== listing.revision) {
        throw conflict('The listing has changed since this page was shown, so these bids are out of date. Load it again: bids must be confirmed on the new logs first.');
      }
      authorize(by, 'bid', 'choose', rolesOnBid(by, bid, listing), bid.status);
      if (terms !== undefined && terms !== (await termsOf(bid, listing))) throw conflict('The sawyer has changed this bid since this page was shown. Read it as it stands now, then choose.');
      await refuseBlocked(by.id, bid.sawyerId);
      if (listing.hiddenAt !== null) throw conflict('A moderator has taken this listing off show, so no bid can be chosen now.');
      return (await settleChoice(by, by, bid, listing, at)).number;
    });
  } catch (error) {
    if (refusedBy(error, 'one_chosen_bid_per_listing') || refusedBy(error, 'one_live_booking_per_listing')) throw conflict(MOVED_ON);
    throw error;
  }
}

/**
 * What choosing does, once it is known to be allowed: call it inside the transaction that holds the listing's and the bid's lock.
 * @param owner of the listing, who may have agreed before and not be the one who acts now (the last answer to a shared trip)
 * @param outingId the shared trip's outing; a lone booking gets one of its own
 */
export async function settleChoice(by: Viewer, owner: Reader & { readonly id: string }, bid: Bid, listing: Listing, at: Date, outingId?: string): Promise<Booking> {
  const sawyer = await Account.findByPk(bid.sawyerId, { rejectOnEmpty: true });
  if (!(await holdActive(owner.id))) throw forbidden('This account is suspended.');
  if (!(await holdActive(bid.sawyerId))) throw conflict('This sawyer’s account is not active at present. Choose another bid.');
  const others = await Bid.findAll({ where: { listingId: listing.id, status: ['open', 'toConfirm'] }, order: [['id', 'ASC']], lock: true });
  await transition(bidStates, 'choose', bid, by, at, { decidedAt: at, updatedAt: at });
  for (const other of others.filter(({ id }) => id !== bid.id)) await decline(other, listing, by, at);
  await transition(listingStates, 'match', listing, by, at, { updatedAt: at });
  const booking = await openBooking(by, bid, listing, at, outingId);
  await freezeTerms(booking, bid, listing, owner.name, sawyer.name, at);
  await enqueue('send-mail', bidChosen(sawyer, owner.name, listing, linkTo(paths.booking(booking.number))));
  await enqueue('send-mail', choiceConfirmed(owner, sawyer.name, listing, linkTo(paths.booking(booking.number))));
  return booking;
}

async function decline(bid: Bid, listing: Listing, by: Viewer, at: Date): Promise<void> {
  await transition(bidStates, 'decline', bid, by, at, { decidedAt: at, updatedAt: at });
  const sawyer = await Account.findByPk(bid.sawyerId, { rejectOnEmpty: true });
  await enqueue('send-mail', bidDeclined(sawyer, listing, linkTo(paths.bids)));
}

async function openBooking(by: Viewer, bid: Bid, listing: Listing, at: Date, sharedOuting?: string): Promise<Booking> {
  const outingId = sharedOuting ?? (await Outing.create({ sawyerId: bid.sawyerId, kind: 'booking', createdAt: at })).id;
  const booking = await Booking.create({
    listingId: listing.id, bidId: bid.id, landownerId: listing.ownerId, sawyerId: bid.sawyerId, outingId,
    timeZone: listing.timeZone ?? 'UTC', createdAt: at, updatedAt: at,
  });
  const [conversation] = await Conversation.findOrCreate({
    where: { listingId: listing.id, sawyerId: bid.sawyerId },
    defaults: { listingId: listing.id, landownerId: listing.ownerId, sawyerId: bid.sawyerId, lastMessageAt: at },
  });
  await conversation.update({ bookingId: booking.id });
  await booking.reload();
  await record(by, 'openBooking', 'booking', booking.id, at, { data: { number: booking.number } });
  return booking;
}

async function freezeTerms(booking: Booking, bid: Bid, listing: Listing, landowner: string, sawyer: string, at: Date): Promise<void> {
  const agreed = agreedTerms(bid, listing, landowner, sawyer);
  await WorkAgreement.create({ bookingId: booking.id, textVersion: AGREEMENT_VERSION, terms: agreed, sha256: termsSha256(agreed), frozenAt: at });
}

async function termsOf(bid: Bid, listing: Listing): Promise<string> {
  const [owner, sawyer] = [await Account.findByPk(listing.ownerId, { rejectOnEmpty: true }), await Account.findByPk(bid.sawyerId, { rejectOnEmpty: true })];
  return termsSha256(agreedTerms(bid, listing, owner.name, sawyer.name));
}
