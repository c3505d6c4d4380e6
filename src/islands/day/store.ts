import { openDB, type DBSchema, type IDBPDatabase } from 'idb';
import type { CutSheetView } from '~/schemas/cut-sheet.ts';
import type { DayBooking, DayPack } from '~/schemas/day.ts';
import type { ShownOnTheDay } from '~/schemas/day-photo.ts';
import type { RunningClock } from '~/domain/trade/running-clock.ts';
import type { TallyEntry } from '~/schemas/tally-entries.ts';
import type { TallyView } from '~/schemas/tally-view.ts';

/** An entry on its way to the server. `seq` is the order in which entries were made on this phone. */
export interface Waiting {
  readonly seq?: number;
  readonly accountId: string;
  readonly booking: number;
  readonly entry: TallyEntry;
}

/** An entry that the server would not take, with its reason. It is kept until somebody decides what becomes of it. */
export interface Refused extends Waiting {
  readonly because: string;
}

/** A photograph of the day that the server does not have. Its bytes are kept plain: not every browser keeps a file's own object whole. */
export interface Picture {
  readonly id: string;
  readonly accountId: string;
  readonly booking: number;
  readonly shows: ShownOnTheDay;
  readonly hitId: string | null;
  readonly fileName: string;
  readonly type: string;
  readonly bytes: ArrayBuffer;
  readonly takenAt: string;
  /** Why the server would not take it; null while it may be sent. */
  readonly because: string | null;
}

/** Whose phone this is, as last known, and when the server was last heard. `clockOffMs`: the server's clock less the phone's. */
export interface Holder {
  readonly accountId: string;
  readonly name: string;
  readonly heardAt: string;
  readonly clockOffMs: number;
  /** The last sending found nobody signed in. */
  readonly signedOut: boolean;
}

type Key = [accountId: string, booking: number];

interface Schema extends DBSchema {
  kept: { key: Key; value: Omit<DayBooking, 'tally'> & { readonly accountId: string; readonly savedAt: string } };
  tally: { key: Key; value: TallyView & { readonly accountId: string; readonly heardAt?: string } };
  waiting: { key: number; value: Waiting; indexes: { ofBooking: Key } };
  refused: { key: number; value: Refused; indexes: { ofBooking: Key } };
  pictures: { key: string; value: Picture; indexes: { ofBooking: Key } };
  sent: { key: Key; value: { readonly accountId: string; readonly booking: number; readonly at: string } };
  /** Cut sheets, with the cut at which the saw stands, log by log. */
  sheets: { key: Key; value: CutSheetView & { readonly accountId: string; readonly cutAt: Readonly<Record<string, number>> } };
  /** The clock that runs on this phone. */
  clocks: { key: Key; value: RunningClock & { readonly accountId: string; readonly booking: number } };
  holder: { key: string; value: Holder };
}

export type KeptBooking = Schema['kept']['value'];
export type KeptSheet = Schema['sheets']['value'];

let opened: Promise<IDBPDatabase<Schema>> | undefined;

/** The phone's own database. */
export const database = (): Promise<IDBPDatabase<Schema>> =>
  (opened ??= openDB<Schema>('skidway', 4, {
    upgrade(db, before) {
      if (before < 2) db.createObjectStore('pictures', { keyPath: 'id' }).createIndex('ofBooking', ['accountId', 'booking']);
      if (before < 3) db.createObjectStore('sheets', { keyPath: ['accountId', 'booking'] });
      if (before < 4) db.createObjectStore('clocks', { keyPath: ['accountId', 'booking'] });
      if (before >= 1) return;
      db.createObjectStore('kept', { keyPath: ['accountId', 'number'] });
      db.createObjectStore('tally', { keyPath: ['accountId', 'booking'] });
      for (const name of ['waiting', 'refused'] as const) db.createObjectStore(name, { keyPath: 'seq', autoIncrement: name === 'waiting' }).createIndex('ofBooking', ['accountId', 'booking']);
      db.createObjectStore('sent', { keyPath: ['accountId', 'booking'] });
      db.createObjectStore('holder');
    },
    blocking: (_current, _next, event) => {
      if (event.target instanceof IDBDatabase) event.target.close();
      opened = undefined;
    },
    terminated: () => (opened = undefined),
  }));

// Not where pages are drawn on a server: an open channel there would keep the process from ending.
const changes = typeof window === 'undefined' ? null : new BroadcastChannel('skidway-day');
const listeners = new Set<() => void>();

/** Says to every open page of ours on this phone that something kept has changed. */
export function tellChange(): void {
  for (const listener of listeners) listener();
  changes?.postMessage('changed');
}

/** Calls back on every change, of this page or another. @returns how to stop */
export function onChange(listener: () => void): () => void {
  listeners.add(listener);
  changes?.addEventListener('message', listener);
  return () => {
    listeners.delete(listener);
    changes?.removeEventListener('message', listener);
  };
}

export const holderOf = async (): Promise<Holder | undefined> => (await database()).get('holder', 'now');

/** Keeps what the server told of the days to come; bookings that are no longer among them are let go unless entries wait for them. */
export async function keepPack(pack: DayPack): Promise<void> {
  const db = await database();
  const { id: accountId, name } = pack.account;
  const work = db.transaction(['kept', 'tally', 'sheets', 'holder', 'waiting', 'refused', 'pictures'], 'readwrite', { durability: 'strict' });
  const told = new Set(pack.bookings.map(({ number }) => number));
  for (const old of await work.objectStore('kept').getAll()) {
    const key: Key = [old.accountId, old.number];
    let unsent = 0;
    for (const store of ['waiting', 'refused', 'pictures'] as const) unsent += await work.objectStore(store).index('ofBooking').count(key);
    // Another account's days leave with it; its unsent entries stay until it signs in again.
    if (unsent === 0 && (old.accountId !== accountId || !told.has(old.number))) {
      await work.objectStore('kept').delete(key);
      await work.objectStore('tally').delete(key);
      await work.objectStore('sheets').delete(key);
    }
  }
  for (const { tally, ...booking } of pack.bookings) {
    await work.objectStore('kept').put({ ...booking, accountId, savedAt: pack.at });
    await work.objectStore('tally').put({ ...tally, accountId, heardAt: new Date().toISOString() });
  }
  const clockOffMs = new Date(pack.at).getTime() - Date.now();
  await work.objectStore('holder').put({ accountId, name, heardAt: pack.at, clockOffMs, signedOut: false }, 'now');
  await work.done;
  tellChange();
}

/** Keeps a tally as the server has just told it. */
export async function keepTally(accountId: string, view: TallyView): Promise<void> {
  await (await database()).put('tally', { ...view, accountId, heardAt: new Date().toISOString() });
  tellChange();
}

export async function markSignedOut(signedOut: boolean): Promise<void> {
  const db = await database();
  const holder = await db.get('holder', 'now');
  if (!holder || holder.signedOut === signedOut) return;
  await db.put('holder', { ...holder, signedOut }, 'now');
  tellChange();
}

/** How many entries and photographs of an account, or of anybody, the server does not have. */
export async function unsentCount(accountId?: string): Promise<number> {
  const db = await database();
  const all = [...(await db.getAll('waiting')), ...(await db.getAll('refused')), ...(await db.getAll('pictures'))];
  return all.filter((one) => accountId === undefined || one.accountId === accountId).length;
}

/** On signing out: the days leave the phone, entries that were not sent stay for when their account signs in again. */
export async function letGo(): Promise<void> {
  const db = await database();
  const work = db.transaction(['kept', 'tally', 'sheets', 'holder', 'sent'], 'readwrite');
  await work.objectStore('kept').clear();
  await work.objectStore('tally').clear();
  await work.objectStore('sheets').clear();
  await work.objectStore('sent').clear();
  await work.objectStore('holder').clear();
  await work.done;
  tellChange();
}
