import { execute, inTransaction } from '../db.ts';
import { notFound } from '../errors.ts';
import { SavedSearch } from '../models/finding.ts';
import { searchOfLink } from '../stop-links.ts';
import { record } from '../transition.ts';
import { system } from '../viewer.ts';

/**
 * Stops a search by the link in its letters: whoever holds the letter may, signed in or not, as often as they like.
 * @returns the search's name
 * @throws Refusal `notFound` when the link is not ours or the search was taken away
 */
export async function stopSearch(token: string, at: Date): Promise<string> {
  return inTransaction(async () => {
    const id = searchOfLink(token);
    const search = id === null ? null : await SavedSearch.findByPk(id, { lock: true });
    if (!search) throw notFound('search');
    if (search.tells !== 'stopped') {
      await search.update({ tells: 'stopped', updatedAt: at });
      await execute('DELETE FROM found_listing WHERE search_id = $1 AND told_at IS NULL', [search.id]);
      await record(system('link in a letter'), 'changeSearch', 'saved_search', search.id, at, { data: { tells: 'stopped' } });
    }
    return search.name;
  });
}
