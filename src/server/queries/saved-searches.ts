import type { SearchFilters, SearchTells } from '~/domain/finding/saved-search.ts';
import type { LogsAsked } from '~/schemas/logs-page.ts';
import { usualRadiusMi } from '~/schemas/logs-page.ts';
import { authorize } from '../authorize.ts';
import { rows } from '../db.ts';
import { SavedSearch } from '../models/finding.ts';
import { pointOfZip } from '../services/places.ts';
import { searchOfLink } from '../stop-links.ts';
import { baseRoles, type Viewer } from '../viewer.ts';
import { pointOf } from './listing-page.ts';

export interface SavedSearchView {
  readonly id: string;
  readonly name: string;
  readonly tells: SearchTells;
  readonly filters: SearchFilters;
  /** Listings it has written about. */
  readonly told: number;
}

/** What a kept search asks for. */
export const filtersOf = (search: SavedSearch): SearchFilters => ({
  from: search.origin && search.radiusMi !== null ? { point: pointOf(search.origin), zip: search.zip, radiusMi: search.radiusMi } : null,
  species: search.species, minBoardFeet: search.minBoardFeet, maxLargestEndIn: search.maxLargestEndIn, closing: search.closing, fits: search.fits, minPerHourCents: search.minPerHourCents,
});

/** What the page of logs was asked for, as a search to keep. */
export function filtersFrom(asked: LogsAsked): SearchFilters {
  const point = asked.lat !== undefined && asked.lng !== undefined ? { lat: asked.lat, lng: asked.lng } : asked.zip === undefined ? null : pointOfZip(asked.zip);
  return {
    from: point && { point, zip: asked.zip?.slice(0, 5) ?? null, radiusMi: asked.radiusMi ?? usualRadiusMi },
    species: asked.species ?? null, minBoardFeet: asked.minBoardFeet ?? null, maxLargestEndIn: asked.maxLargestEndIn ?? null,
    closing: asked.closing === '1', fits: asked.fits === '1', minPerHourCents: asked.minPerHour === undefined ? null : Math.round(asked.minPerHour * 100),
  };
}

/** The sawyer's searches, oldest first. @throws Refusal when the viewer does not saw */
export async function savedSearches(viewer: Viewer | null): Promise<readonly SavedSearchView[]> {
  authorize(viewer, 'sawyer', 'keepSearches', baseRoles(viewer));
  const searches = await SavedSearch.findAll({ where: { sawyerId: viewer.id }, order: [['createdAt', 'ASC'], ['id', 'ASC']] });
  const told = new Map((await rows<{ id: string; count: number }>('SELECT search_id AS id, count(*)::int AS count FROM found_listing WHERE sawyer_id = $1 AND told_at IS NOT NULL GROUP BY search_id', [viewer.id])).map(({ id, count }) => [id, count]));
  return searches.map((search) => ({ id: search.id, name: search.name, tells: search.tells, filters: filtersOf(search), told: told.get(search.id) ?? 0 }));
}

/** The search that a link in a letter stops; null when there is none. */
export async function searchToStop(token: string): Promise<{ readonly name: string; readonly stopped: boolean } | null> {
  const id = searchOfLink(token);
  const search = id === null ? null : await SavedSearch.findByPk(id);
  return search && { name: search.name, stopped: search.tells === 'stopped' };
}
