import { useEffect, useState } from 'react';
import type { ClockActivity } from '~/domain/trade/clock.ts';
import { hoursOf, type RunningClock } from '~/domain/trade/running-clock.ts';
import { database, onChange, tellChange } from '~/islands/day/store.ts';
import type { TallyQueue } from './use-tally-queue.ts';

export interface Clock {
  readonly running: RunningClock | null;
  /** The hours so far, as an entry would say them; null before the first minute has passed. */
  readonly soFar: { readonly startsAt: string; readonly endsAt: string } | null;
  /** Goes over to an activity: what ran before becomes an entry. Null stops. */
  readonly turnTo: (activity: ClockActivity | null) => void;
}

const TICK_MS = 15_000;

/** The clock of a booking on this phone: kept on its disk, so that it runs on through a dead battery. */
export function useClock({ accountId, view, add }: TallyQueue): Clock {
  const { booking, clock } = view;
  const [running, setRunning] = useState<RunningClock | null>(null);
  const [now, setNow] = useState(() => new Date());
  useEffect(() => {
    const read = async (): Promise<void> => setRunning((await (await database()).get('clocks', [accountId, booking])) ?? null);
    void read();
    const stop = onChange(() => void read());
    const tick = setInterval(() => setNow(new Date()), TICK_MS);
    return () => {
      stop();
      clearInterval(tick);
    };
  }, [accountId, booking]);
  const turnTo = (activity: ClockActivity | null): void => {
    const at = new Date();
    setNow(at);
    const hours = running && hoursOf(running, at, clock);
    if (running && hours) add({ kind: 'clock', id: crypto.randomUUID(), activity: running.activity, ...hours });
    const next = activity && { activity, startsAt: at.toISOString() };
    setRunning(next);
    void database().then(async (db) => {
      if (next) await db.put('clocks', { ...next, accountId, booking });
      else await db.delete('clocks', [accountId, booking]);
      tellChange();
    });
  };
  return { running, soFar: running && hoursOf(running, now, clock), turnTo };
}
