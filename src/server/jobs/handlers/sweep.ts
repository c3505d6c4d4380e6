import { now } from '../../clock.ts';
import { closeToBids, lapseListings } from '../../commands/close-listings.ts';
import { countMap } from '../../commands/count-map.ts';
import { removeCertificateFiles, remindOfCertificates } from '../../commands/keep-certificates.ts';
import { readOtherCalendars } from '../../commands/other-calendar.ts';
import { reviewTrips } from '../../commands/review-trip.ts';
import { tellSearches } from '../../commands/tell-searches.ts';
import { log } from '../../log.ts';
import { tellEveningBefore } from './evening-before.ts';
import { moneySweeps } from './money-sweeps.ts';
import { photoSweeps } from './photo-sweeps.ts';
import { planListsAnew } from './plan-lists-anew.ts';
import { remindOfBoards } from './remind-boards.ts';
import { sweepTallies } from './sweep-tallies.ts';

/** A sweep moves every stored deadline that has passed; it takes the time, finds its own rows, and may run as often as one likes. */
export type Sweep = (at: Date) => Promise<void>;

/** Every sweep by name, in the order they run. */
export const sweeps: Readonly<Record<string, Sweep>> = {
  'close to bids': closeToBids,
  'lapse listings': lapseListings,
  'count the map': countMap,
  ...moneySweeps,
  ...photoSweeps,
  'tell of logs found': tellSearches,
  'look at offered trips': reviewTrips,
  'sign or recall tallies': sweepTallies,
  'tell of tomorrow': tellEveningBefore,
  'remind of boards': remindOfBoards,
  'remind of certificates': remindOfCertificates,
  'remove files of certificates': removeCertificateFiles,
  'plan cut lists anew': planListsAnew,
  // Last: it waits for others' servers, and no deadline may wait with it.
  'read other calendars': readOtherCalendars,
};

/** Runs every sweep for the given time. One that fails is logged and does not keep the others from running. */
export async function sweep(at: Date = now()): Promise<void> {
  for (const [name, run] of Object.entries(sweeps)) {
    try {
      await run(at);
    } catch (error) {
      log().error({ err: error, sweep: name }, 'sweep failed');
    }
  }
}
