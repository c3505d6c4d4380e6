import { createHash } from 'node:crypto';
import { paths } from '~/domain/paths.ts';
import { bidStates } from '~/domain/states/bid.ts';
import { listingStates } from '~/domain/states/listing.ts';
import { AGREEMENT_VERSION, canonicalJson } from '~/domain/trade/agreement.ts';
import { bidChosen, bidDeclined, choiceConfirmed } from '~/emails/bids.ts';
import { agreedTerms } from '../agreed-terms.ts';
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
 * @returns the booking's number
 */
export async function chooseBid(by: Viewer, bidId: string, listingRevision: number, at: Date): Promise<number> {
  try {
    return await inTransaction(async () => {
      const { bid, listing } = await lockListingAndBid(bidId);
      authorize(by, 'listing', 'chooseBid', rolesOnListing(by, listing), listing.status);
      if (listing.revision !== listingRevision || bid.listingRevision !== listing.revision) {
        throw conflict('The listing has changed since this page was shown, so these bids are out of date. Load it again: bids must be confirmed on the new logs first.');
      }
      authorize(by, 'bid', 'choose', rolesOnBid(by, bid, listing), bid.status);
      await refuseBlocked(by.id, bid.sawyerId);
      if (listing.hiddenAt !== null) throw conflict('A moderator has taken this listing off show, so no bid can be chosen now.');
      const sawyer = await Account.findByPk(bid.sawyerId, { rejectOnEmpty: true });
      if (!(await holdActive(by.id))) throw forbidden('This account is suspended.');
      if (!(await holdActive(bid.sawyerId))) throw conflict('This sawyer’s account is not active at present. Choose another bid.');
      const others = await Bid.findAll({ where: { listingId: listing.id, status: ['open', 'toConfirm'] }, order: [['id', 'ASC']], lock: true });
      await transition(bidStates, 'choose', bid, by, at, { decidedAt: at, updatedAt: at });
      for (const other of others.filter(({ id }) => id !== bid.id)) await decline(other, listing, by, at);
      await transition(listingStates, 'match', listing, by, at, { updatedAt: at });
      const booking = await openBooking(by, bid, listing, at);
      await freezeTerms(booking, bid, listing, by.name, sawyer.name, at);
      await enqueue('send-mail', bidChosen(sawyer, by.name, listing, linkTo(paths.booking(booking.number))));
      await enqueue('send-mail', choiceConfirmed(by, sawyer.name, listing, linkTo(paths.booking(booking.number))));
      return booking.number;
    });
  } catch (error) {
    if (refusedBy(error, 'one_chosen_bid_per_listing') || refusedBy(error, 'one_live_booking_per_listing')) throw conflict(MOVED_ON);
    throw error;
  }
}

async function decline(bid: Bid, listing: Listing, by: Viewer, at: Date): Promise<void> {
  await transition(bidStates, 'decline', bid, by, at, { decidedAt: at, updatedAt: at });
  const sawyer = await Account.findByPk(bid.sawyerId, { rejectOnEmpty: true });
  await enqueue('send-mail', bidDeclined(sawyer, listing, linkTo(paths.bids)));
}

async function openBooking(by: Viewer, bid: Bid, listing: Listing, at: Date): Promise<Booking> {
  const outing = await Outing.create({ sawyerId: bid.sawyerId, kind: 'booking', createdAt: at });
  const booking = await Booking.create({
    listingId: listing.id, bidId: bid.id, landownerId: listing.ownerId, sawyerId: bid.sawyerId, outingId: outing.id,
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
  const sha256 = createHash('sha256').update(canonicalJson(agreed)).digest('hex');
  await WorkAgreement.create({ bookingId: booking.id, textVersion: AGREEMENT_VERSION, terms: agreed, sha256, frozenAt: at });
}
