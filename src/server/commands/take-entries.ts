import type { TallyEntry } from '~/schemas/tally-entries.ts';
import type { Viewer } from '../viewer.ts';
import { allowOnTheDay } from './allow-on-the-day.ts';
import { enterTally } from './enter-tally.ts';
import { offerOnce } from './offer-tally.ts';
import { signOnTheSpot, signPart } from './sign-on-the-spot.ts';

type Deed = Extract<TallyEntry, { kind: 'allow' | 'part' | 'offer' | 'sign' }>;
/** Entries that only write lines. They go into the tally together; a deed between them is done in its place. */
export type Line = Exclude<TallyEntry, Deed>;

const isDeed = (entry: TallyEntry): entry is Deed => entry.kind === 'allow' || entry.kind === 'part' || entry.kind === 'offer' || entry.kind === 'sign';

async function doDeed(by: Viewer, booking: number, deed: Deed, at: Date): Promise<void> {
  switch (deed.kind) {
    case 'allow': return allowOnTheDay(by, { booking, allow: deed }, at);
    case 'part': return signPart(by, { booking, part: deed }, at);
    case 'offer': return offerOnce(by, { booking, endedBySawyer: deed.endedBySawyer, note: deed.note }, at);
    case 'sign': return signOnTheSpot(by, { booking, sign: deed }, at);
  }
}

/**
 * Takes what a phone sends, in the order it was made there. Each entry is done once however often it comes, so that a sending that
 * stops half-way is simply sent again.
 */
export async function takeEntries(by: Viewer, input: { readonly booking: number; readonly entries: readonly TallyEntry[] }, at: Date): Promise<void> {
  let lines: Line[] = [];
  const write = async (): Promise<void> => {
    if (lines.length > 0) await enterTally(by, { booking: input.booking, entries: lines }, at);
    lines = [];
  };
  for (const entry of input.entries) {
    if (!isDeed(entry)) {
      lines.push(entry);
      continue;
    }
    await write();
    await doDeed(by, input.booking, entry, at);
  }
  await write();
}
