import type { ListingTyped } from '~/domain/listing/draft.ts';
import { paths } from '~/domain/paths.ts';
import { listingStates } from '~/domain/states/listing.ts';
import { formatDayWithYear } from '~/domain/time.ts';
import { listingPublished } from '~/emails/listing-letters.ts';
import { authorize, rolesOnListing } from '../authorize.ts';
import { readerOf } from '../bidders.ts';
import { inTransaction } from '../db.ts';
import { conflict, forbidden } from '../errors.ts';
import { enqueue } from '../jobs/queue.ts';
import { lockListing } from '../locks.ts';
import { linkTo } from '../parties.ts';
import { holdActive } from '../standing.ts';
import { transition } from '../transition.ts';
import type { Viewer } from '../viewer.ts';
import { columnsOf, understand } from './listing-answers.ts';
import { understoodLogs, withLogIds, writeLogs, writePieces } from './listing-rows.ts';
import { SAVED_ELSEWHERE } from './save-draft.ts';

export interface ListingInput {
  readonly number: number;
  /** The version the text was typed on. */
  readonly typedVersion: number;
  readonly typed: ListingTyped;
}

/**
 * Puts a draft on show: what was typed is understood once and written down beside it.
 * @throws Refusal `invalid` with every problem at its field; `conflict` when it was saved elsewhere since or is published already
 */
export async function publishListing(by: Viewer | null, input: ListingInput, at: Date): Promise<{ readonly number: number }> {
  const understood = understand(input.typed, at);
  return inTransaction(async () => {
    const listing = await lockListing(input.number);
    authorize(by, 'listing', 'publish', rolesOnListing(by, listing), listing.status);
    if (!by.emailConfirmed) throw forbidden('Confirm your e-mail address first: the link is in the message we sent you.');
    if (!(await holdActive(by.id))) throw forbidden('This account is suspended.');
    if (input.typedVersion !== listing.typedVersion) throw conflict(SAVED_ELSEWHERE);
    const typed = await withLogIds(input.typed, listing.id);
    await writeLogs(listing.id, understoodLogs(typed), at);
    await writePieces(listing.id, understood.form.pieces);
    const columns = columnsOf(understood);
    await transition(listingStates, 'publish', listing, by, at, {
      ...columns, typed: { ...typed }, typedVersion: listing.typedVersion + 1, revision: 1, treeOwnerConfirmedAt: at, publishedAt: at, updatedAt: at,
    });
    await enqueue('send-mail', listingPublished(await readerOf(listing.ownerId), columns.title, formatDayWithYear(understood.form.closesOn), linkTo(paths.listing(input.number))));
    await enqueue('match-searches', { listingId: listing.id });
    return { number: input.number };
  });
}
