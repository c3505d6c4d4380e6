import { changedParts, isBinding, type ListingParts, type Part } from '~/domain/listing/changes.ts';
import { paths } from '~/domain/paths.ts';
import { listingStates } from '~/domain/states/listing.ts';
import { bidToConfirm, listingChanged } from '~/emails/listing-letters.ts';
import { authorize, rolesOnListing } from '../authorize.ts';
import { lockBids, moveBids, readerOf } from '../bidders.ts';
import { inTransaction } from '../db.ts';
import { conflict } from '../errors.ts';
import { enqueue } from '../jobs/queue.ts';
import { lockListing } from '../locks.ts';
import { Log, Piece, type Listing } from '../models/listing.ts';
import { linkTo } from '../parties.ts';
import { transition } from '../transition.ts';
import type { Viewer } from '../viewer.ts';
import { columnsOf, understand } from './listing-answers.ts';
import { understoodLogs, withLogIds, writeLogs, writePieces } from './listing-rows.ts';
import type { ListingInput } from './publish-listing.ts';
import { SAVED_ELSEWHERE } from './save-draft.ts';

/** What the database holds of each part, as bidders saw it. */
async function partsOf(listing: Listing): Promise<ListingParts> {
  const logs = await Log.findAll({ where: { listingId: listing.id, removedAt: null }, order: ['position'] });
  const pieces = await Piece.findAll({ where: { listingId: listing.id }, order: ['position'] });
  return {
    logs: logs.map(({ id, species, smallEndIn, largeEndIn, lengthFt, heartDefectIn, defects, note }) => ({ id, species, smallEndIn, largeEndIn, lengthFt, heartDefectIn, defects, note })),
    'cut list': pieces.map(({ label, thicknessIn, widthIn, lengthFt, count, sizing, forDwelling, kind }) => ({ label, thicknessIn, widthIn, lengthFt, count, sizing, forDwelling, kind })),
    access: listing.access,
    'metal risk': [listing.metalRisk, listing.metalNote],
    place: [listing.town, listing.state, listing.coarse?.coordinates],
    landing: listing.landing,
    'slabs and sawdust': listing.waste,
    'how it came down': [listing.howDown, listing.cameDownOn, listing.endsSealed],
    'closing date': listing.closesAt?.toISOString(),
    notes: listing.note,
  };
}

/** Writes to those who bid. A binding change puts their bids on hold, any other only tells them. */
async function tellBidders(by: Viewer, listing: Listing, changed: readonly Part[], at: Date): Promise<void> {
  const title = listing.title ?? '';
  if (isBinding(changed)) await moveBids(listing.id, ['open'], 'askToConfirm', by, at, (sawyer) => bidToConfirm(sawyer, title, changed, linkTo(paths.bidOn(listing.number ?? 0))));
  else for (const bid of await lockBids(listing.id, ['open', 'toConfirm'])) await enqueue('send-mail', listingChanged(await readerOf(bid.sawyerId), title, changed, linkTo(paths.listing(listing.number ?? 0))));
}

/**
 * Changes a listing that is open to bids. Logs keep their ids. When the logs, the cut list, the access, the metal risk or the place
 * change, the listing gets a new revision and its open bids have to be confirmed; every bidder is told what changed.
 * @throws Refusal `invalid` with every problem at its field; `conflict` when it was saved elsewhere since or is no longer open
 */
export async function reviseListing(by: Viewer | null, input: ListingInput, at: Date): Promise<{ readonly changed: readonly Part[] }> {
  const understood = understand(input.typed, at);
  return inTransaction(async () => {
    const listing = await lockListing(input.number);
    authorize(by, 'listing', 'edit', rolesOnListing(by, listing), listing.status);
    if (listing.status !== 'open') throw conflict('This listing is a draft: publish it first.');
    if (input.typedVersion !== listing.typedVersion) throw conflict(SAVED_ELSEWHERE);
    const before = await partsOf(listing);
    const typed = await withLogIds(input.typed, listing.id);
    await writeLogs(listing.id, understoodLogs(typed), at);
    await writePieces(listing.id, understood.form.pieces);
    listing.set(columnsOf(understood));
    const changed = changedParts(before, await partsOf(listing));
    const columns = { ...columnsOf(understood), typed: { ...typed }, typedVersion: listing.typedVersion + 1, updatedAt: at };
    const revision = listing.revision + (isBinding(changed) ? 1 : 0);
    await transition(listingStates, 'revise', listing, by, at, { ...columns, revision }, { data: { changed, revision } });
    if (isBinding(changed)) await enqueue('match-searches', { listingId: listing.id });
    if (changed.length > 0) await tellBidders(by, listing, changed, at);
    return { changed };
  });
}
