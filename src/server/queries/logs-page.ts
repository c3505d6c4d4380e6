import { CLOSING_HOURS, type LogsPageSort } from '~/domain/finding/sorts.ts';
import type { Point } from '~/domain/geo.ts';
import type { Problem } from '~/domain/result.ts';
import { addHours } from '~/domain/time.ts';
import { logsAddress, usualRadiusMi, type LogsAsked, type LogsPage } from '~/schemas/logs-page.ts';
import { takenWholeText } from '~/schemas/tiles.ts';
import { oneRow } from '../db.ts';
import { pointOfZip, townsNear, type Town } from '../services/places.ts';
import type { Viewer } from '../viewer.ts';
import { viewerAtWork, type SawyerAtWork } from './jobs-for-sawyer.ts';
import { logsByWorth, weigh, type WeighedListings } from './logs-by-worth.ts';
import { openListings } from './open-listings.ts';

export interface LogsView {
  readonly found: WeighedListings;
  readonly from: Point | null;
  /** The ZIP that distances are measured from; empty when none or when a point was given. */
  readonly zip: string;
  readonly radiusMi: number | null;
  readonly sort: LogsPageSort;
  readonly problems: readonly Problem[];
  /** Names for the map. */
  readonly towns: readonly Town[];
  /** Whether listings can be put in order by money an hour: the sawyer has a mill, rates and a base. */
  readonly weighs: boolean;
  /** The same filters for the map's tiles, as a query; null for the least money an hour, which is worked out for the nearest alone. */
  readonly tiles: string | null;
}

/** What the tiles of the map are asked for so that they hold what the list does, at any distance. */
function tilesOf(asked: LogsAsked, sawyer: SawyerAtWork | null, weighs: boolean): string | null {
  if (weighs && asked.minPerHour !== undefined) return null;
  const { species, minBoardFeet, maxLargestEndIn, closing } = asked;
  const fits = asked.fits && sawyer ? takenWholeText(sawyer.mills.map(({ largestLogIn, longestFt, shortestFt }) => ({ largestLogIn, longestFt, shortestFt }))) : '';
  return logsAddress('', {}, { species: species ?? '', minBoardFeet: String(minBoardFeet ?? ''), maxLargestEndIn: String(maxLargestEndIn ?? ''), closing: closing ?? '', fits });
}

/** A sawyer's own ZIP, so that the list begins at home. */
async function homeZip(viewer: Viewer | null): Promise<string> {
  if (!viewer?.isSawyer) return '';
  const row = await oneRow<{ zip: string | null }>('SELECT zip FROM sawyer_profile WHERE account_id = $1', [viewer.id]);
  return row?.zip ?? '';
}

function sortOf(asked: LogsAsked, from: Point | null, weighs: boolean): LogsPageSort {
  const { sort } = asked;
  const possible = sort !== undefined && (sort !== 'distance' || from !== null) && (sort !== 'perHour' || (weighs && from !== null));
  return possible ? sort : from ? 'distance' : 'newest';
}

/** The listings in the order asked for, each with what it is to the sawyer who looks. */
async function listed(asked: LogsAsked, sort: LogsPageSort, from: Point | null, radiusMi: number | null, sawyer: SawyerAtWork | null, weighs: boolean, at: Date): Promise<WeighedListings> {
  const conditions = {
    limit: asked.limit,
    ...(radiusMi === null ? {} : { radiusMi }),
    species: asked.species,
    minBoardFeet: asked.minBoardFeet,
    maxLargestEndIn: asked.maxLargestEndIn,
    closesBefore: asked.closing ? addHours(at, CLOSING_HOURS) : undefined,
    fitsMillsOf: asked.fits && sawyer ? sawyer.id : undefined,
    cursor: asked.cursor,
  };
  if (sawyer && weighs && from && (sort === 'perHour' || asked.minPerHour !== undefined)) {
    return logsByWorth({ ...conditions, from, sort, minPerHourCents: Math.round((asked.minPerHour ?? 0) * 100) }, sawyer, at);
  }
  return weigh(await openListings({ ...conditions, from, sort: sort === 'perHour' ? 'newest' : sort }, at), sawyer);
}

/** Everything the page of logs shows for an address. */
export async function logsPageView({ asked, problems }: LogsPage, viewer: Viewer | null, at: Date): Promise<LogsView> {
  const sawyer = await viewerAtWork(viewer);
  const weighs = sawyer?.card != null && sawyer.base !== null;
  const pointed = asked.lat !== undefined && asked.lng !== undefined ? { lat: asked.lat, lng: asked.lng } : null;
  const zip = pointed || problems.some(({ path }) => path === 'zip') ? '' : (asked.zip ?? (await homeZip(viewer)));
  const from = pointed ?? (zip === '' ? null : pointOfZip(zip));
  const unknownZip = asked.zip !== undefined && !from ? [{ path: 'zip', message: 'We do not know where this ZIP code is. Try one nearby.' }] : [];
  const sort = sortOf(asked, from, weighs);
  const radiusMi = from ? (asked.radiusMi ?? usualRadiusMi) : null;
  const found = await listed(asked, sort, from, radiusMi, sawyer, weighs, at);
  return { found, from, zip, radiusMi, sort, weighs, tiles: tilesOf(asked, sawyer, weighs), problems: [...problems, ...unknownZip], towns: from && radiusMi ? townsNear(from, Math.min(radiusMi * 2, 300), 40) : [] };
}
