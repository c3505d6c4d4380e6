import { reportThing } from '../../src/server/commands/report-thing.ts';
import { markRead, openConversation, sendMessage } from '../../src/server/commands/send-message.ts';
import { writeReview } from '../../src/server/commands/write-review.ts';
import { bookingOf } from './bookings.ts';
import { listingOf, numberOf } from './listings.ts';
import { who } from './people.ts';
import type { Timeline } from './timeline.ts';

type Line = readonly [from: 'sawyer' | 'owner', day: number, clock: string, words: string];

interface Talk {
  readonly listing: string;
  readonly owner: string;
  readonly sawyer: string;
  readonly lines: readonly Line[];
}

const talk = (listing: string, sawyer: string, ...lines: readonly Line[]): Talk => ({ listing, owner: listing.split('-')[0] ?? '', sawyer, lines });

const talks: readonly Talk[] = [
  talk('ada-walnut', 'bram',
    ['sawyer', -11, '18:20', 'Was the clothes line on the house side or the garden side? I would turn that face down first.'],
    ['owner', -11, '20:05', 'House side, at about shoulder height, both hooks. The holes are still to be seen.'],
    ['sawyer', -10, '06:45', 'Good. I will go over it twice before it goes on the bed.']),
  talk('ada-walnut', 'kit',
    ['sawyer', -8, '12:40', 'Would you leave the crotch on the butt log? It makes the best slab of the three.'],
    ['owner', -8, '19:15', 'If it fits the counter, gladly.'],
    ['sawyer', -1, '12:05', 'Have you had a chance to look at the bids? I could still come that week.']),
  talk('ada-oak', 'bram',
    ['sawyer', -8, '07:00', 'Table planks first, so that they go on stickers the same morning. Could you have thirty stickers ready, 1 × 1?'],
    ['owner', -8, '21:10', 'They are cut and dry. My neighbor comes to help with the off-bearing.'],
    ['sawyer', -1, '19:30', 'Forecast looks fair. I will be at the lane a little before eight.']),
  talk('ada-pine', 'hob',
    ['sawyer', -2, '18:10', 'The tally is with you. Two boards of the fourth log had a pitch pocket; I put them on top so that you see them.']),
  talk('tilda-walnut', 'bram',
    ['sawyer', -6, '20:20', 'Same lane as for the red oak, or is there a drier one?'],
    ['owner', -5, '07:30', 'The same. I put gravel down where you sank.']),
  talk('corin-oak', 'bram',
    ['owner', -2, '18:50', 'Could we start at nine on the first day? The bus comes at half past eight.']),
];

interface Word {
  readonly listing: string;
  readonly from: string;
  readonly on: number;
  readonly stars: number;
  readonly body: string;
}

const reviews: readonly Word[] = [
  { listing: 'ada-maple', from: 'ada', on: -22, stars: 5, body: 'On time, careful with the lawn, and the 8/4 is dead straight. By the hour it came to less than I feared.' },
  { listing: 'ada-maple', from: 'cleo', on: -21, stars: 5, body: 'Logs off the dirt, side by side, and soup at noon. Any time.' },
  { listing: 'tilda-oak', from: 'tilda', on: -18, stars: 5, body: 'Found the staple with the detector before the blade did, the second time at least. The deck is on the wagon.' },
  { listing: 'tilda-oak', from: 'bram', on: -18, stars: 4, body: 'Good logs, soft lane.' },
  { listing: 'vera-cherry', from: 'vera', on: -18, stars: 4, body: 'A patient sawyer. Started late because of fog and stayed until it was done.' },
  { listing: 'ulf-pine', from: 'ulf', on: -17, stars: 3, body: 'Quick, and a wide kerf: more sawdust than I thought. Said so beforehand, to be fair.' },
];

function tellTalk({ listing, owner, sawyer, lines }: Talk, timeline: Timeline): void {
  for (const [index, [from, day, clock, words]] of lines.entries()) {
    timeline.add(day, clock, async (at) => {
      const conversation = await openConversation(await who(sawyer), numberOf(listing), at);
      const by = await who(from === 'sawyer' ? sawyer : owner);
      // Whoever answers has read what came before.
      if (index > 0) await markRead(by, conversation.id, at);
      await sendMessage(by, { conversation: conversation.id, body: words }, at);
    });
  }
}

/** What people wrote to each other, about each other afterwards, and to the moderators. */
export function tellTalks(timeline: Timeline): void {
  for (const one of talks) tellTalk(one, timeline);
  for (const { listing, from, on, stars, body } of reviews) timeline.add(on, '20:45', async (at) => writeReview(await who(from), { booking: (await bookingOf(listing)).number, stars, body }, at));
  timeline.add(-1, '21:35', async (at) => {
    const { id } = await listingOf('corin-mix');
    await reportThing(await who('otis'), { thing: 'listing', thingId: id, reason: 'not-theirs', note: 'The windbreak on that side of the road is the township’s, as far as I know. Could somebody ask?', clientAddress: '' }, at);
  });
}
