import type { SearchTells } from '~/domain/finding/saved-search.ts';
import { day, filled, id, instant, keyRef, nullable, point, real, ref, table, text, whole, yes, type Row } from './table.ts';

export const SavedSearch = table('saved_search', {
  id: id(),
  sawyerId: ref(),
  name: text(),
  tells: text<SearchTells>(),
  zip: nullable(text()),
  origin: nullable(point()),
  radiusMi: nullable(real()),
  species: nullable(text()),
  minBoardFeet: nullable(real()),
  maxLargestEndIn: nullable(real()),
  closing: filled(yes()),
  fits: filled(yes()),
  minPerHourCents: nullable(whole()),
  toldOn: nullable(day()),
  createdAt: instant(),
  updatedAt: instant(),
});
export type SavedSearch = Row<typeof SavedSearch>;

/** A listing found for a sawyer, once ever. */
export const FoundListing = table('found_listing', { sawyerId: keyRef(), listingId: keyRef(), searchId: nullable(ref()), foundAt: instant(), toldAt: nullable(instant()) });
export type FoundListing = Row<typeof FoundListing>;
