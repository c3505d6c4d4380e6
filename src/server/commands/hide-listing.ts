import { paths } from '~/domain/paths.ts';
import { listingHidden } from '~/emails/account-letters.ts';
import { authorize, rolesOnListing } from '../authorize.ts';
import { readerOf } from '../bidders.ts';
import { inTransaction } from '../db.ts';
import { conflict } from '../errors.ts';
import { enqueue } from '../jobs/queue.ts';
import { lockListing } from '../locks.ts';
import { linkTo } from '../parties.ts';
import { record } from '../transition.ts';
import type { Viewer } from '../viewer.ts';

/**
 * Takes a listing off show: only its owner, with the reason, and moderators read it. Nobody bids on it and no bid is chosen; a booking
 * that it has goes on.
 * @throws Refusal `conflict` when it is hidden already
 */
export async function hideListing(by: Viewer, input: { readonly number: number; readonly reason: string }, at: Date): Promise<void> {
  await inTransaction(async () => {
    const listing = await lockListing(input.number);
    authorize(by, 'listing', 'hide', rolesOnListing(by, listing), listing.status);
    if (listing.hiddenAt !== null) throw conflict('This listing is hidden already.');
    await listing.update({ hiddenAt: at, hiddenReason: input.reason });
    await record(by, 'hide', 'listing', listing.id, at, { data: { reason: input.reason } });
    await enqueue('send-mail', listingHidden(await readerOf(listing.ownerId), listing.title ?? '', input.reason, linkTo(paths.listing(input.number))));
  });
}

/** Puts a hidden listing on show again. @throws Refusal `conflict` when it is on show */
export async function showListing(by: Viewer, number: number, at: Date): Promise<void> {
  await inTransaction(async () => {
    const listing = await lockListing(number);
    authorize(by, 'listing', 'hide', rolesOnListing(by, listing), listing.status);
    if (listing.hiddenAt === null) throw conflict('This listing is on show already.');
    const wasHiddenBecause = listing.hiddenReason;
    await listing.update({ hiddenAt: null, hiddenReason: null });
    await record(by, 'show', 'listing', listing.id, at, { data: { wasHiddenBecause } });
    await enqueue('send-mail', listingHidden(await readerOf(listing.ownerId), listing.title ?? '', null, linkTo(paths.listing(number))));
  });
}
