import { z } from 'zod';
import { listingTyped } from './listing-form.ts';

const wholeOrNull = (what: string) => z.int({ error: `${what} is a whole number or null.` }).min(1).max(2_147_483_647).nullable();

/** `POST /api/listings/draft`: keeps a form as it was typed. `number` null begins a draft; `typedVersion` null overwrites knowingly. */
export const draftRequest = z.strictObject({
  number: wholeOrNull('The number'),
  typedVersion: wholeOrNull('The version'),
  typed: listingTyped,
});

export const draftAnswer = z.object({ number: z.number(), typedVersion: z.number(), savedAt: z.iso.datetime() });

export type DraftRequest = z.input<typeof draftRequest>;
export type DraftAnswer = z.infer<typeof draftAnswer>;

/** What stands above the listing's form besides the problems of its fields. */
export type FormNotice = 'saved' | 'account' | 'session' | 'elsewhere' | 'logs-unreadable' | { readonly words: string };
