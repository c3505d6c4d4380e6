import { useCallback, useEffect, useRef, useState } from 'react';
import type { PhotoView } from '~/domain/photo.ts';
import { callApi } from '~/islands/call-api.ts';
import { isUnderway, itemOf, itemOfFile, merge, moved, type Item } from './item.ts';
import { sendFile } from './send-file.ts';
import type { Album } from './album.ts';

const AT_ONCE = 3;

interface Begun {
  readonly photo: PhotoView;
  readonly upload: { readonly url: string; readonly fields: Readonly<Record<string, string>> };
}

export interface Photos {
  readonly items: readonly Item[];
  /** What went wrong with the board as a whole, in words. */
  readonly trouble: string | null;
  readonly add: (files: readonly File[]) => void;
  readonly cancel: (key: string) => void;
  readonly retry: (key: string) => void;
  readonly remove: (key: string) => Promise<void>;
  /** Moves on the screen only; `settleOrder` keeps it. */
  readonly move: (from: number, to: number) => void;
  readonly settleOrder: () => void;
  /** @throws ApiRefusal */
  readonly change: (key: string, change: { readonly caption?: string; readonly logId?: string | null }) => Promise<void>;
}

const messageOf = (error: unknown): string => (error instanceof Error ? error.message : 'That did not work. Try again.');

/** The photographs of a listing, or of a sawyer's work, and everything a person does to them here. Files are sent three at a time. */
export function usePhotos(album: Album, given: readonly PhotoView[]): Photos {
  const [items, setItems] = useState<readonly Item[]>(() => given.map((photo) => itemOf(photo)));
  const [trouble, setTrouble] = useState<string | null>(null);
  // The newest list, for work that began with an older one.
  const latest = useRef(items);
  const sends = useRef(new Map<string, AbortController>());
  const orderTimer = useRef<ReturnType<typeof setTimeout> | undefined>(undefined);

  const write = useCallback((next: (now: readonly Item[]) => readonly Item[]) => {
    latest.current = next(latest.current);
    setItems(latest.current);
  }, []);
  const patch = useCallback((key: string, change: Partial<Item>) => write((now) => now.map((item) => (item.key === key ? { ...item, ...change } : item))), [write]);
  const find = (key: string): Item | undefined => latest.current.find((item) => item.key === key);

  const settleOrder = useCallback(() => {
    clearTimeout(orderTimer.current);
    orderTimer.current = setTimeout(() => {
      const ids = latest.current.flatMap(({ photo }) => (photo ? [photo.id] : []));
      callApi('PUT', album.orderAt, { ...album.of, ids }).then(
        () => setTrouble(null),
        (error: unknown) => setTrouble(`The order is not kept yet. ${messageOf(error)}`),
      );
    }, 400);
  }, [album]);

  const forget = (photo: PhotoView | null): void => {
    // Best effort: what stays behind is forgotten by the server after a while.
    if (photo) callApi('DELETE', `/api/photos/${photo.id}`).catch(() => undefined);
  };

  const send = useCallback(async (key: string, file: File) => {
    const stop = new AbortController();
    sends.current.set(key, stop);
    patch(key, { stage: 'sending', sent: 0, problem: null });
    let photo: PhotoView | null = null;
    try {
      const begun = await callApi<Begun>('POST', album.beginAt, { ...album.of, fileName: file.name, type: file.type, bytes: file.size });
      photo = begun.photo;
      if (stop.signal.aborted) return forget(photo);
      patch(key, { photo });
      await sendFile(begun.upload, file, (sent) => patch(key, { sent }), stop.signal);
      const arrived = await callApi<PhotoView>('POST', `/api/photos/${photo.id}/arrived`);
      const typed = find(key)?.photo ?? arrived;
      patch(key, { photo: { ...arrived, caption: typed.caption, logId: typed.logId }, stage: 'checking', sent: 1, file: null });
      settleOrder();
    } catch (error) {
      if (stop.signal.aborted) forget(photo);
      else patch(key, { stage: 'failed', problem: messageOf(error) });
    } finally {
      sends.current.delete(key);
    }
  }, [album, patch, settleOrder]);

  useEffect(() => {
    const free = AT_ONCE - items.filter(({ stage }) => stage === 'sending').length;
    for (const item of items.filter(({ stage }) => stage === 'waiting').slice(0, Math.max(0, free))) if (item.file) void send(item.key, item.file);
  }, [items, send]);

  const isChecking = items.some(({ stage }) => stage === 'checking');
  useEffect(() => {
    if (!isChecking) return undefined;
    let stopped = false;
    let timer: ReturnType<typeof setTimeout> | undefined;
    let asked = 0;
    const ask = async (): Promise<void> => {
      const answer = await callApi<{ photos: PhotoView[] }>('GET', album.listAt).catch(() => null);
      if (stopped) return;
      if (answer) write((now) => merge(now, answer.photos));
      asked += 1;
      timer = setTimeout(() => void ask(), asked < 20 ? 1000 : 5000);
    };
    timer = setTimeout(() => void ask(), 800);
    return () => {
      stopped = true;
      clearTimeout(timer);
    };
  }, [album, isChecking, write]);

  const isSending = items.some(isUnderway);
  useEffect(() => {
    if (!isSending) return undefined;
    const ask = (event: BeforeUnloadEvent): void => event.preventDefault();
    window.addEventListener('beforeunload', ask);
    return () => window.removeEventListener('beforeunload', ask);
  }, [isSending]);

  const drop = (key: string): void => write((now) => now.filter((item) => item.key !== key));

  return {
    items,
    trouble,
    settleOrder,
    add: (files) => write((now) => [...now, ...files.map((file) => itemOfFile(file, crypto.randomUUID()))]),
    move: (from, to) => write((now) => moved(now, from, to)),
    cancel: (key) => {
      sends.current.get(key)?.abort();
      drop(key);
    },
    retry: (key) => {
      forget(find(key)?.photo ?? null);
      patch(key, { stage: 'waiting', photo: null, sent: 0, problem: null });
    },
    remove: async (key) => {
      const photo = find(key)?.photo ?? null;
      if (photo) await callApi('DELETE', `/api/photos/${photo.id}`);
      drop(key);
    },
    change: async (key, change) => {
      const photo = find(key)?.photo;
      if (!photo) return;
      patch(key, { photo: { ...photo, ...change } });
      const kept = await callApi<PhotoView>('PATCH', `/api/photos/${photo.id}`, change);
      const now = find(key)?.photo;
      if (now) patch(key, { photo: { ...now, picture: kept.picture } });
    },
  };
}
