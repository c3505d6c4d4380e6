import { paths } from '~/domain/paths.ts';
import { listingStates } from '~/domain/states/listing.ts';
import { listingWithdrawn } from '~/emails/listing-letters.ts';
import { authorize, rolesOnListing } from '../authorize.ts';
import { moveBids } from '../bidders.ts';
import { inTransaction } from '../db.ts';
import { lockListing } from '../locks.ts';
import { linkTo } from '../parties.ts';
import { transition } from '../transition.ts';
import type { Viewer } from '../viewer.ts';

/**
 * Takes an open listing back. Its bids lapse and their sawyers are told, with the reason if one was given.
 * @throws Refusal `conflict` when it is not open, a bid has just been chosen for instance
 */
export async function withdrawListing(by: Viewer | null, input: { readonly number: number; readonly reason: string }, at: Date): Promise<void> {
  await inTransaction(async () => {
    const listing = await lockListing(input.number);
    authorize(by, 'listing', 'withdraw', rolesOnListing(by, listing), listing.status);
    await transition(listingStates, 'withdraw', listing, by, at, { updatedAt: at }, { data: { reason: input.reason } });
    await moveBids(listing.id, ['open', 'toConfirm'], 'lapse', by, at, (sawyer) => listingWithdrawn(sawyer, listing.title ?? '', input.reason, linkTo(paths.logs)));
  });
}
