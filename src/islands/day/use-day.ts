import { useCallback, useEffect, useState } from 'react';
import { refresh, sendAll, type Sending } from './send.ts';
import { database, holderOf, onChange, unsentCount, type Holder, type KeptBooking } from './store.ts';

/** What this phone keeps of the days to come. `null` while it is being read. */
export interface Day {
  readonly holder: Holder | undefined;
  readonly bookings: readonly KeptBooking[];
  readonly unsent: number;
}

async function readDay(): Promise<Day> {
  const holder = await holderOf();
  const all = await (await database()).getAll('kept');
  const bookings = all.filter(({ accountId }) => accountId === holder?.accountId).sort((a, b) => (a.startsAt ?? '').localeCompare(b.startsAt ?? ''));
  return { holder, bookings, unsent: await unsentCount(holder?.accountId) };
}

/** Reads the days from the phone at once, then sends what waits and asks for what is new; again whenever signal or the page comes back. */
export function useDay(): { readonly day: Day | null; readonly heard: Sending | null; readonly shut: boolean } {
  const [day, setDay] = useState<Day | null>(null);
  const [heard, setHeard] = useState<Sending | null>(null);
  const [shut, setShut] = useState(false);
  const read = useCallback(() => readDay().then(setDay, () => setShut(true)), []);
  useEffect(() => {
    const meet = async (): Promise<void> => {
      await sendAll();
      setHeard(await refresh());
      // Entries of the account that has just been found signed in.
      await sendAll();
    };
    const seen = (): void => {
      if (document.visibilityState === 'visible') void meet();
    };
    const stop = onChange(() => void read());
    void read().then(meet);
    window.addEventListener('online', seen);
    document.addEventListener('visibilitychange', seen);
    return () => {
      stop();
      window.removeEventListener('online', seen);
      document.removeEventListener('visibilitychange', seen);
    };
  }, [read]);
  return { day, heard, shut };
}
