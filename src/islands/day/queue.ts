import type { TallyEntry } from '~/schemas/tally-entries.ts';
import { database, tellChange, type Refused, type Waiting } from './store.ts';

/** Puts entries on the phone, in order. They are on its disk when this returns. */
export async function putEntries(accountId: string, booking: number, entries: readonly TallyEntry[]): Promise<void> {
  const work = (await database()).transaction('waiting', 'readwrite', { durability: 'strict' });
  for (const entry of entries) await work.store.add({ accountId, booking, entry });
  await work.done;
  tellChange();
}

/** Entries of a booking that wait to be sent, and those that were refused, each in the order they were made. */
export async function entriesOf(accountId: string, booking: number): Promise<{ readonly waiting: Waiting[]; readonly refused: Refused[]; readonly sentAt: string | null }> {
  const db = await database();
  return {
    waiting: await db.getAllFromIndex('waiting', 'ofBooking', [accountId, booking]),
    refused: await db.getAllFromIndex('refused', 'ofBooking', [accountId, booking]),
    sentAt: (await db.get('sent', [accountId, booking]))?.at ?? null,
  };
}

const keysOf = (items: readonly Waiting[]): number[] => items.flatMap(({ seq }) => seq ?? []);

/** The server has these. */
export async function takeOff(items: readonly Waiting[]): Promise<void> {
  const [first] = items;
  if (!first) return;
  const work = (await database()).transaction(['waiting', 'sent'], 'readwrite', { durability: 'strict' });
  for (const seq of keysOf(items)) await work.objectStore('waiting').delete(seq);
  await work.objectStore('sent').put({ accountId: first.accountId, booking: first.booking, at: new Date().toISOString() });
  await work.done;
}

/** The server will not take these: out of the way of what follows, but not lost. */
export async function setAside(items: readonly Waiting[], because: string): Promise<void> {
  const work = (await database()).transaction(['waiting', 'refused'], 'readwrite', { durability: 'strict' });
  for (const item of items) {
    await work.objectStore('refused').put({ ...item, because });
    for (const seq of keysOf([item])) await work.objectStore('waiting').delete(seq);
  }
  await work.done;
}

/** Sends refused entries once more, under their old place in the order. */
export async function tryRefusedAgain(items: readonly Refused[]): Promise<void> {
  const work = (await database()).transaction(['waiting', 'refused'], 'readwrite');
  for (const { because: _, ...item } of items) {
    await work.objectStore('waiting').put(item);
    for (const seq of keysOf([item])) await work.objectStore('refused').delete(seq);
  }
  await work.done;
  tellChange();
}

/** Drops a refused entry for good: only ever because a person said so. */
export async function dropRefused(item: Refused): Promise<void> {
  const db = await database();
  for (const seq of keysOf([item])) await db.delete('refused', seq);
  tellChange();
}
