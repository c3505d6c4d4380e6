import { greatCircleMiles } from '~/domain/geo.ts';
import { DAILY_HOUR, searchFields, searchWords } from '~/domain/finding/saved-search.ts';
import { paths } from '~/domain/paths.ts';
import { dayAt } from '~/domain/time.ts';
import { logsFound, type ListingFound } from '~/emails/search-letters.ts';
import { logsAddress } from '~/schemas/logs-page.ts';
import { readerOf } from '../bidders.ts';
import { execute, inTransaction, rows } from '../db.ts';
import { enqueue } from '../jobs/queue.ts';
import { SavedSearch } from '../models/finding.ts';
import { SawyerProfile } from '../models/sawyer.ts';
import { linkTo } from '../parties.ts';
import { jobsForSawyer, sawyerAtWork } from '../queries/jobs-for-sawyer.ts';
import { filtersOf } from '../queries/saved-searches.ts';
import { stopLink } from '../stop-links.ts';

/** How many listings one letter describes; the rest are counted. */
const MOST_TOLD = 10;

interface Found {
  id: string;
  number: number;
  title: string;
  town: string;
  boardFeet: number;
  largest: number;
  lat: number;
  lng: number;
  sawBy: string | null;
  closesOn: string;
  helpers: number;
  open: boolean;
}

const untold = (searchId: string, at: Date): Promise<Found[]> =>
  rows<Found>(
    `SELECT l.id, l.number, l.title, coalesce(l.town, '') AS town, l.board_feet AS "boardFeet", l.largest_end_ob_in AS largest, ST_Y(l.coarse::geometry) AS lat, ST_X(l.coarse::geometry) AS lng,
       l.saw_by::text AS "sawBy", ((l.closes_at - interval '1 second') AT TIME ZONE l.time_zone)::date::text AS "closesOn", coalesce((l.access->>'helpers')::int, 0) AS helpers,
       l.status = 'open' AND l.hidden_at IS NULL AND l.closes_at > $2 AS open
     FROM found_listing f JOIN listing l ON l.id = f.listing_id WHERE f.search_id = $1 AND f.told_at IS NULL ORDER BY f.found_at, l.number`,
    [searchId, at],
  );

async function asTold(search: SavedSearch, found: readonly Found[]): Promise<readonly ListingFound[]> {
  const sawyer = await sawyerAtWork(search.sawyerId);
  const jobs = sawyer ? await jobsForSawyer(sawyer, found.map(({ id, lat, lng, helpers }) => ({ id, coarse: { lat, lng }, helpers }))) : null;
  const from = filtersOf(search).from?.point ?? sawyer?.base ?? null;
  return found.map((one) => ({
    title: one.title, town: one.town, boardFeet: one.boardFeet, largestEndOutsideBarkIn: one.largest, distanceMi: from && greatCircleMiles(from, one), sawBy: one.sawBy, closesOn: one.closesOn,
    job: jobs?.get(one.id) ?? null, link: linkTo(paths.listing(one.number)),
  }));
}

/** Writes one letter about everything a search has found and not told yet, and marks it told. What is no longer open is left out. */
export async function tellSearch(searchId: string, at: Date): Promise<void> {
  await inTransaction(async () => {
    const search = await SavedSearch.findByPk(searchId, { lock: true });
    if (!search || search.tells === 'stopped') return;
    const all = await untold(searchId, at);
    const open = all.filter((one) => one.open);
    const zone = (await SawyerProfile.findByPk(search.sawyerId))?.timeZone ?? 'America/Chicago';
    await execute('UPDATE found_listing SET told_at = $2 WHERE search_id = $1 AND told_at IS NULL', [searchId, at]);
    if (open.length === 0) return;
    await search.update({ toldOn: dayAt(at, zone) });
    const filters = filtersOf(search);
    const links = { list: linkTo(logsAddress(paths.logs, searchFields(filters))), stop: stopLink(searchId) };
    const told = await asTold(search, open.slice(0, MOST_TOLD));
    await enqueue('send-mail', logsFound(await readerOf(search.sawyerId), { name: search.name, words: searchWords(filters) }, told, Math.max(0, open.length - MOST_TOLD), links));
  });
}

/**
 * Writes the letters that are due: daily ones from the sawyer's own morning on, once a day; what a search found while it wrote daily,
 * once it writes at once.
 */
export async function tellSearches(at: Date): Promise<void> {
  const due = await rows<{ id: string }>(
    `SELECT s.id FROM saved_search s LEFT JOIN sawyer_profile p ON p.account_id = s.sawyer_id
     CROSS JOIN LATERAL (SELECT $1::timestamptz AT TIME ZONE coalesce(p.time_zone, 'America/Chicago') AS here) clock
     WHERE s.tells <> 'stopped' AND EXISTS (SELECT 1 FROM found_listing f WHERE f.search_id = s.id AND f.told_at IS NULL)
       AND (s.tells = 'at-once' OR (extract(hour FROM clock.here) >= $2 AND (s.told_on IS NULL OR s.told_on < clock.here::date)))
     ORDER BY s.id LIMIT 500`,
    [at, DAILY_HOUR],
  );
  for (const { id } of due) await tellSearch(id, at);
}
