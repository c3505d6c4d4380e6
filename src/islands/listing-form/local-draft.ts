import { asListingTyped, isUntouched, type ListingTyped } from '~/domain/listing/draft.ts';

/** What this browser keeps of a form until an account has it. */
export interface LocalDraft {
  readonly typed: ListingTyped;
  /** The saved version it was typed on; null for one that was never saved. */
  readonly typedVersion: number | null;
  readonly at: string;
}

/** Under which name this browser keeps a form. */
export const localKey = (number: number | null): string => `skidway:listing:${number ?? 'new'}`;

/** Keeps the form in this browser. @returns false where the browser keeps nothing (a private window may not). */
export function keepLocal(number: number | null, draft: Omit<LocalDraft, 'at'>): boolean {
  try {
    localStorage.setItem(localKey(number), JSON.stringify({ ...draft, at: new Date().toISOString() }));
    return true;
  } catch {
    return false;
  }
}

/** What this browser kept of a form that somebody had begun; null for none. */
export function readLocal(number: number | null): LocalDraft | null {
  try {
    const kept: unknown = JSON.parse(localStorage.getItem(localKey(number)) ?? 'null');
    if (typeof kept !== 'object' || kept === null) return null;
    const { typed, typedVersion, at } = kept as Partial<LocalDraft>;
    const form = asListingTyped(typed);
    return isUntouched(form) ? null : { typed: form, typedVersion: typeof typedVersion === 'number' ? typedVersion : null, at: String(at ?? '') };
  } catch {
    return null;
  }
}

export function forgetLocal(number: number | null): void {
  try {
    localStorage.removeItem(localKey(number));
  } catch {
    // A browser that keeps nothing has nothing to forget.
  }
}
