import type { Point } from '~/domain/geo.ts';
import type { ListingSort } from '~/domain/finding/sorts.ts';
import type { Problem } from '~/domain/result.ts';
import { addHours } from '~/domain/time.ts';
import { usualRadiusMi, type LogsPage } from '~/schemas/logs-page.ts';
import { oneRow } from '../db.ts';
import { pointOfZip, townsNear, type Town } from '../services/places.ts';
import type { Viewer } from '../viewer.ts';
import { openListings, type FoundListings } from './open-listings.ts';

const WEEK_HOURS = 7 * 24;

export interface LogsView {
  readonly found: FoundListings;
  readonly from: Point | null;
  /** The ZIP that distances are measured from; empty when none or when a point was given. */
  readonly zip: string;
  readonly radiusMi: number | null;
  readonly sort: ListingSort;
  readonly problems: readonly Problem[];
  /** Names for the map. */
  readonly towns: readonly Town[];
}

/** A sawyer's own ZIP, so that the list begins at home. */
async function homeZip(viewer: Viewer | null): Promise<string> {
  if (!viewer?.isSawyer) return '';
  const row = await oneRow<{ zip: string | null }>('SELECT zip FROM sawyer_profile WHERE account_id = $1', [viewer.id]);
  return row?.zip ?? '';
}

/** Everything the page of logs shows for an address. */
export async function logsPageView({ asked, problems }: LogsPage, viewer: Viewer | null, at: Date): Promise<LogsView> {
  const pointed = asked.lat !== undefined && asked.lng !== undefined ? { lat: asked.lat, lng: asked.lng } : null;
  const zip = pointed || problems.some(({ path }) => path === 'zip') ? '' : (asked.zip ?? (await homeZip(viewer)));
  const from = pointed ?? (zip === '' ? null : pointOfZip(zip));
  const unknownZip = asked.zip !== undefined && !from ? [{ path: 'zip', message: 'We do not know where this ZIP code is. Try one nearby.' }] : [];
  const sort = asked.sort === undefined || (asked.sort === 'distance' && !from) ? (from ? 'distance' : 'newest') : asked.sort;
  const radiusMi = from ? (asked.radiusMi ?? usualRadiusMi) : null;
  const found = await openListings(
    {
      from,
      sort,
      limit: asked.limit,
      ...(radiusMi === null ? {} : { radiusMi }),
      species: asked.species,
      minBoardFeet: asked.minBoardFeet,
      maxLargestEndIn: asked.maxLargestEndIn,
      closesBefore: asked.closing ? addHours(at, WEEK_HOURS) : undefined,
      fitsMillsOf: asked.fits && viewer?.isSawyer ? viewer.id : undefined,
      cursor: asked.cursor,
    },
    at,
  );
  return { found, from, zip, radiusMi, sort, problems: [...problems, ...unknownZip], towns: from && radiusMi ? townsNear(from, Math.min(radiusMi * 2, 300), 40) : [] };
}
