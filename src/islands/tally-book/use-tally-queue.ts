import { useCallback, useEffect, useMemo, useState } from 'react';
import { dropRefused, entriesOf, putEntries, tryRefusedAgain } from '~/islands/day/queue.ts';
import { picturesOf } from '~/islands/day/pictures.ts';
import { refresh, sendAll, type Sending } from '~/islands/day/send.ts';
import { database, keepTally, onChange, type Refused } from '~/islands/day/store.ts';
import type { TallyEntry } from '~/schemas/tally-entries.ts';
import type { TallyView } from '~/schemas/tally-view.ts';
import { withEntries } from './with-entries.ts';

export interface TallyQueue {
  readonly accountId: string;
  /** The tally with everything entered on this phone, sent or not. */
  readonly view: TallyView;
  /** When the server's tally was last heard here, by this phone's clock; null when that is not known. */
  readonly heardAt: string | null;
  /** How many entries and photographs are kept here that the server does not have yet. */
  readonly waiting: number;
  readonly refused: readonly Refused[];
  /** When something was last sent from this phone, as an instant. */
  readonly sentAt: string | null;
  readonly sending: Sending;
  /** Why an entry could not be kept on this phone; null when all is well. */
  readonly trouble: string | null;
  readonly add: (...entries: TallyEntry[]) => void;
  readonly tryAgain: () => void;
  readonly drop: (item: Refused) => void;
}

const SEND_EVERY_MS = 10_000;
/** How often the other phone's entries are asked for: signal in the woods is slow and metered. */
const LOOK_EVERY_MS = 60_000;
const FULL = 'This phone could not keep that entry: its storage is full or shut. Write it on paper, make room, and enter it again.';

/** Asks the server how the tally stands when this phone has nothing to say: the other phone may have. */
async function look(accountId: string, booking: number): Promise<void> {
  // Before sawing has begun there is no tally to ask for: the days are, which say when it has.
  if ((await (await database()).get('tally', [accountId, booking]))?.status === 'held') return void (await refresh());
  const response = await fetch(`/api/bookings/${booking}/tally`);
  if (!response.ok) return;
  const view: TallyView = await response.json();
  await keepTally(accountId, view);
}

/**
 * Keeps entries on the phone first and sends them in order when there is signal: after each entry, when the browser comes online, when
 * the page is opened or comes back into view, and every ten seconds. Several pages and phones may do so at once.
 * @param initial the tally to begin with; a later one that the phone keeps takes its place
 * @param fresh whether the server has just told `initial`, or it comes from the phone itself
 */
export function useTallyQueue(initial: TallyView, accountId: string, fresh: boolean): TallyQueue {
  const { booking } = initial;
  const [server, setServer] = useState<TallyView & { readonly heardAt?: string }>(initial);
  const [kept, setKept] = useState<Awaited<ReturnType<typeof entriesOf>>>({ waiting: [], refused: [], sentAt: null });
  const [pictures, setPictures] = useState(0);
  const [sending, setSending] = useState<Sending>('sent');
  const [trouble, setTrouble] = useState<string | null>(null);

  const read = useCallback(async () => {
    // In this order: what leaves the queue is in the tally before, so that no entry is missing for a moment.
    const entries = await entriesOf(accountId, booking);
    const tally = await (await database()).get('tally', [accountId, booking]);
    if (tally) setServer(tally);
    setKept(entries);
    setPictures((await picturesOf(accountId, booking)).filter(({ because }) => because === null).length);
  }, [accountId, booking]);

  const send = useCallback(async () => setSending(await sendAll()), []);

  useEffect(() => {
    const stop = onChange(() => void read());
    const again = (): void => void send();
    const seen = (): void => void looking();
    const looking = async (): Promise<void> => {
      if (document.visibilityState !== 'visible') return;
      await send();
      await look(accountId, booking).catch(() => undefined);
    };
    void (fresh ? keepTally(accountId, initial) : read()).then(looking);
    const sendTimer = setInterval(again, SEND_EVERY_MS);
    const lookTimer = setInterval(() => void looking(), LOOK_EVERY_MS);
    window.addEventListener('online', again);
    document.addEventListener('visibilitychange', seen);
    return () => {
      stop();
      clearInterval(sendTimer);
      clearInterval(lookTimer);
      window.removeEventListener('online', again);
      document.removeEventListener('visibilitychange', seen);
    };
    // `initial` is what this page was opened with: the phone's own copy takes over from there.
  }, [accountId, booking, read, send]);

  const add = useCallback(
    (...entries: TallyEntry[]) => {
      putEntries(accountId, booking, entries).then(
        () => {
          setTrouble(null);
          void send();
        },
        () => setTrouble(FULL),
      );
    },
    [accountId, booking, send],
  );
  const view = useMemo(() => withEntries(server, kept.waiting.map(({ entry }) => entry)), [server, kept]);
  return {
    accountId, view, sending, trouble, add,
    heardAt: server.heardAt ?? null,
    waiting: kept.waiting.length + pictures,
    refused: kept.refused,
    sentAt: kept.sentAt,
    tryAgain: () => void tryRefusedAgain(kept.refused).then(send),
    drop: (item) => void dropRefused(item),
  };
}
