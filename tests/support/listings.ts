import type { ListingTyped } from '~/domain/listing/draft.ts';
import { publishListing } from '~/server/commands/publish-listing.ts';
import { saveDraft } from '~/server/commands/save-draft.ts';
import { Listing } from '~/server/models/listing.ts';
import type { Viewer } from '~/server/viewer.ts';
import { typedListing } from './listing-forms.ts';

export { typedListing, typedLog, typedPiece } from './listing-forms.ts';

/** The moment at which listings of checks are published unless told otherwise: a Monday morning in July. */
export const LISTED_AT = new Date('2026-07-20T15:00:00Z');

/** An open listing of this owner, made by the commands that the form uses. */
export async function openListing(owner: Viewer, changes: Partial<ListingTyped> = {}, at: Date = LISTED_AT): Promise<Listing> {
  const draft = await saveDraft(owner, { number: null, typedVersion: null, typed: typedListing(changes) }, at);
  await publishListing(owner, { number: draft.number, typedVersion: draft.typedVersion, typed: draft.typed }, at);
  return Listing.findByPk(draft.id, { rejectOnEmpty: true });
}
