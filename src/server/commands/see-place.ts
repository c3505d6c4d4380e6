import { authorize, rolesOnListing } from '../authorize.ts';
import { inTransaction } from '../db.ts';
import { lockListing } from '../locks.ts';
import { exactPlace, type ExactPlace } from '../queries/listing-page.ts';
import { notePlaceSeen } from '../place-views.ts';
import type { Viewer } from '../viewer.ts';

/** Shows a moderator the exact place of a listing, and writes down that it was seen. @throws Refusal `forbidden` for anybody else */
export async function seePlace(by: Viewer | null, number: number, at: Date): Promise<ExactPlace> {
  return inTransaction(async () => {
    const listing = await lockListing(number);
    authorize(by, 'listing', 'seePlace', rolesOnListing(by, listing), listing.status);
    await notePlaceSeen(by, listing, at);
    return exactPlace(listing);
  });
}
