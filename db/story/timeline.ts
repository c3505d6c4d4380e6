import { closeToBids, lapseListings } from '../../src/server/commands/close-listings.ts';
import { lapseUnpaid } from '../../src/server/commands/lapse-unpaid.ts';
import { remindOfCertificates } from '../../src/server/commands/keep-certificates.ts';
import { sweepTallies } from '../../src/server/jobs/handlers/sweep-tallies.ts';
import type { Calendar } from './calendar.ts';
import { handleMoney } from './money.ts';
import { STORM } from './trees.ts';

type Telling = (at: Date) => Promise<void>;

/** Deeds gathered in any order and done in the order of their instants, with each night's deadlines since the storm between them. */
export class Timeline {
  readonly #deeds: { readonly at: Date; readonly wanted: number; readonly tell: Telling }[] = [];

  constructor(readonly calendar: Calendar) {}

  /** Something that happened on that day at that time. @param offset days from today @param clock `HH:MM`, local */
  add(offset: number, clock: string, tell: Telling): void {
    const minutes = Number(clock.slice(0, 2)) * 60 + Number(clock.slice(3));
    // What would lie after the moment of telling happens now, still in its order.
    this.#deeds.push({ at: this.calendar.at(offset, clock), wanted: offset * 1440 + minutes, tell });
  }

  async run(): Promise<void> {
    for (let offset = STORM; offset <= 0; offset += 1) this.add(offset, '00:10', sweep);
    for (const { at, tell } of this.#deeds.sort((a, b) => a.wanted - b.wanted)) await tell(at);
    await sweep(this.calendar.now);
  }
}

/** What the worker does at every minute of a living market. */
async function sweep(at: Date): Promise<void> {
  await closeToBids(at);
  await lapseListings(at);
  await lapseUnpaid(at);
  await sweepTallies(at);
  await remindOfCertificates(at);
  await handleMoney(at);
}
