import { paths } from '~/domain/paths.ts';
import type { DayPack } from '~/schemas/day.ts';
import type { TallyView } from '~/schemas/tally-view.ts';
import { keepSheets } from './cut-sheets.ts';
import { database, holderOf, keepPack, keepTally, markSignedOut, tellChange, type Waiting } from './store.ts';
import { sendPictures } from './pictures.ts';
import { setAside, takeOff } from './queue.ts';

/** How sending ended: everything sent, nobody signed in, no way through just now. */
export type Sending = 'sent' | 'signed-out' | 'no-signal';

const MOST_AT_ONCE = 200;
const PATIENCE_MS = 20_000;
/** Refusals of the whole booking, whatever the entry: it is not this account's, or its tally can no longer be written. */
const wholeBooking: ReadonlySet<number> = new Set([403, 404, 409]);

interface Refusal {
  readonly detail?: unknown;
  readonly errors?: readonly { readonly message?: unknown }[];
}

async function reasonOf(response: Response): Promise<string> {
  const said: Refusal | null = await response.json().catch(() => null);
  const words = said?.errors?.[0]?.message ?? said?.detail;
  return typeof words === 'string' && words !== '' ? words : 'The server would not take it.';
}

const put = (booking: number, body: unknown): Promise<Response> =>
  fetch(`/api/bookings/${booking}/tally`, { method: 'PUT', headers: { 'content-type': 'application/json' }, body: JSON.stringify(body), signal: AbortSignal.timeout(PATIENCE_MS) });

/** How the tally stands now, after a refusal: what is signed next is what is on the screen. */
async function hearTally(accountId: string, booking: number): Promise<void> {
  try {
    const response = await fetch(`/api/bookings/${booking}/tally`, { signal: AbortSignal.timeout(PATIENCE_MS) });
    if (response.ok) await keepTally(accountId, (await response.json()) as TallyView);
  } catch {
    // The next look hears it.
  }
}

/**
 * Sends entries of one booking in their order. What the server refuses is halved until the one that it means is found and set aside;
 * everything else goes on. Sending again what has arrived changes nothing, because the ids were made here.
 */
async function sendRun(items: readonly Waiting[]): Promise<Sending> {
  const [first] = items;
  if (!first) return 'sent';
  let response: Response;
  try {
    response = await put(first.booking, { account: first.accountId, entries: items.map(({ entry }) => entry) });
  } catch {
    return 'no-signal';
  }
  if (response.ok) {
    const view: TallyView = await response.json();
    // In this order: a page that reads between the two finds an entry twice, which it notices, and never not at all.
    await keepTally(first.accountId, view);
    await takeOff(items);
    // Logs that are not as listed have a cut sheet of their own.
    if (items.some(({ entry }) => entry.kind === 'measure' || entry.kind === 'addLog')) void refresh();
    return 'sent';
  }
  if (response.status === 401) return 'signed-out';
  if (response.status === 408 || response.status === 429 || response.status >= 500) return 'no-signal';
  if (items.length === 1 || wholeBooking.has(response.status)) {
    await setAside(items, await reasonOf(response));
    await hearTally(first.accountId, first.booking);
    return 'sent';
  }
  const middle = Math.ceil(items.length / 2);
  const before = await sendRun(items.slice(0, middle));
  return before === 'sent' ? sendRun(items.slice(middle)) : before;
}

/** Deeds, which are sent by themselves: a refusal of one says nothing about the boards round it. */
const alone: ReadonlySet<Waiting['entry']['kind']> = new Set(['start', 'allow', 'part', 'offer', 'sign']);

/** The next entries that go together: of the account whose phone this is and of one booking, in order. */
async function nextRun(accountId: string): Promise<readonly Waiting[]> {
  const waiting = await (await database()).getAllFromIndex('waiting', 'ofBooking', IDBKeyRange.bound([accountId, 0], [accountId, Infinity]), MOST_AT_ONCE);
  const [first] = waiting;
  if (first && alone.has(first.entry.kind)) return [first];
  const end = waiting.findIndex(({ booking, entry }) => booking !== first?.booking || alone.has(entry.kind));
  return end === -1 ? waiting : waiting.slice(0, end);
}

async function sendWaiting(): Promise<Sending> {
  const holder = await holderOf();
  if (!holder) return 'sent';
  for (let run = await nextRun(holder.accountId); run.length > 0; run = await nextRun(holder.accountId)) {
    const sending = await sendRun(run);
    tellChange();
    if (sending === 'sent') continue;
    if (sending === 'signed-out') await markSignedOut(true);
    return sending;
  }
  return 'sent';
}

/** Sends everything that waits. Two pages of one phone never send at the same time. */
export async function sendAll(): Promise<Sending> {
  const sending = 'locks' in navigator ? await navigator.locks.request('skidway-send', sendWaiting) : await sendWaiting();
  if (sending === 'sent') sendPictures().catch(() => undefined);
  return sending;
}

/** Asks for the days to come and keeps them. */
export async function refresh(): Promise<Sending> {
  try {
    const response = await fetch('/api/day', { signal: AbortSignal.timeout(PATIENCE_MS) });
    if (response.status === 401) {
      await markSignedOut(true);
      return 'signed-out';
    }
    if (!response.ok) return 'no-signal';
    const pack: DayPack = await response.json();
    await keepPack(pack);
    keepSheets(pack).catch(() => undefined);
    return 'sent';
  } catch {
    return 'no-signal';
  }
}

/** Where to sign in again and come back to the day. */
export const signInAgain = `${paths.signIn}?next=${encodeURIComponent(paths.day)}`;
