import { cancelBooking } from '../../src/server/commands/cancel-booking.ts';
import { chooseBid } from '../../src/server/commands/choose-bid.ts';
import { confirmDays } from '../../src/server/commands/confirm-days.ts';
import { proposeDays } from '../../src/server/commands/propose-days.ts';
import { Booking, DayProposal } from '../../src/server/models/booking.ts';
import type { Day } from '../../src/domain/time.ts';
import { bidOf } from './bids.ts';
import { listingOf } from './listings.ts';
import { handleMoney, pay } from './money.ts';
import { who } from './people.ts';
import type { Timeline } from './timeline.ts';

/** What became of a chosen bid, in days from today; what is left out has not happened. */
export interface Job {
  readonly listing: string;
  readonly owner: string;
  readonly sawyer: string;
  readonly chosen: number;
  readonly proposed?: number;
  readonly agreed?: number;
  readonly paid?: number;
  /** The milling days. */
  readonly days: readonly number[];
  readonly cancelled?: { readonly on: number; readonly clock: string; readonly by: 'owner' | 'sawyer'; readonly reason: string };
}

const job = (listing: string, sawyer: string, chosen: number, days: readonly number[], rest: Omit<Job, 'listing' | 'owner' | 'sawyer' | 'chosen' | 'days'> = {}): Job => ({ listing, owner: listing.split('-')[0] ?? '', sawyer, chosen, days, ...rest });

/** Chosen, agreed and paid one day after another. */
const paidFrom = (chosen: number): { proposed: number; agreed: number; paid: number } => ({ proposed: chosen, agreed: chosen + 1, paid: chosen + 1 });

const jobs: readonly Job[] = [
  job('ada-maple', 'cleo', -31, [-24], paidFrom(-31)),
  job('tilda-oak', 'bram', -29, [-20], paidFrom(-29)),
  job('ulf-pine', 'otis', -28, [-22], paidFrom(-28)),
  job('vera-cherry', 'nell', -29, [-21], paidFrom(-29)),
  job('wim-basswood', 'ines', -26, [-17], paidFrom(-26)),
  job('yves-oak', 'hob', -22, [-4], paidFrom(-22)),
  job('anders-walnut', 'pim', -20, [-3], paidFrom(-20)),
  job('berit-ash', 'moss', -19, [0], paidFrom(-19)),
  job('ivo-oak', 'bram', -17, [-1], paidFrom(-17)),
  job('ada-pine', 'hob', -14, [-2], paidFrom(-14)),
  job('ada-oak', 'bram', -9, [3], paidFrom(-9)),
  job('corin-oak', 'bram', -10, [9, 10], paidFrom(-10)),
  job('dagny-cherry', 'cleo', -9, [4], paidFrom(-9)),
  job('zora-maple', 'jory', -20, [-5], { ...paidFrom(-20), cancelled: { on: -6, clock: '19:00', by: 'owner', reason: 'The insurer wants to see the logs before they are cut.' } }),
  job('elmo-pine', 'otis', -3, [8], { proposed: -3, agreed: -1 }),
  job('fern-maple', 'kit', -4, [11], { proposed: -3, agreed: -2 }),
  job('gus-oak', 'lark', -2, [12, 13], { proposed: -1 }),
  job('nell-cherry', 'pim', -10, [2], { proposed: -10, agreed: -9 }),
  job('hedda-tamarack', 'quill', -11, [-5], { ...paidFrom(-11), cancelled: { on: -9, clock: '08:20', by: 'sawyer', reason: 'The engine has to come apart.' } }),
  job('hedda-tamarack', 'nell', -5, [17]),
];

/** The number of the newest booking of a listing. */
export async function bookingOf(listing: string): Promise<Booking> {
  const { id } = await listingOf(listing);
  return Booking.findOne({ where: { listingId: id }, order: [['number', 'DESC']], rejectOnEmpty: true });
}

async function propose(key: string, listing: string, days: readonly Day[], note: string, at: Date): Promise<void> {
  await proposeDays(await who(key), { booking: (await bookingOf(listing)).number, days, startTime: '08:00', note }, at);
}

async function confirm(key: string, listing: string, at: Date): Promise<void> {
  const booking = await bookingOf(listing);
  const proposal = await DayProposal.findOne({ where: { bookingId: booking.id, status: 'open' }, rejectOnEmpty: true });
  await confirmDays(await who(key), { booking: booking.number, proposal: proposal.id }, at);
}

function tellJob(one: Job, timeline: Timeline): void {
  const { listing, owner, sawyer } = one;
  const days = one.days.map((day) => (day === 0 ? timeline.calendar.day(0) : timeline.calendar.workday(day)));
  timeline.add(one.chosen, '19:40', async (at) => {
    const bid = await bidOf(listing, sawyer);
    await chooseBid(await who(owner), bid.id, bid.listingRevision, at);
  });
  if (one.proposed !== undefined) timeline.add(one.proposed, '20:30', (at) => propose(sawyer, listing, days, '', at));
  if (one.agreed !== undefined) timeline.add(one.agreed, '12:20', (at) => confirm(owner, listing, at));
  if (one.paid !== undefined) timeline.add(one.paid, '18:05', async (at) => pay(await who(owner), (await bookingOf(listing)).number, at));
  const ended = one.cancelled;
  if (ended) {
    timeline.add(ended.on, ended.clock, async (at) => {
      await cancelBooking(await who(ended.by === 'owner' ? owner : sawyer), { booking: (await bookingOf(listing)).number, reason: ended.reason }, at);
      await handleMoney(at);
    });
  }
}

/** Bookings from the chosen bid to the held money; one is moved to another day and two are cancelled. Sawing is told in `tallies.ts`. */
export function tellBookings(timeline: Timeline): void {
  for (const one of jobs) tellJob(one, timeline);
  timeline.add(-4, '18:30', (at) => propose('cleo', 'dagny-cherry', [timeline.calendar.workday(6)], 'Rain all that day, they say.', at));
  timeline.add(-3, '07:40', (at) => confirm('dagny', 'dagny-cherry', at));
}
