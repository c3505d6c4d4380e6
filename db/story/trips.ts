import { agreeToTrip } from '../../src/server/commands/answer-trip.ts';
import { offerTrip } from '../../src/server/commands/offer-trip.ts';
import { SharedTrip } from '../../src/server/models/trip.ts';
import { numberOf } from './listings.ts';
import { who } from './people.ts';
import type { Timeline } from './timeline.ts';

/** One outing to two pine piles, asked about yesterday: one landowner has agreed, the other has not answered yet. */
export function tellTrips(timeline: Timeline): void {
  timeline.add(-1, '20:15', async (at) => {
    const listings = [numberOf('vera-pine'), numberOf('anders-pine')];
    await offerTrip(await who('otis'), { day: timeline.calendar.workday(16), startTime: '08:00', listings, together: [], message: 'I pass you both on the same road. Shared, the travel is less for each.' }, at);
  });
  timeline.add(0, '07:10', async (at) => {
    const trip = await SharedTrip.findOne({ order: [['number', 'DESC']], rejectOnEmpty: true });
    await agreeToTrip(await who('vera'), { trip: trip.number, listing: numberOf('vera-pine'), version: trip.version }, at);
  });
}
