import { listingStates, type ListingState } from '~/domain/states/listing.ts';
import { oneRow, rows } from '../../db.ts';
import { anywhere, DESK_PAGE, openDesk, pageOf } from '../../desk.ts';
import { notFound } from '../../errors.ts';
import type { Viewer } from '../../viewer.ts';
import { sqlBuilder } from '../sql-builder.ts';
import { historyOf, type DeskEvent } from './events.ts';
import { reportsAbout, type ReportRow } from './reports.ts';

export interface DeskListingRow {
  readonly id: string;
  readonly number: number;
  readonly title: string;
  readonly status: ListingState;
  readonly isHidden: boolean;
  readonly ownerId: string;
  readonly ownerName: string;
  readonly town: string;
  readonly publishedAt: Date | null;
  readonly bids: number;
}

const columns = `l.id, l.number, coalesce(l.title, '') AS title, l.status, l.hidden_at IS NOT NULL AS "isHidden", l.owner_id AS "ownerId", a.name AS "ownerName",
  concat_ws(', ', l.town, l.state) AS town, l.published_at AS "publishedAt", (SELECT count(*)::int FROM bid WHERE bid.listing_id = l.id) AS bids`;

export interface ListingsAsked {
  readonly q: string;
  /** A state, `hidden`, or empty for all that were published. */
  readonly state: string;
  readonly before: number | null;
}

/** The states that a filter may name. Drafts are their owner's alone. */
export const deskListingStates = listingStates.states.filter((state) => state !== 'draft');

/** Published listings, newest first. Walks the unique number backwards; a title leans on listing_by_title. */
export async function deskListings(viewer: Viewer | null, asked: ListingsAsked): Promise<{ readonly listings: readonly DeskListingRow[]; readonly next: number | null }> {
  openDesk(viewer);
  const sql = sqlBuilder();
  const where = [`l.status <> 'draft'`];
  if (asked.q !== '') {
    const pattern = sql.value(anywhere(asked.q));
    where.push(`(l.title ILIKE ${pattern} OR l.number::text = ${sql.value(asked.q)} OR l.zip = ${sql.value(asked.q)} OR l.owner_id IN (SELECT id FROM account WHERE name ILIKE ${pattern}))`);
  }
  if (asked.state === 'hidden') where.push('l.hidden_at IS NOT NULL');
  else if (asked.state !== '') where.push(`l.status = ${sql.value(asked.state)}`);
  if (asked.before !== null) where.push(`l.number < ${sql.value(asked.before)}::int`);
  const found = await rows<DeskListingRow>(`SELECT ${columns} FROM listing l JOIN account a ON a.id = l.owner_id WHERE ${where.join(' AND ')} ORDER BY l.number DESC LIMIT ${DESK_PAGE + 1}`, sql.values);
  const { rows: listings, last } = pageOf(found);
  return { listings, next: last?.number ?? null };
}

export interface DeskListing extends DeskListingRow {
  readonly hiddenReason: string | null;
  readonly closesAt: Date | null;
  readonly timeZone: string;
  readonly boardFeet: number;
  readonly logCount: number;
  readonly bookings: readonly { readonly number: number; readonly status: string; readonly sawyerName: string }[];
  readonly reports: readonly ReportRow[];
  readonly history: readonly DeskEvent[];
}

/** One listing at the desk. @throws Refusal `notFound`, also for a draft */
export async function deskListing(viewer: Viewer | null, number: number | null): Promise<DeskListing> {
  openDesk(viewer);
  const found = await oneRow<Omit<DeskListing, 'bookings' | 'reports' | 'history'>>(
    `SELECT ${columns}, l.hidden_reason AS "hiddenReason", l.closes_at AS "closesAt", coalesce(l.time_zone, 'UTC') AS "timeZone", l.board_feet AS "boardFeet", l.log_count AS "logCount"
     FROM listing l JOIN account a ON a.id = l.owner_id WHERE l.number = $1 AND l.status <> 'draft'`,
    [number],
  );
  if (!found) throw notFound('listing');
  const bookings = await rows<DeskListing['bookings'][number]>(
    'SELECT k.number, k.status, s.name AS "sawyerName" FROM booking k JOIN account s ON s.id = k.sawyer_id WHERE k.listing_id = $1 ORDER BY k.number DESC',
    [found.id],
  );
  return { ...found, bookings, reports: await reportsAbout(viewer, 'listing', found.id), history: await historyOf(viewer, 'listing', found.id) };
}
