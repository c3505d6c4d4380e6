import { useCallback, useEffect, useState } from 'react';
import type { CutSheetView } from '~/schemas/cut-sheet.ts';
import type { DayPack } from '~/schemas/day.ts';
import { database, onChange, tellChange, type KeptSheet } from './store.ts';

/** Planning many logs takes the server a while. */
const PATIENCE_MS = 60_000;

async function fetchSheet(accountId: string, booking: number): Promise<void> {
  const response = await fetch(`/api/bookings/${booking}/cut-sheet`, { signal: AbortSignal.timeout(PATIENCE_MS) });
  if (!response.ok) return;
  const sheet: CutSheetView = await response.json();
  const db = await database();
  const before = await db.get('sheets', [accountId, booking]);
  // Where the saw stands is kept of every log whose plan has not changed.
  const plans = new Map(before?.logs.map((log) => [log.logId, JSON.stringify(log)]));
  const same = sheet.logs.filter((log) => plans.get(log.logId) === JSON.stringify(log)).map(({ logId }) => logId);
  await db.put('sheets', { ...sheet, accountId, cutAt: Object.fromEntries(Object.entries(before?.cutAt ?? {}).filter(([logId]) => same.includes(logId))) });
  tellChange();
}

/** Asks, one after another, for the cut sheets that the phone does not keep or keeps by an older plan. What fails is asked for the next time. */
export async function keepSheets({ account, bookings }: DayPack): Promise<void> {
  const db = await database();
  for (const { number, side, status, sheetKey } of bookings) {
    if (side !== 'sawyer' || (status !== 'held' && status !== 'sawing')) continue;
    const kept = await db.get('sheets', [account.id, number]);
    if (kept?.key !== sheetKey) await fetchSheet(account.id, number).catch(() => undefined);
  }
}

/** The cut sheet that this phone keeps of a booking, and a way to say at which cut a log is; `null` when there is none here. */
export function useCutSheet(accountId: string, booking: number): { readonly sheet: KeptSheet | null; readonly goTo: (logId: string, cut: number) => void } {
  const [sheet, setSheet] = useState<KeptSheet | null>(null);
  useEffect(() => {
    const read = async (): Promise<KeptSheet | undefined> => {
      const kept = await (await database()).get('sheets', [accountId, booking]);
      setSheet(kept ?? null);
      return kept;
    };
    void read().then((kept) => (kept ? undefined : fetchSheet(accountId, booking).catch(() => undefined)));
    return onChange(() => void read());
  }, [accountId, booking]);
  const goTo = useCallback(
    (logId: string, cut: number) => {
      setSheet((before) => {
        if (!before) return before;
        const next = { ...before, cutAt: { ...before.cutAt, [logId]: cut } };
        void database().then((db) => db.put('sheets', next));
        return next;
      });
    },
    [],
  );
  return { sheet, goTo };
}
