import { z } from 'zod';
import { searchTells } from '~/domain/finding/saved-search.ts';
import { choice, fieldOf, text } from './fields.ts';

/** A search as it is saved or changed; what it asks for stands in the address of its page. */
export const savedSearchForm = z.object({
  name: fieldOf(text(80, 'Give the search a name you will know it by.')),
  tells: fieldOf(choice(searchTells, 'Choose when we write to you.')),
});
export type SavedSearchForm = z.output<typeof savedSearchForm>;

/** One of the saved searches, and what is done with it. */
export const changeSearchForm = z.object({
  search: fieldOf(text(36, 'Choose one of your searches.')),
  tells: fieldOf(choice(searchTells, 'Choose when we write to you.')),
  remove: z.string().optional(),
});
