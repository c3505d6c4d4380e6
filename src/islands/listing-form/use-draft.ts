import { useCallback, useEffect, useRef, useState } from 'react';
import { flushSync } from 'react-dom';
import { isUntouched, type ListingTyped } from '~/domain/listing/draft.ts';
import { paths } from '~/domain/paths.ts';
import type { DraftAnswer, DraftRequest } from '~/schemas/listing-draft.ts';
import { forgetLocal, keepLocal, localKey } from './local-draft.ts';

/** How it stands with what was typed last. */
export type Kept =
  | { readonly kind: 'nothing' }
  | { readonly kind: 'saving' }
  | { readonly kind: 'saved'; readonly at: Date }
  | { readonly kind: 'in browser'; readonly at: Date }
  | { readonly kind: 'failed'; readonly message: string; readonly signIn: boolean }
  | { readonly kind: 'elsewhere' };

interface Start {
  readonly number: number | null;
  readonly typedVersion: number | null;
  readonly signedIn: boolean;
  /** A draft is saved by itself; a listing on show only when the owner says so. */
  readonly isDraft: boolean;
}

export interface Draft {
  readonly number: number | null;
  readonly typedVersion: number | null;
  readonly kept: Kept;
  /** Something was typed. */
  readonly touched: () => void;
  /** Saves now what is not saved yet; resolves when that is over, however it ended. */
  readonly settle: () => Promise<void>;
  readonly isSettled: () => boolean;
  /** Overwrites what another device saved. */
  readonly keepMine: () => void;
}

type Answered = { readonly ok: true; readonly saved: DraftAnswer } | { readonly ok: false; readonly status: number; readonly detail: string };

async function send(request: DraftRequest): Promise<Answered> {
  try {
    const answer = await fetch('/api/listings/draft', { method: 'POST', headers: { 'content-type': 'application/json' }, body: JSON.stringify(request), signal: AbortSignal.timeout(20_000) });
    if (answer.ok) return { ok: true, saved: (await answer.json()) as DraftAnswer };
    const problem = (await answer.json().catch(() => ({}))) as { detail?: string; errors?: readonly { message: string }[] };
    return { ok: false, status: answer.status, detail: problem.errors?.[0]?.message ?? problem.detail ?? 'It could not be saved.' };
  } catch {
    return { ok: false, status: 0, detail: 'There is no connection.' };
  }
}

const WAIT_MS = 1_200;

/** Keeps what is typed: at once in this browser, a moment later in the account, until the account has it. */
export function useDraft(start: Start, read: () => ListingTyped): Draft {
  const [at, setAt] = useState({ number: start.number, typedVersion: start.typedVersion });
  const [kept, setKept] = useState<Kept>({ kind: 'nothing' });
  // Also kept outside of React: a timer must see the newest numbers, not those of the render that started it.
  const now = useRef({ ...at, stopped: false, dirty: false, timer: 0, running: null as Promise<void> | null });
  const toAccount = start.signedIn && start.isDraft;

  const push = useCallback(async (overwrite: boolean): Promise<void> => {
    const typed = read();
    now.current.dirty = false;
    setKept({ kind: 'saving' });
    const answered = await send({ number: now.current.number, typedVersion: overwrite ? null : now.current.typedVersion, typed });
    if (answered.ok) {
      const { number, typedVersion, savedAt } = answered.saved;
      if (now.current.number === null) history.replaceState(history.state, '', paths.editListing(number));
      if (!now.current.dirty) {
        forgetLocal(now.current.number);
        forgetLocal(number);
      }
      Object.assign(now.current, { number, typedVersion });
      // Drawn before anything else happens: a form that is sent next must carry the new version, not the one before.
      flushSync(() => {
        setAt({ number, typedVersion });
        setKept({ kind: 'saved', at: new Date(savedAt) });
      });
      return;
    }
    now.current.dirty = true;
    // Whoever was signed out or had not confirmed the address may have done so in another window: only what a person has to decide stops.
    now.current.stopped = answered.status === 409 || answered.status === 404;
    setKept(answered.status === 409 ? { kind: 'elsewhere' } : { kind: 'failed', message: answered.detail, signIn: answered.status === 401 });
  }, [read]);

  const run = useCallback((overwrite = false): Promise<void> => {
    window.clearTimeout(now.current.timer);
    const work = (now.current.running ?? Promise.resolve()).then(() => (now.current.dirty || overwrite ? push(overwrite) : undefined)).then(() => {
      now.current.running = null;
    });
    now.current.running = work;
    return work;
  }, [push]);

  const touched = useCallback((): void => {
    const typed = read();
    if (isUntouched(typed)) return;
    now.current.dirty = true;
    const local = keepLocal(now.current.number, { typed, typedVersion: now.current.typedVersion });
    window.clearTimeout(now.current.timer);
    if (!toAccount || now.current.stopped) {
      if (!toAccount && local) setKept({ kind: 'in browser', at: new Date() });
      return;
    }
    now.current.timer = window.setTimeout(() => void run(), WAIT_MS);
  }, [read, run, toAccount]);

  useEffect(() => {
    const again = (): void => {
      if (now.current.dirty && toAccount && !now.current.stopped) void run();
    };
    // A form that was never saved, kept by this browser, has been taken up and saved in another window: saving it here too would
    // make a second draft of it.
    const takenUp = (event: StorageEvent): void => {
      if (event.key !== localKey(null) || event.newValue !== null || now.current.number !== null || !now.current.dirty) return;
      window.clearTimeout(now.current.timer);
      Object.assign(now.current, { stopped: true, dirty: false });
      setKept({ kind: 'elsewhere' });
    };
    window.addEventListener('storage', takenUp);
    window.addEventListener('online', again);
    window.addEventListener('focus', again);
    return () => {
      window.removeEventListener('storage', takenUp);
      window.removeEventListener('online', again);
      window.removeEventListener('focus', again);
    };
  }, [run, toAccount]);

  return {
    ...at,
    kept,
    touched,
    settle: () => (toAccount && !now.current.stopped && now.current.dirty ? run() : (now.current.running ?? Promise.resolve())),
    isSettled: () => !toAccount || now.current.stopped || (!now.current.dirty && now.current.running === null),
    keepMine() {
      now.current.stopped = false;
      void run(true);
    },
  };
}
