import { readCursor, writeCursor } from '~/domain/finding/cursor.ts';
import type { ListingSort } from '~/domain/finding/sorts.ts';
import { cellsNear, leastProduct, unitVector, type CellRange } from '~/domain/finding/nearby.ts';
import type { Point } from '~/domain/geo.ts';
import { photoAlt, pictureView } from '~/domain/photo.ts';
import type { ListingItem } from '~/schemas/listings.ts';
import type { TakenWhole } from '~/schemas/tiles.ts';
import { rows } from '../db.ts';
import { sqlBuilder } from './sql-builder.ts';

/** Where counting stops: beyond it a number is no help to a reader and costs time. */
const COUNT_TO = 1000;
/** So many matches are gathered and put in order; of more, an index in that order meets enough soon. */
const GATHER_TO = 5000;
/** Up to this distance what lies within it is few enough to be counted one by one, mi. */
const NEAR_MI = 100;
const METRES_PER_MILE = 1609.344;

export interface ListingsAsked {
  readonly from: Point | null;
  readonly radiusMi?: number | undefined;
  /** A species code; listings with any log of it. */
  readonly species?: string | undefined;
  /** International ¼. */
  readonly minBoardFeet?: number | undefined;
  /** Outside bark, the largest end of any log. */
  readonly maxLargestEndIn?: number | undefined;
  readonly closesBefore?: Date | undefined;
  /** Only what some mill of this sawyer takes whole. */
  readonly fitsMillsOf?: string | undefined;
  /** Only what some mill of these takes whole. */
  readonly fits?: readonly TakenWhole[] | undefined;
  readonly sort: ListingSort;
  /** Only among so many nearest to `from`: bounds the work of what cannot be asked of an index. */
  readonly among?: number | undefined;
  /** A text that `readCursor` accepts for this sort. */
  readonly cursor?: string | undefined;
  readonly limit: number;
}

/** An item with what a row of the page shows beside it. */
export interface FoundListing extends ListingItem {
  /** The row's own id; `id` is the public number. */
  readonly rowId: string;
  /** Where the list goes on after this row. */
  readonly cursor: string;
  /** Grown people who can help. */
  readonly helpers: number;
  readonly howDown: string;
  readonly metalRisk: string;
  readonly closesInDays: number;
}

export interface FoundListings {
  readonly items: readonly FoundListing[];
  readonly nextCursor: string | null;
  readonly total: number;
  readonly totalIsExact: boolean;
}

interface Row {
  id: string;
  number: number;
  title: string;
  species: string[];
  logCount: number;
  boardFeet: number;
  largest: number;
  metres: number | null;
  lat: number;
  lng: number;
  town: string;
  closesOn: string;
  closesIn: number;
  sawBy: string | null;
  sortKey: string | null;
  bidCount: number;
  howDown: string;
  metalRisk: string;
  helpers: number;
  photoId: string | null;
  photoWidth: number | null;
  photoHeight: number | null;
  photoBlur: string | null;
  photoCaption: string | null;
}

type Sql = ReturnType<typeof sqlBuilder>;

const pointSql = (sql: Sql, { lat, lng }: Point): string => `ST_SetSRID(ST_MakePoint(${sql.value(lng)}::float8, ${sql.value(lat)}::float8), 4326)::geography`;

/** Whether what lies within the distance is looked up stretch by stretch. */
const near = ({ from, radiusMi }: ListingsWanted): boolean => from != null && radiusMi !== undefined && radiusMi <= NEAR_MI;

/**
 * What meets the conditions near by, with what it may be put in order by: read in each stretch of the map from the index alone.
 * Farther off the planner knows better whether a filter finds fewer.
 * @param besides more columns of `listing_open_map`, with a comma before each
 */
function inEachStretch(sql: Sql, asked: ListingsWanted, at: Date, most: number, besides = ''): string {
  const values = stretches(asked).map(({ first, end }) => `(${sql.value(first)}::bigint, ${sql.value(end)}::bigint)`);
  return `(VALUES ${values.join(', ')}) stretch (first, last)
    CROSS JOIN LATERAL (SELECT l.id, l.closes_at, l.saw_by, l.published_at${besides} FROM listing l WHERE l.map_cell >= stretch.first AND l.map_cell < stretch.last AND ${conditions(sql, asked, at).join(' AND ')} LIMIT ${most}) l`;
}

/**
 * What meets the conditions, with what it may be put in order by: gathered first (`OFFSET 0` keeps the planner from walking an ordered index
 * until enough are found, which would read every open listing), from the index of a filter alone where that has it all.
 */
const gathered = (sql: Sql, asked: ListingsWanted, at: Date): string =>
  `(SELECT l.id, l.closes_at, l.saw_by, l.published_at FROM listing l WHERE ${[...conditions(sql, asked, at), ...inStretches(sql, stretches(asked))].join(' AND ')} OFFSET 0) l`;

/**
 * The rows of what was met: only those wanted are read from the table.
 * @param which an order with a limit, where the index has what it needs
 */
const rowsOf = (met: string, which: string): string => `SELECT l.* FROM (SELECT l.id FROM ${met} ${which}) wanted JOIN listing l ON l.id = wanted.id OFFSET 0`;

/** Products of unit vectors are worked out to some parts in 10^16: within this much two of them may be of one distance. */
const SAME_PRODUCT = 1e-14;

/**
 * The rows of the nearest of what lies near by, `most` of them and any that may lie as near as the last: found from the index alone, by the
 * product of the unit vectors, so that only these have their distance worked out as it is shown.
 */
const nearestOf = (sql: Sql, asked: ListingsWanted, from: Point, at: Date, most: number): string =>
  `SELECT l.* FROM (
     WITH met AS MATERIALIZED (SELECT l.id, l.product FROM ${inEachStretch(sql, asked, at, GATHER_TO, `, ${productWith(sql, from)} AS product`)})
     SELECT id FROM met WHERE product >= (SELECT min(product) FROM (SELECT product FROM met ORDER BY product DESC LIMIT ${most}) nearest) - ${SAME_PRODUCT}
   ) wanted JOIN listing l ON l.id = wanted.id OFFSET 0`;

/** As many as are counted: one more than a reader is told of, or than is gathered. Fewer are few. */
const counted = (asked: ListingsAsked): number => (asked.sort !== 'distance' && near(asked) ? GATHER_TO : COUNT_TO) + 1;

/** Which listings, without how they are listed. */
export type ListingsWanted = Omit<ListingsAsked, 'from' | 'sort' | 'among' | 'cursor' | 'limit'> & { readonly from?: Point | null };

/** Within so many miles, by the arc between two vectors of length one: three products, where the geography's own function costs a hundred times as much. */
const within = (sql: Sql, from: Point, radiusMi: number): string => `${productWith(sql, from)} >= ${sql.value(leastProduct(radiusMi))}::float8`;

/** The product of a listing's unit vector with that of a point: the nearer, the larger. */
function productWith(sql: Sql, from: Point): string {
  const [x, y, z] = unitVector(from).map((part) => `${sql.value(part)}::float8`);
  return `l.unit_x * ${x} + l.unit_y * ${y} + l.unit_z * ${z}`;
}

/** The stretches of the map that hold what lies within the distance; none when no distance is asked. */
const stretches = ({ from, radiusMi }: ListingsWanted): readonly CellRange[] => (from && radiusMi !== undefined ? cellsNear(from, radiusMi) : []);

/** In one of these stretches: what the planner can count beforehand, and find by `listing_open_map`. */
const inStretches = (sql: Sql, ranges: readonly CellRange[]): string[] =>
  ranges.length === 0 ? [] : [`(${ranges.map(({ first, end }) => `(l.map_cell >= ${sql.value(first)}::bigint AND l.map_cell < ${sql.value(end)}::bigint)`).join(' OR ')})`];

/** What makes a listing `l` part of the list, as SQL. Distances are to the coarse point; the exact place is never read here. */
export function conditions(sql: Sql, asked: ListingsWanted, at: Date): string[] {
  const { from, radiusMi, species, minBoardFeet, maxLargestEndIn, closesBefore, fitsMillsOf, fits } = asked;
  return [
    `l.status = 'open' AND l.hidden_at IS NULL`,
    `l.closes_at > ${sql.value(at)}`,
    ...(from && radiusMi !== undefined ? [within(sql, from, radiusMi)] : []),
    ...(species !== undefined ? [`l.species @> ARRAY[${sql.value(species)}::text]`] : []),
    ...(minBoardFeet !== undefined ? [`l.board_feet >= ${sql.value(Math.ceil(minBoardFeet))}::integer`] : []),
    ...(maxLargestEndIn !== undefined ? [`l.largest_end_ob_in <= ${sql.value(maxLargestEndIn)}::float8 + 0.005`] : []),
    ...(closesBefore !== undefined ? [`l.closes_at <= ${sql.value(closesBefore)}`] : []),
    ...(fitsMillsOf !== undefined
      ? [
          `EXISTS (SELECT 1 FROM mill m WHERE m.sawyer_id = ${sql.value(fitsMillsOf)} AND m.retired_at IS NULL AND l.largest_end_ob_in <= m.largest_log_in + 0.005
            AND l.longest_log_ft <= m.longest_ft AND l.shortest_log_ft >= m.shortest_ft)`,
        ]
      : []),
    ...(fits !== undefined
      ? [
          `(${fits
            .map(({ largestLogIn, longestFt, shortestFt }) => `(l.largest_end_ob_in <= ${sql.value(largestLogIn)}::float8 + 0.005 AND l.longest_log_ft <= ${sql.value(longestFt)}::float8 AND l.shortest_log_ft >= ${sql.value(shortestFt)}::float8)`)
            .join(' OR ')})`,
        ]
      : []),
  ];
}

/**
 * The rows a list is drawn from: all that meet the conditions, or the nearest few of them. When few meet them at all they are gathered
 * first (`OFFSET 0` keeps the planner from merging the two steps) and put in order after: walking an ordered index until enough are
 * found would read every open listing.
 * @param met the rows that meet the conditions, as a SELECT
 */
function drawnFrom(among: number | undefined, met: string, here: string | null): string {
  return among !== undefined && here !== null ? `(SELECT l.* FROM (${met}) l ORDER BY l.coarse <-> ${here} LIMIT ${among})` : `(${met})`;
}

/**
 * The order of each sort, its key as exact text, and the condition for going on after a cursor. By distance the nearest are taken
 * `first`, with all that are as near as the last: the index walks by distance alone, not by distance and id.
 */
function ordering(sql: Sql, asked: ListingsAsked, here: string | null): { key: string; first?: string; order: string; after: string | null } {
  const cursor = asked.cursor === undefined ? null : readCursor(asked.cursor, asked.sort);
  const past = (column: string, sign: '<' | '>', type: string): string | null =>
    cursor && `(${column} ${sign} ${sql.value(cursor.key)}::${type} OR (${column} = ${sql.value(cursor.key)}::${type} AND l.id > ${sql.value(cursor.id)}::uuid))`;
  switch (asked.sort) {
    case 'distance': {
      const away = `(l.coarse <-> ${here ?? 'l.coarse'})`;
      return { key: `${away}::text`, first: away, order: `${away}, l.id`, after: past(away, '>', 'float8') };
    }
    case 'closing':
      return { key: `(l.closes_at AT TIME ZONE 'UTC')::text || '+00'`, order: 'l.closes_at, l.id', after: past('l.closes_at', '>', 'timestamptz') };
    case 'newest':
      return { key: `(l.published_at AT TIME ZONE 'UTC')::text || '+00'`, order: 'l.published_at DESC, l.id', after: past('l.published_at', '<', 'timestamptz') };
    case 'sawBy': {
      // Rows without a date come last, so after a dated row they are still to come.
      const undated = (): string | null => cursor && `(l.saw_by IS NULL AND l.id > ${sql.value(cursor.id)}::uuid)`;
      const after = cursor?.key == null ? undated() : `(l.saw_by IS NULL OR ${past('l.saw_by', '>', 'date')})`;
      return { key: 'l.saw_by::text', order: 'l.saw_by, l.id', after };
    }
  }
}

/**
 * Open listings, a page at a time. Two queries: the count, which stops at a thousand, and the page. Both lean on the partial indexes
 * `listing_open_*`: with many matches the page walks the one of its order (`listing_open_near` by nearest neighbour), with few it
 * sorts what the filters find, with none it is not asked for.
 */
export async function openListings(asked: ListingsAsked, at: Date): Promise<FoundListings> {
  const count = await countUpTo(counted(asked), asked, at);
  if (count === 0) return { items: [], nextCursor: null, total: 0, totalIsExact: true };
  const sql = sqlBuilder();
  const here = asked.from && pointSql(sql, asked.from);
  const nearestFirst = asked.sort === 'distance' || asked.among !== undefined;
  const few = count < counted(asked) || (!nearestFirst && !near(asked) && (await foreseenFew(asked, at)));
  const { key, first, order, after } = ordering(sql, asked, here);
  const most = asked.limit + 1;
  const inOrder = nearestFirst ? '' : `${after ? `WHERE ${after} ` : ''}ORDER BY ${order} LIMIT ${most}`;
  const met =
    few && near(asked) && asked.from && asked.sort === 'distance' && asked.among === undefined && after === null ? nearestOf(sql, asked, asked.from, at, most)
    : few && near(asked) ? rowsOf(inEachStretch(sql, asked, at, GATHER_TO), inOrder)
    : few && !nearestFirst ? rowsOf(gathered(sql, asked, at), inOrder)
    : `SELECT l.* FROM listing l WHERE ${[...conditions(sql, asked, at), ...(nearestFirst && !few ? [] : inStretches(sql, stretches(asked)))].join(' AND ')}${few ? ' OFFSET 0' : ''}`;
  const found = await rows<Row>(
    `WITH page AS (
       SELECT l.*, ${key} AS sort_key, ${here ? `l.coarse <-> ${here}` : 'NULL::float8'} AS metres, row_number() OVER (ORDER BY ${order}) AS place_in_page
       FROM (SELECT l.* FROM ${drawnFrom(asked.among, met, here)} l${after ? ` WHERE ${after}` : ''} ORDER BY ${first ?? order} ${first ? `FETCH FIRST ${most} ROWS WITH TIES` : `LIMIT ${most}`}) l
       ORDER BY ${order} LIMIT ${most}
     )
     SELECT l.id, l.number, l.title, l.species, l.log_count AS "logCount", l.board_feet AS "boardFeet", l.largest_end_ob_in AS largest, l.metres,
       ST_Y(l.coarse::geometry) AS lat, ST_X(l.coarse::geometry) AS lng, coalesce(l.town, '') AS town, l.sort_key AS "sortKey",
       ((l.closes_at - interval '1 second') AT TIME ZONE l.time_zone)::date::text AS "closesOn",
       floor(extract(epoch FROM l.closes_at - ${sql.value(at)}::timestamptz) / 86400)::int AS "closesIn",
       l.saw_by::text AS "sawBy", l.how_down AS "howDown", l.metal_risk AS "metalRisk", coalesce((l.access->>'helpers')::int, 0) AS helpers,
       (SELECT count(*)::int FROM bid b WHERE b.listing_id = l.id AND b.status IN ('open', 'toConfirm')) AS "bidCount",
       p.id AS "photoId", p.width AS "photoWidth", p.height AS "photoHeight", p.blur AS "photoBlur", p.caption AS "photoCaption"
     FROM page l
     LEFT JOIN LATERAL (
       SELECT id, width, height, blur, caption FROM photo WHERE listing_id = l.id AND booking_id IS NULL AND removed_at IS NULL AND status = 'ready' ORDER BY position, id LIMIT 1
     ) p ON true
     ORDER BY l.place_in_page`,
    sql.values,
  );
  const shown = found.slice(0, asked.limit);
  const last = shown.at(-1);
  return {
    items: shown.map((row) => asItem(row, asked.sort)),
    nextCursor: found.length > asked.limit && last ? cursorAfter(last, asked.sort) : null,
    total: Math.min(count, COUNT_TO),
    totalIsExact: count <= COUNT_TO,
  };
}

/**
 * Whether a filter by itself leaves few enough to be gathered, where more met it than were counted: as the planner foresees it from what
 * it knows of the columns. Counting on would cost much where a filter leaves very many. By distance the walk is short either way.
 */
async function foreseenFew(asked: ListingsAsked, at: Date): Promise<boolean> {
  const { species, minBoardFeet, maxLargestEndIn } = asked;
  if (species === undefined && minBoardFeet === undefined && maxLargestEndIn === undefined) return false;
  const sql = sqlBuilder();
  const where = conditions(sql, { ...asked, radiusMi: undefined }, at).join(' AND ');
  const [plan] = await rows<{ 'QUERY PLAN': readonly { readonly Plan: { readonly 'Plan Rows': number } }[] }>(`EXPLAIN (FORMAT JSON) SELECT 1 FROM listing l WHERE ${where}`, sql.values);
  return (plan?.['QUERY PLAN'][0]?.Plan['Plan Rows'] ?? Infinity) <= GATHER_TO;
}

async function countUpTo(most: number, asked: ListingsAsked, at: Date): Promise<number> {
  const sql = sqlBuilder();
  const matches = near(asked) ? inEachStretch(sql, asked, at, most) : `listing l WHERE ${[...conditions(sql, asked, at), ...inStretches(sql, stretches(asked))].join(' AND ')}`;
  const [found] = await rows<{ count: number }>(`SELECT count(*)::int AS count FROM (SELECT 1 FROM ${matches} LIMIT ${most}) few`, sql.values);
  return found?.count ?? 0;
}

const cursorAfter = (row: Row, sort: ListingSort): string => writeCursor(sort, { key: row.sortKey, id: row.id });

function asItem(row: Row, sort: ListingSort): FoundListing {
  const photo =
    row.photoId !== null && row.photoWidth !== null && row.photoHeight !== null
      ? pictureView({ id: row.photoId, width: row.photoWidth, height: row.photoHeight, blur: row.photoBlur ?? '' }, photoAlt(row.photoCaption ?? '', null))
      : undefined;
  return {
    id: row.number,
    title: row.title,
    species: row.species,
    logCount: row.logCount,
    boardFeet: row.boardFeet,
    largestEndOutsideBarkIn: Math.round(row.largest * 100) / 100,
    distanceMi: row.metres === null ? null : Math.round((row.metres / METRES_PER_MILE) * 1000) / 1000,
    place: { lat: row.lat, lng: row.lng, town: row.town },
    closesOn: row.closesOn,
    sawBy: row.sawBy,
    bidCount: row.bidCount,
    ...(photo ? { photo } : {}),
    howDown: row.howDown,
    metalRisk: row.metalRisk,
    rowId: row.id,
    cursor: cursorAfter(row, sort),
    helpers: row.helpers,
    closesInDays: row.closesIn,
  };
}

/** The item as the endpoint answers it, without what only the page shows. */
export function publicItem({ howDown: _howDown, metalRisk: _metalRisk, closesInDays: _days, rowId: _rowId, cursor: _cursor, helpers: _helpers, ...item }: FoundListing): ListingItem {
  return item;
}
