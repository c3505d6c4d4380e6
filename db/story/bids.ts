import type { BidForm } from '../../src/schemas/bid-form.ts';
import { milesTo } from '../../src/server/bid-work.ts';
import { changeBid } from '../../src/server/commands/change-bid.ts';
import { confirmBid } from '../../src/server/commands/confirm-bid.ts';
import { placeBid } from '../../src/server/commands/place-bid.ts';
import { withdrawBid } from '../../src/server/commands/withdraw-bid.ts';
import { Bid, Mill } from '../../src/server/models/sawyer.ts';
import type { Calendar } from './calendar.ts';
import { listingOf, numberOf } from './listings.ts';
import { who } from './people.ts';
import { rateCards } from './rate-cards.ts';
import type { Timeline } from './timeline.ts';

interface Offer {
  readonly listing: string;
  readonly sawyer: string;
  /** The day the bid is made, and the days it offers, all counted from today. */
  readonly on: number;
  readonly days: readonly number[];
  readonly message: string;
  readonly change: Partial<BidForm>;
}

const bid = (listing: string, sawyer: string, on: number, days: readonly number[], message = '', change: Partial<BidForm> = {}): Offer => ({ listing, sawyer, on, days, message, change });

const helper = { offBearer: 'sawyer-brings' } as const;

const offers: readonly Offer[] = [
  bid('ada-maple', 'cleo', -35, [-24, -23], 'Maple is a pleasure. I have two days that week.'),
  bid('ada-maple', 'bram', -34, [-22], 'I could come on the Monday with the detector.'),
  bid('ada-maple', 'nell', -34, [-25]),
  bid('tilda-oak', 'bram', -32, [-20, -19], 'Hay wagon decks are my bread and butter. 8/4 all through.'),
  bid('tilda-oak', 'lark', -32, [-18]),
  bid('tilda-oak', 'jory', -31, [-17]),
  bid('ulf-pine', 'otis', -31, [-22], 'Pine that size I do before lunch.'),
  bid('ulf-pine', 'ines', -30, [-21]),
  bid('vera-cherry', 'nell', -33, [-21], 'A Saturday job for me.'),
  bid('vera-cherry', 'cleo', -32, [-26]),
  bid('wim-basswood', 'ines', -30, [-17]),
  bid('wim-basswood', 'moss', -29, [-16], '', helper),
  bid('yves-oak', 'lark', -28, [-6]),
  bid('yves-oak', 'hob', -27, [-4], 'Posts and planks; the swing mill goes up your hill in pieces.'),
  bid('zora-maple', 'jory', -26, [-5]),
  bid('zora-maple', 'kit', -25, [-7]),
  bid('anders-walnut', 'pim', -26, [-3], 'I would take the mantel from the butt, pith out.'),
  bid('anders-walnut', 'kit', -25, [-8]),
  bid('berit-ash', 'moss', -24, [0, 1], 'With my helper it is one day.', helper),
  bid('berit-ash', 'bram', -24, [-9]),
  bid('ivo-oak', 'bram', -23, [-1], 'Four logs, one day, beds cut to 8 ft.'),
  bid('ivo-oak', 'lark', -22, [-2]),
  bid('ada-pine', 'hob', -20, [-2], 'Board and batten by the truckload.'),
  bid('ada-pine', 'otis', -20, [-6], 'Cheapest where the pad is firm. Is yours?'),
  bid('ada-pine', 'ines', -19, [-5]),
  bid('ada-oak', 'bram', -24, [3, 4], 'White oak on poles, that is how I like it. I can do the table planks first.'),
  bid('ada-oak', 'lark', -23, [6]),
  bid('ada-oak', 'cleo', -22, [2], 'By the hour; with two of you rolling it is a short day.'),
  bid('ada-oak', 'moss', -21, [5], '', helper),
  bid('corin-oak', 'bram', -18, [9, 10], 'Twelve bed boards and the rest as you like.'),
  bid('corin-oak', 'jory', -17, [8], 'I can dry the bed boards in my kiln afterwards.'),
  bid('dagny-cherry', 'cleo', -17, [4, 6]),
  bid('dagny-cherry', 'nell', -16, [5]),
  bid('elmo-pine', 'otis', -15, [8]),
  bid('elmo-pine', 'ines', -14, [7]),
  bid('fern-maple', 'kit', -14, [11], 'Twelve quarter by the long bar: slow, straight, flat.'),
  bid('fern-maple', 'pim', -13, [13]),
  bid('gus-oak', 'lark', -13, [12, 13]),
  bid('gus-oak', 'hob', -12, [14]),
  bid('hedda-tamarack', 'quill', -13, [-5]),
  bid('hedda-tamarack', 'nell', -7, [17], 'Rails I can do on a weekend.'),
  bid('nell-cherry', 'pim', -12, [2], 'Wide cherry, no trouble.'),
  bid('nell-cherry', 'kit', -11, [3]),
  // Ada's walnut, open: six bids to compare, on five bases.
  bid('ada-walnut', 'bram', -10, [5, 7], 'I run the detector twice on a yard walnut. Butt log in 10/4 as you wish.', { metalCap: 14_000 }),
  bid('ada-walnut', 'pim', -9, [11, 12], 'Slabs by the board foot, flattened once dry if you bring them to me.', { stickers: 60 }),
  bid('ada-walnut', 'kit', -8, [6], 'The butt log in three slabs with the crotch left on.'),
  bid('ada-walnut', 'cleo', -7, [8], 'By the hour. We go slowly round the clothes line.'),
  bid('ada-walnut', 'ines', -6, [9]),
  bid('ada-walnut', 'quill', -5, [4], 'My lowest, since I am new.', { ownBf: 330, ownReason: 'My kerf is thin and I square nothing.' }),
  bid('tilda-walnut', 'bram', -7, [8], 'I know your lane by now.'),
  bid('tilda-walnut', 'kit', -6, [10]),
  bid('tilda-walnut', 'pim', -6, [14]),
  bid('ulf-oak', 'hob', -6, [9], 'The swing mill goes up that hill in pieces.'),
  bid('ulf-oak', 'bram', -5, [12], '', { waste: 'hauled' }),
  bid('ulf-oak', 'moss', -4, [15], '', helper),
  bid('vera-pine', 'lark', -5, [10], 'My track takes 26 ft.'),
  bid('vera-pine', 'otis', -4, [16]),
  bid('yves-ash', 'jory', -4, [13], 'Flooring: I dry it too.'),
  bid('zora-oak', 'kit', -3, [18], 'This one is why I bought the long bar.'),
  bid('zora-oak', 'pim', -2, [19]),
  bid('anders-pine', 'otis', -2, [9]),
  bid('berit-basswood', 'ines', -2, [6]),
  bid('corin-mix', 'nell', -1, [12]),
  bid('fern-oak', 'bram', -8, [14], '', { offBearer: 'sawyer-brings' }),
  bid('fern-oak', 'nell', -7, [12]),
  bid('gus-cherry', 'cleo', -9, [7]),
  bid('hedda-maple', 'quill', -20, [-9]),
  bid('anders-oak', 'otis', -16, [-8]),
];

const CLOCKS = ['07:25', '12:10', '17:45', '19:30', '20:40', '21:05'] as const;

/** The live bid of a sawyer on a listing. */
export async function bidOf(listing: string, sawyer: string): Promise<Bid> {
  const { id } = await listingOf(listing);
  return Bid.findOne({ where: { listingId: id, sawyerId: (await who(sawyer)).id }, order: [['createdAt', 'DESC']], rejectOnEmpty: true });
}

async function form(offer: Offer, calendar: Calendar): Promise<BidForm> {
  const by = await who(offer.sawyer);
  const listing = await listingOf(offer.listing);
  const mill = await Mill.findOne({ where: { sawyerId: by.id, retiredAt: null }, order: [['createdAt', 'ASC'], ['paceBfPerHour', 'DESC']], rejectOnEmpty: true });
  return {
    millId: mill.id, listingRevision: listing.revision, offBearer: 'landowner-provides', waste: 'left', roadMiles: Math.round((await milesTo(by.id, listing)) ?? 0), metalCap: rateCards[offer.sawyer]?.metal.capCents ?? 0,
    stickers: null, deliveryLoads: null, ownBf: null, ownReason: '', days: offer.days.map((day) => calendar.workday(day)), message: offer.message, ...offer.change,
  };
}

/** Bids on the open listings; some change, one is withdrawn, one is confirmed after its listing was changed. */
export function tellBids(timeline: Timeline): void {
  const { calendar } = timeline;
  for (const [index, offer] of offers.entries()) {
    timeline.add(offer.on, CLOCKS[index % CLOCKS.length] ?? '12:10', async (at) => void (await placeBid(await who(offer.sawyer), numberOf(offer.listing), await form(offer, calendar), at)));
  }
  const walnut = offers.find(({ listing, sawyer }) => listing === 'ada-walnut' && sawyer === 'pim');
  if (walnut) timeline.add(-8, '06:50', async (at) => changeBid(await who('pim'), (await bidOf('ada-walnut', 'pim')).id, await form({ ...walnut, change: { stickers: 80 } }, calendar), at));
  timeline.add(-4, '12:30', async (at) => withdrawBid(await who('ines'), (await bidOf('ada-walnut', 'ines')).id, at));
  timeline.add(-4, '07:10', async (at) => confirmBid(await who('kit'), (await bidOf('tilda-walnut', 'kit')).id, (await listingOf('tilda-walnut')).revision, at));
}
