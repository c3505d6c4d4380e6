import { photoProblem, type PhotoView } from '~/domain/photo.ts';

/** Where a photograph is on its way from a file on this device to the listing. */
export type Stage = 'waiting' | 'sending' | 'checking' | 'ready' | 'refused' | 'failed';

/** One row of the board: a file on its way, or a photograph the server already has. */
export interface Item {
  /** The same from the choosing of the file to the end. */
  readonly key: string;
  readonly photo: PhotoView | null;
  /** Kept until it has arrived, so that it can be sent again. */
  readonly file: File | null;
  readonly fileName: string;
  readonly stage: Stage;
  /** How much of the file has been sent, 0 to 1. */
  readonly sent: number;
  /** Why it was refused or failed, for a person. */
  readonly problem: string | null;
}

const CUT_OFF = 'This one did not arrive: it was cut off, or another window is still sending it. Remove it and add the file again.';

/** A photograph as the server tells it. */
export function itemOf(photo: PhotoView, before?: Item): Item {
  const stage = photo.status === 'awaiting' ? 'failed' : photo.status;
  return {
    key: before?.key ?? photo.id,
    photo,
    file: photo.status === 'ready' || photo.status === 'refused' ? null : (before?.file ?? null),
    fileName: photo.fileName,
    stage,
    sent: 1,
    problem: photo.status === 'awaiting' ? CUT_OFF : photo.refusedBecause,
  };
}

/** A file somebody chose: refused here at once when it can be known, otherwise waiting its turn. */
export function itemOfFile(file: File, key: string): Item {
  const problem = photoProblem(file.name, file.type, file.size);
  return { key, photo: null, file: problem === null ? file : null, fileName: file.name, stage: problem === null ? 'waiting' : 'refused', sent: 0, problem };
}

/** Whether its file is still being dealt with, so that leaving the page would lose it. */
export const isUnderway = (item: Item): boolean => item.stage === 'waiting' || item.stage === 'sending';

/** Lays what the server knows over the board. Order is the person's own; photographs that are gone elsewhere go here too. */
export function merge(items: readonly Item[], photos: readonly PhotoView[]): Item[] {
  const known = new Map(photos.map((photo) => [photo.id, photo]));
  return items.flatMap((item) => {
    if (item.photo === null || isUnderway(item)) return [item];
    const fresh = known.get(item.photo.id);
    if (!fresh) return item.stage === 'failed' && item.file !== null ? [item] : [];
    // What is being typed here is newer than what was asked for.
    return item.stage === 'checking' ? [itemOf({ ...fresh, caption: item.photo.caption, logId: item.photo.logId }, item)] : [item];
  });
}

/** The items with one put at another place; the same list when that is outside it. */
export function moved<T>(list: readonly T[], from: number, to: number): readonly T[] {
  const item = list[from];
  if (item === undefined || to < 0 || to >= list.length || from === to) return list;
  const rest = list.filter((_, index) => index !== from);
  return [...rest.slice(0, to), item, ...rest.slice(to)];
}
