import { MOST_SEARCHES, type SearchFilters, type SearchTells } from '~/domain/finding/saved-search.ts';
import type { SavedSearchForm } from '~/schemas/saved-search-form.ts';
import { authorize } from '../authorize.ts';
import { execute, inTransaction, lockFor } from '../db.ts';
import { conflict, notFound } from '../errors.ts';
import { SavedSearch } from '../models/finding.ts';
import { record } from '../transition.ts';
import { baseRoles, type Viewer } from '../viewer.ts';

const uuid = /^[0-9a-f]{8}(-[0-9a-f]{4}){3}-[0-9a-f]{12}$/;

/**
 * Keeps a search. What is open already is in the list; letters are about what appears from now on.
 * @returns its id
 * @throws Refusal `conflict` when the sawyer keeps as many as one may
 */
export async function saveSearch(by: Viewer, filters: SearchFilters, form: SavedSearchForm, at: Date): Promise<string> {
  authorize(by, 'sawyer', 'keepSearches', baseRoles(by));
  return inTransaction(async () => {
    await lockFor('searches', by.id);
    if ((await SavedSearch.count({ where: { sawyerId: by.id } })) >= MOST_SEARCHES) throw conflict(`You keep ${MOST_SEARCHES} searches already. Take one away first.`);
    const { from, ...asked } = filters;
    const origin = from && { type: 'Point' as const, coordinates: [from.point.lng, from.point.lat] as const };
    const search = await SavedSearch.create({ ...asked, ...form, sawyerId: by.id, zip: from?.zip ?? null, origin, radiusMi: from?.radiusMi ?? null, createdAt: at, updatedAt: at });
    await record(by, 'saveSearch', 'saved_search', search.id, at, { data: { tells: form.tells } });
    return search.id;
  });
}

/** What was found but not told is let go, so that another search may find it. */
const forget = (searchId: string): Promise<number> => execute('DELETE FROM found_listing WHERE search_id = $1 AND told_at IS NULL', [searchId]);

async function ownSearch(by: Viewer, id: string): Promise<SavedSearch> {
  authorize(by, 'sawyer', 'keepSearches', baseRoles(by));
  const search = uuid.test(id) ? await SavedSearch.findOne({ where: { id, sawyerId: by.id }, lock: true }) : null;
  if (!search) throw notFound('search');
  return search;
}

/** Changes when a search writes. */
export async function changeSearch(by: Viewer, id: string, tells: SearchTells, at: Date): Promise<void> {
  await inTransaction(async () => {
    const search = await ownSearch(by, id);
    await search.update({ tells, updatedAt: at });
    if (tells === 'stopped') await forget(id);
    await record(by, 'changeSearch', 'saved_search', id, at, { data: { tells } });
  });
}

/** Takes a search away. What it told of stays told. */
export async function removeSearch(by: Viewer, id: string, at: Date): Promise<void> {
  await inTransaction(async () => {
    const search = await ownSearch(by, id);
    await forget(id);
    await search.destroy();
    await record(by, 'removeSearch', 'saved_search', id, at);
  });
}
