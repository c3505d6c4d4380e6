import { Op } from 'sequelize';
import { paths } from '~/domain/paths.ts';
import { listingStates } from '~/domain/states/listing.ts';
import { addSiteDays, formatInstant, LISTING_LAPSES_DAYS } from '~/domain/time.ts';
import { bidLapsed, listingClosed, listingLapsed } from '~/emails/listing-letters.ts';
import { moveBids, readerOf } from '../bidders.ts';
import { inTransaction } from '../db.ts';
import { enqueue } from '../jobs/queue.ts';
import { Listing } from '../models/listing.ts';
import { Bid } from '../models/sawyer.ts';
import { linkTo } from '../parties.ts';
import { transition } from '../transition.ts';
import { system } from '../viewer.ts';

/** As many as one run of a sweep takes on; the next run takes the rest. */
const batch = 200;

/** Runs the work on each listing in a transaction of its own, on the locked row, if it is still in that state. */
async function eachLocked(ids: readonly string[], status: Listing['status'], work: (listing: Listing) => Promise<void>): Promise<void> {
  for (const id of ids) {
    await inTransaction(async () => {
      const listing = await Listing.findByPk(id, { lock: true });
      if (listing?.status === status) await work(listing);
    });
  }
}

/** Sweep: listings whose closing date has passed take no more bids; the landowner has seven days left to choose. */
export async function closeToBids(at: Date): Promise<void> {
  const due = await Listing.findAll({ where: { status: 'open', closesAt: { [Op.lte]: at } }, attributes: ['id'], order: ['closesAt'], limit: batch });
  await eachLocked(due.map(({ id }) => id), 'open', async (listing) => {
    // A revision may have moved the date between the look and the lock.
    if (!listing.closesAt || !listing.timeZone || listing.closesAt > at) return;
    // A listing that came back from a booking after its closing date still gives its landowner a whole week.
    const week = addSiteDays(listing.closesAt, LISTING_LAPSES_DAYS, listing.timeZone);
    const lapsesAt = week > at ? week : addSiteDays(at, LISTING_LAPSES_DAYS, listing.timeZone);
    await transition(listingStates, 'closeToBids', listing, system('sweep'), at, { lapsesAt, updatedAt: at });
    const bids = await Bid.count({ where: { listingId: listing.id, status: ['open', 'toConfirm'] } });
    const number = listing.number ?? 0;
    const link = linkTo(bids === 0 ? paths.listing(number) : paths.listingBids(number));
    await enqueue('send-mail', listingClosed(await readerOf(listing.ownerId), listing.title ?? '', bids, formatInstant(lapsesAt, listing.timeZone), link));
  });
}

/** Sweep: closed listings for which nobody was chosen in time lapse, and their bids with them. */
export async function lapseListings(at: Date): Promise<void> {
  const due = await Listing.findAll({ where: { status: 'closed', lapsesAt: { [Op.lte]: at } }, attributes: ['id'], order: ['lapsesAt'], limit: batch });
  await eachLocked(due.map(({ id }) => id), 'closed', async (listing) => {
    const title = listing.title ?? '';
    await transition(listingStates, 'lapse', listing, system('sweep'), at, { updatedAt: at });
    await moveBids(listing.id, ['open', 'toConfirm'], 'lapse', system('sweep'), at, (sawyer) => bidLapsed(sawyer, title, linkTo(paths.logs)));
    await enqueue('send-mail', listingLapsed(await readerOf(listing.ownerId), title, linkTo(paths.listing(listing.number ?? 0))));
  });
}
