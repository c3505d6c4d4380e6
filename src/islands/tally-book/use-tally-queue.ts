import { useCallback, useEffect, useRef, useState } from 'react';
import type { TallyEntry } from '~/schemas/tally-entries.ts';
import type { TallyView } from '~/schemas/tally-view.ts';

/** Where entries are kept on this device until the server has them: per account and booking. */
const keyOf = (accountId: string, booking: number): string => `skidway.tally.${accountId}.${booking}`;

function keptEntries(key: string): TallyEntry[] {
  try {
    const kept: unknown = JSON.parse(localStorage.getItem(key) ?? '[]');
    return Array.isArray(kept) ? (kept as TallyEntry[]) : [];
  } catch {
    return [];
  }
}

/** Lays entries that have not been sent yet over the tally as the server last told it. */
export function withEntries(view: TallyView, entries: readonly TallyEntry[]): TallyView {
  return entries.reduce<TallyView>((now, entry) => {
    switch (entry.kind) {
      case 'board': {
        const { kind: _, boardKind, ...row } = entry;
        return now.boards.some(({ id }) => id === entry.id) ? now : { ...now, boards: [...now.boards, { ...row, kind: boardKind }] };
      }
      case 'hit': {
        const { kind: _, ...row } = entry;
        return now.hits.some(({ id }) => id === entry.id) ? now : { ...now, hits: [...now.hits, row] };
      }
      case 'cull': {
        const { kind: _, ...row } = entry;
        return now.culls.some(({ id }) => id === entry.id) ? now : { ...now, culls: [...now.culls, row] };
      }
      case 'clock': {
        const { kind: _, ...row } = entry;
        return now.clock.some(({ id }) => id === entry.id) ? now : { ...now, clock: [...now.clock, row] };
      }
      case 'remove': {
        const others = <Row extends { readonly id: string }>(rows: readonly Row[]): Row[] => rows.filter(({ id }) => id !== entry.id);
        return { ...now, boards: others(now.boards), hits: others(now.hits), culls: others(now.culls), clock: others(now.clock) };
      }
      case 'extras': {
        const { kind: _, ...extras } = entry;
        return { ...now, extras };
      }
    }
  }, view);
}

export interface TallyQueue {
  readonly view: TallyView;
  /** Entries kept here that the server does not have yet. */
  readonly waiting: number;
  /** Why the last sending failed, in words; null when it did not. */
  readonly trouble: string | null;
  readonly add: (...entries: TallyEntry[]) => void;
}

/**
 * Keeps entries on the device first and sends them in order when there is signal: after each entry, when the browser comes online or
 * the page comes back into view, and every ten seconds while any wait. A repeated send adds nothing, because ids are made here.
 */
export function useTallyQueue(initial: TallyView, accountId: string): TallyQueue {
  const key = keyOf(accountId, initial.booking);
  const [server, setServer] = useState(initial);
  const [queued, setQueued] = useState<readonly TallyEntry[]>([]);
  const [trouble, setTrouble] = useState<string | null>(null);
  const queue = useRef<TallyEntry[]>([]);
  const sending = useRef(false);

  const keep = useCallback(() => {
    localStorage.setItem(key, JSON.stringify(queue.current));
    setQueued([...queue.current]);
  }, [key]);

  const send = useCallback(async () => {
    if (sending.current || queue.current.length === 0) return;
    sending.current = true;
    const batch = queue.current.slice(0, 200);
    try {
      const response = await fetch(`/api/bookings/${initial.booking}/tally`, { method: 'PUT', headers: { 'content-type': 'application/json' }, body: JSON.stringify({ entries: batch }) });
      if (response.ok) {
        setServer((await response.json()) as TallyView);
        queue.current = queue.current.slice(batch.length);
        setTrouble(null);
        keep();
      } else {
        const problem = (await response.json().catch(() => null)) as { detail?: string; errors?: { message: string }[] } | null;
        setTrouble(response.status === 401 ? 'You are signed out. Your entries are kept here; sign in again and they are sent.' : (problem?.errors?.[0]?.message ?? problem?.detail ?? 'The server could not take the entries. They are kept here.'));
      }
    } catch {
      setTrouble('No signal. Your entries are kept on this phone and sent when it returns.');
    } finally {
      sending.current = false;
    }
  }, [initial.booking, keep]);

  useEffect(() => {
    queue.current = keptEntries(key);
    setQueued([...queue.current]);
    void send();
    const again = (): void => void send();
    const timer = setInterval(again, 10_000);
    window.addEventListener('online', again);
    document.addEventListener('visibilitychange', again);
    return () => {
      clearInterval(timer);
      window.removeEventListener('online', again);
      document.removeEventListener('visibilitychange', again);
    };
  }, [key, send]);

  const add = useCallback(
    (...entries: TallyEntry[]) => {
      queue.current = [...queue.current, ...entries];
      keep();
      void send();
    },
    [keep, send],
  );

  return { view: withEntries(server, queued), waiting: queued.length, trouble, add };
}
