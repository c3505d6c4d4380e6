import type { LogsPageSort } from './sorts.ts';

/** Where a list goes on: after the row with this sort key and id. `key` is null after rows without one (no saw-by date). */
export interface Cursor {
  readonly key: string | null;
  readonly id: string;
}

const uuid = /^[0-9a-f]{8}(-[0-9a-f]{4}){3}-[0-9a-f]{12}$/;
const instant = /^\d{4}-\d\d-\d\d \d\d:\d\d:\d\d(\.\d{1,6})?\+00$/;
const real = (text: string): boolean => /^\d{1,12}(\.\d{1,20})?(e-?\d{1,3})?$/.test(text) && Number.isFinite(Number(text));
const day = (text: string): boolean => /^\d{4}-\d\d-\d\d$/.test(text) && !Number.isNaN(Date.parse(text));

const fits: Readonly<Record<LogsPageSort, (key: string | null) => boolean>> = {
  distance: (key) => key !== null && real(key),
  closing: (key) => key !== null && instant.test(key) && !Number.isNaN(Date.parse(key.replace('+00', 'Z'))),
  newest: (key) => key !== null && instant.test(key) && !Number.isNaN(Date.parse(key.replace('+00', 'Z'))),
  sawBy: (key) => key === null || day(key),
  perHour: (key) => key !== null && /^\d{1,9}$/.test(key),
};

const encode = (text: string): string => btoa(text).replaceAll('+', '-').replaceAll('/', '_').replaceAll('=', '');

/** Writes a cursor of one order as a word that needs no escaping in an address. */
export const writeCursor = (sort: LogsPageSort, cursor: Cursor): string => encode(JSON.stringify([sort, cursor.key, cursor.id]));

/** Reads a cursor; null when it was not written for this order or was tampered with so that it could not be one. */
export function readCursor(text: string, sort: string): Cursor | null {
  try {
    const parts: unknown = JSON.parse(atob(text.replaceAll('-', '+').replaceAll('_', '/')));
    if (!Array.isArray(parts) || parts.length !== 3) return null;
    const [of, key, id] = parts as readonly unknown[];
    if (of !== sort || !Object.hasOwn(fits, sort) || typeof id !== 'string' || !uuid.test(id)) return null;
    if (key !== null && typeof key !== 'string') return null;
    return fits[sort as LogsPageSort](key) ? { key, id } : null;
  } catch {
    return null;
  }
}
