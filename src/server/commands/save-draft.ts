import type { ListingTyped } from '~/domain/listing/draft.ts';
import { listingTitle } from '~/domain/listing/summary.ts';
import { authorize, rolesOnListing } from '../authorize.ts';
import { inTransaction } from '../db.ts';
import { conflict } from '../errors.ts';
import { lockListing } from '../locks.ts';
import { Account } from '../models/account.ts';
import { Listing } from '../models/listing.ts';
import { baseRoles, type Viewer } from '../viewer.ts';
import { understoodLogs, withLogIds, writeLogs } from './listing-rows.ts';

export interface DraftInput {
  /** Null begins a new draft. */
  readonly number: number | null;
  /** The version this text was typed on; null overwrites whatever is there, because the person said so. */
  readonly typedVersion: number | null;
  readonly typed: ListingTyped;
}

export interface SavedDraft {
  readonly id: string;
  readonly number: number;
  readonly typedVersion: number;
  readonly typed: ListingTyped;
}

const MOST_DRAFTS = 50;

/** Said when two devices hold the same listing open and the other one saved first. */
export const SAVED_ELSEWHERE = 'This was saved somewhere else since you opened it here: on another device or in another window.';

/** What a list calls a draft: by its logs as far as they are understood. */
const titleOf = (typed: ListingTyped): string | null => {
  const logs = understoodLogs(typed);
  return logs.length > 0 ? listingTitle(logs) : null;
};

async function begin(by: Viewer | null, given: ListingTyped, at: Date): Promise<SavedDraft> {
  authorize(by, 'listing', 'create', baseRoles(by));
  // The account's row is the lock: two windows that begin at once are counted one after the other.
  const account = await Account.findByPk(by.id, { lock: true, rejectOnEmpty: true });
  if ((await Listing.count({ where: { ownerId: by.id, status: 'draft' } })) >= MOST_DRAFTS) throw conflict(`You have ${MOST_DRAFTS} drafts. Finish one before you begin another.`);
  // Whoever lists logs is a landowner, also a sawyer who has a tree of their own.
  if (!account.isLandowner) await account.update({ isLandowner: true });
  const typed = await withLogIds(given, null);
  const row = await Listing.create({ ownerId: by.id, typed: { ...typed }, title: titleOf(typed), createdAt: at, updatedAt: at });
  await writeLogs(row.id, understoodLogs(typed), at);
  return { id: row.id, number: row.number ?? 0, typedVersion: 1, typed };
}

/**
 * Keeps a draft as it was typed. Rows of logs that can be understood are written too, so that photographs can be tied to them.
 * @throws Refusal `conflict` when it was saved elsewhere since (`SAVED_ELSEWHERE`), or is a draft no more.
 */
export async function saveDraft(by: Viewer | null, input: DraftInput, at: Date): Promise<SavedDraft> {
  return inTransaction(async () => {
    if (input.number === null) return begin(by, input.typed, at);
    const listing = await lockListing(input.number);
    authorize(by, 'listing', 'edit', rolesOnListing(by, listing), listing.status);
    if (listing.status !== 'draft') throw conflict('This listing has been published since. Open it again to edit what is on show.');
    if (input.typedVersion !== null && input.typedVersion !== listing.typedVersion) throw conflict(SAVED_ELSEWHERE);
    const typed = await withLogIds(input.typed, listing.id);
    const typedVersion = listing.typedVersion + 1;
    await listing.update({ typed: { ...typed }, typedVersion, title: titleOf(typed), updatedAt: at });
    await writeLogs(listing.id, understoodLogs(typed), at);
    return { id: listing.id, number: input.number, typedVersion, typed };
  });
}
