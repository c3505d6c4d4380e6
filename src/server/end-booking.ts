import { bidStates } from '~/domain/states/bid.ts';
import { listingStates } from '~/domain/states/listing.ts';
import { addSiteDays, LISTING_LAPSES_DAYS } from '~/domain/time.ts';
import { enqueue } from './jobs/queue.ts';
import { bookedDaysOf, sendInvitations } from './invitations.ts';
import { Bid, BookedDay, DayProposal, Listing, type Booking } from './models/index.ts';
import { transition } from './transition.ts';
import type { Actor } from './viewer.ts';

/**
 * What follows whenever a booking ends before sawing: its days are free again, calendars forget them, the bid is released and the
 * listing takes bids again, for at least a week.
 */
export async function afterEnding(by: Actor, booking: Booking, at: Date): Promise<void> {
  const before = await bookedDaysOf(booking.id);
  await BookedDay.update({ active: false }, { where: { bookingId: booking.id, active: true } });
  await DayProposal.update({ status: 'withdrawn', decidedAt: at }, { where: { bookingId: booking.id, status: 'open' } });
  if (before.length > 0) await sendInvitations(booking, before, true);
  const bid = await Bid.findByPk(booking.bidId, { lock: true, rejectOnEmpty: true });
  if (bid.status === 'chosen') await transition(bidStates, 'release', bid, by, at, { updatedAt: at });
  const listing = await Listing.findByPk(booking.listingId, { lock: true, rejectOnEmpty: true });
  if (listing.status !== 'matched') return;
  const soonest = addSiteDays(at, LISTING_LAPSES_DAYS, booking.timeZone);
  await transition(listingStates, 'reopen', listing, by, at, { updatedAt: at, ...(listing.closesAt && listing.closesAt > soonest ? {} : { closesAt: soonest }) });
  await enqueue('match-searches', { listingId: listing.id });
}
