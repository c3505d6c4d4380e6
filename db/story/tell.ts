// Tells the demo's story once, into an empty database, with the web process and the stand-ins running and the worker not yet.
import { reconcile } from '../../src/server/commands/reconcile.ts';
import { sequelize } from '../../src/server/db.ts';
import { closeLimits } from '../../src/server/http/limits.ts';
import { Account, Event } from '../../src/server/models/index.ts';
import { record } from '../../src/server/transition.ts';
import { system } from '../../src/server/viewer.ts';
import { tellBids } from './bids.ts';
import { tellBookings } from './bookings.ts';
import { calendarFrom } from './calendar.ts';
import { tellListings } from './listings.ts';
import { standIn } from './money.ts';
import { tellPhotos } from './photos.ts';
import { tellPeople } from './people.ts';
import { tellSawyers } from './sawyers.ts';
import { tellTalks } from './talk.ts';
import { tellTallies } from './tallies.ts';
import { Timeline } from './timeline.ts';

/** Said of a database that has accounts but no whole story: somebody's own, or one whose telling was cut off. */
const NOT_EMPTY = 'The demo story is told into an empty database only; this one is left as it is. (Remove .data to begin anew.)';

async function tell(): Promise<void> {
  const begun = new Date();
  const timeline = new Timeline(calendarFrom(begun));
  tellPeople(timeline);
  tellSawyers(timeline);
  tellListings(timeline);
  tellPhotos(timeline);
  tellBids(timeline);
  tellBookings(timeline);
  tellTallies(timeline);
  tellTalks(timeline);
  // The provider keeps its fee when a whole hold goes back, so the platform pays some money of its own in.
  timeline.add(-60, '09:00', async (at) => {
    await standIn('top-up', { cents: 50_000 });
    await reconcile(at);
  });
  await timeline.run();
  await record(system('story'), 'tellStory', 'story', null, begun);
  console.log(`The demo story is told (${((Date.now() - begun.getTime()) / 1000).toFixed(1)} s).`);
}

if ((await Event.count({ where: { action: 'tellStory' } })) === 0) {
  if ((await Account.count()) > 0) console.log(NOT_EMPTY);
  else await tell();
}
await closeLimits();
await sequelize.close();
