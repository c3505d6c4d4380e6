import { paths } from '~/domain/paths.ts';
import { bidStates } from '~/domain/states/bid.ts';
import { checkMillingDay, formatDay, type Day } from '~/domain/time.ts';
import { bidChanged } from '~/emails/bids.ts';
import { authorize, rolesOnBid } from '../authorize.ts';
import { refuseDaysOff } from '../bid-work.ts';
import { daysOffFrom, giveDaysBack, takeDaysOff, todayOf } from '../days-off.ts';
import { inTransaction, lockFor, rows } from '../db.ts';
import { conflict, invalid, notFound } from '../errors.ts';
import { countTry } from '../http/limits.ts';
import { enqueue } from '../jobs/queue.ts';
import { Account } from '../models/account.ts';
import { Listing } from '../models/listing.ts';
import { Bid } from '../models/sawyer.ts';
import { linkTo } from '../parties.ts';
import { record, transition } from '../transition.ts';
import { baseRoles, type Viewer } from '../viewer.ts';
import { lockListingAndBid } from './lock-listing-and-bid.ts';

/** A day of the calendar to be moved: a day off, whoever took it, or the day offered with the bid on a listing. */
export interface DayMove {
  readonly what: 'off' | number;
  readonly from: Day;
  readonly to: Day;
}

const wrong = (message: string) => invalid([{ path: 'to', message }]);

async function refuseBooked(by: Viewer, day: Day): Promise<void> {
  const booked = await rows('SELECT 1 AS one FROM booked_day WHERE sawyer_id = $1 AND day = $2 AND active', [by.id, day]);
  if (booked.length > 0) throw wrong(`A booking stands on ${formatDay(day)}. Choose another day.`);
}

/**
 * Moves a day off or an offered day to another day. A day that another calendar calls busy is moved here only: it is open although that
 * calendar names it still, and an own day off stands on the other.
 * @throws Refusal `invalid` at `to` for a day that is taken, `conflict` when nothing of the kind stands on the day any more
 */
export async function moveDay(by: Viewer, move: DayMove, at: Date): Promise<void> {
  authorize(by, 'sawyer', 'keepCalendar', baseRoles(by));
  if (move.from === move.to) throw wrong('Choose another day than the one it stands on.');
  await inTransaction(() => (move.what === 'off' ? moveDayOff(by, move, at) : moveOfferedDay(by, move.what, move, at)));
}

async function moveDayOff(by: Viewer, { from, to }: DayMove, at: Date): Promise<void> {
  await lockFor('calendar', by.id);
  const today = await todayOf(by.id, at);
  if (to < today) throw wrong('That day is past. Choose a later one.');
  await refuseBooked(by, to);
  const off = await daysOffFrom(by.id, today);
  if (off.has(to)) throw wrong(`You are off on ${formatDay(to)} already.`);
  if (!off.has(from)) throw conflict(`${formatDay(from)} is no day off of yours any more. Load the calendar again.`);
  await giveDaysBack(by.id, [from], at);
  await takeDaysOff(by.id, [to]);
  await record(by, 'moveDayOff', 'account', by.id, at, { data: { from, to } });
}

async function moveOfferedDay(by: Viewer, listingNumber: number, { from, to }: DayMove, at: Date): Promise<void> {
  const seen = await Listing.findOne({ where: { number: listingNumber }, attributes: ['id'] });
  const own = seen && (await Bid.findOne({ where: { listingId: seen.id, sawyerId: by.id, status: ['open', 'toConfirm'] }, attributes: ['id'] }));
  if (!own) throw notFound('bid');
  await countTry('bid on a listing', `${by.id} ${listingNumber}`);
  const { bid, listing } = await lockListingAndBid(own.id);
  authorize(by, 'bid', 'change', rolesOnBid(by, bid, listing), bid.status);
  if (bid.status === 'toConfirm') throw conflict('The listing was changed since you bid. Confirm or change that bid first.');
  if (!bid.daysOffered.includes(from)) throw conflict(`${formatDay(from)} is not offered with that bid any more. Load the calendar again.`);
  if (bid.daysOffered.includes(to)) throw wrong(`${formatDay(to)} is offered with that bid already.`);
  const day = checkMillingDay(to, listing.timeZone ?? 'UTC', at);
  if (!day.ok) throw invalid(day.problems.map(({ message }) => ({ path: 'to', message })));
  await refuseDaysOff(by.id, [to], 'to');
  await refuseBooked(by, to);
  await transition(bidStates, 'change', bid, by, at, { daysOffered: [...bid.daysOffered.filter((one) => one !== from), to].sort(), updatedAt: at });
  const owner = await Account.findByPk(listing.ownerId, { rejectOnEmpty: true });
  await enqueue('send-mail', bidChanged(owner, by.name, listing, bid, linkTo(paths.listingBids(listing.number))));
}
