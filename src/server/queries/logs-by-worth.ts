import { readCursor, writeCursor } from '~/domain/finding/cursor.ts';
import type { LogsPageSort } from '~/domain/finding/sorts.ts';
import type { Point } from '~/domain/geo.ts';
import type { JobForMill } from '~/domain/trade/job-worth.ts';
import { jobsForSawyer, type SawyerAtWork } from './jobs-for-sawyer.ts';
import { openListings, type FoundListing, type FoundListings, type ListingsAsked } from './open-listings.ts';

/** What a job brings is worked out, not looked up, so it is asked of so many nearest listings and no more. */
export const NEAREST_WEIGHED = 300;

/** A listing with what it is to the sawyer who looks; null for everybody else. */
export interface WeighedListing extends FoundListing {
  readonly job: JobForMill | null;
}

export interface WeighedListings extends FoundListings {
  readonly items: readonly WeighedListing[];
  /** How many nearest listings were looked at, when there were more. */
  readonly among: number | null;
}

/** Puts beside each listing of a page what it is to the sawyer. Two queries, whatever the number of listings. */
export async function weigh(found: FoundListings, sawyer: SawyerAtWork | null): Promise<WeighedListings> {
  const jobs = sawyer ? await jobsForSawyer(sawyer, found.items.map(({ rowId, place, helpers }) => ({ id: rowId, coarse: place, helpers }))) : null;
  return { ...found, items: found.items.map((item) => ({ ...item, job: jobs?.get(item.rowId) ?? null })), among: null };
}

export interface AskedByWorth extends Omit<ListingsAsked, 'sort' | 'from' | 'among'> {
  readonly from: Point;
  readonly sort: LogsPageSort;
  /** Cents for each hour on the road and at work. */
  readonly minPerHourCents: number;
}

/** Cents an hour, 0 when the logs do not fit. */
export const perHourOfJob = ({ fit, worth }: JobForMill): number => (fit.fits && worth ? Math.max(0, worth.perHourCents) : 0);
export const perHourOf = ({ job }: WeighedListing): number => (job ? perHourOfJob(job) : 0);
const cursorOf = (item: WeighedListing, sort: LogsPageSort): string => (sort === 'perHour' ? writeCursor('perHour', { key: String(perHourOf(item)), id: item.rowId }) : item.cursor);

function firstAfter(items: readonly WeighedListing[], sort: LogsPageSort, cursor: string | undefined): number {
  if (cursor === undefined) return 0;
  if (sort !== 'perHour') return items.findIndex((item) => item.cursor === cursor) + 1;
  const last = readCursor(cursor, 'perHour');
  const key = Number(last?.key ?? Number.POSITIVE_INFINITY);
  const found = items.findIndex((item) => perHourOf(item) < key || (perHourOf(item) === key && item.rowId > (last?.id ?? '')));
  return found < 0 ? items.length : found;
}

/**
 * Open listings by what they bring the sawyer: the nearest {@link NEAREST_WEIGHED} that meet the conditions are worked out, those
 * under the least money an hour are left out, the rest come in the order asked for. A cursor that is gone begins the list again.
 */
export async function logsByWorth(asked: AskedByWorth, sawyer: SawyerAtWork, at: Date): Promise<WeighedListings> {
  const { sort, minPerHourCents, cursor, limit, ...rest } = asked;
  const found = await openListings({ ...rest, sort: sort === 'perHour' ? 'distance' : sort, among: NEAREST_WEIGHED, limit: NEAREST_WEIGHED }, at);
  const weighed = await weigh(found, sawyer);
  const kept = weighed.items.filter((item) => perHourOf(item) >= minPerHourCents);
  const items = sort === 'perHour' ? kept.sort((a, b) => perHourOf(b) - perHourOf(a) || (a.rowId < b.rowId ? -1 : 1)) : kept;
  const start = firstAfter(items, sort, cursor);
  const shown = items.slice(start, start + limit);
  const last = shown.at(-1);
  return {
    items: shown,
    nextCursor: last && start + limit < items.length ? cursorOf(last, sort) : null,
    total: items.length,
    totalIsExact: true,
    among: found.total > NEAREST_WEIGHED || !found.totalIsExact ? NEAREST_WEIGHED : null,
  };
}
