import { asListingTyped, type ListingTyped } from '~/domain/listing/draft.ts';
import { abilities, rolesOnListing } from '../authorize.ts';
import { notFound, signedOut } from '../errors.ts';
import { Listing, Log } from '../models/listing.ts';
import type { Viewer } from '../viewer.ts';

export interface ListingToEdit {
  readonly id: string;
  readonly number: number;
  readonly status: Listing['status'];
  readonly typedVersion: number;
  readonly typed: ListingTyped;
  readonly title: string | null;
  readonly savedAt: Date;
  /** The logs that are understood: what photographs can be tied to. */
  readonly logs: readonly { readonly id: string; readonly label: string }[];
  readonly can: ReturnType<typeof abilities<'listing'>>;
}

/**
 * A listing as its owner edits it.
 * @throws Refusal `signedOut` for a visitor; `notFound` for anybody but the owner: whether a draft exists is the owner's business
 */
export async function listingToEdit(viewer: Viewer | null, number: number): Promise<ListingToEdit> {
  if (!viewer) throw signedOut();
  const listing = await Listing.findOne({ where: { number } });
  if (!listing || listing.ownerId !== viewer.id) throw notFound('listing');
  const logs = await Log.findAll({ where: { listingId: listing.id, removedAt: null }, order: ['position'], attributes: ['id', 'position'] });
  return {
    id: listing.id, number, status: listing.status, typedVersion: listing.typedVersion, typed: asListingTyped(listing.typed), title: listing.title, savedAt: listing.updatedAt,
    logs: logs.map(({ id, position }) => ({ id, label: `Log ${position}` })),
    can: abilities('listing', rolesOnListing(viewer, listing), listing.status),
  };
}
