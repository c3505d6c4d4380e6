import { reconcile } from '../../src/server/commands/reconcile.ts';
import { record } from '../../src/server/transition.ts';
import { system } from '../../src/server/viewer.ts';
import { tellBids } from './bids.ts';
import { tellBookings } from './bookings.ts';
import { calendarFrom } from './calendar.ts';
import { tellCertificates } from './certificates.ts';
import { tellListings } from './listings.ts';
import { standIn } from './money.ts';
import { tellPeople } from './people.ts';
import { photosReady, tellPhotos } from './photos.ts';
import { tellShowing } from './showing.ts';
import { tellSawyers } from './sawyers.ts';
import { tellTalks } from './talk.ts';
import { tellTallies } from './tallies.ts';
import { Timeline } from './timeline.ts';
import { tellWeeks } from './weeks.ts';
import { tellWork } from './work.ts';
import { tellTrips } from './trips.ts';

/**
 * Tells the story into an empty database, as of now. The web process and the stand-ins must be running, and no worker: the story
 * does the worker's part itself, at the instants it tells of.
 */
export async function tellStory(now: Date): Promise<void> {
  const timeline = new Timeline(calendarFrom(now));
  tellPeople(timeline);
  tellSawyers(timeline);
  tellCertificates(timeline);
  tellWeeks(timeline);
  tellWork(timeline);
  tellListings(timeline);
  tellPhotos(timeline);
  tellBids(timeline);
  tellBookings(timeline);
  tellTallies(timeline);
  tellTrips(timeline);
  tellTalks(timeline);
  // The provider keeps its fee when a whole hold goes back, so the platform pays some money of its own in.
  timeline.add(-60, '09:00', async (at) => {
    await standIn('top-up', { cents: 50_000 });
    await reconcile(at);
  });
  await timeline.run();
  await photosReady();
  await tellShowing(now);
  await record(system('story'), 'tellStory', 'story', null, now);
}
