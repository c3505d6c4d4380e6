import { ROAD_FACTOR } from '~/domain/trade/road-miles.ts';
import type { RateCard } from '~/domain/trade/rate-card.ts';
import type { Point } from '~/domain/geo.ts';
import { rows } from '../db.ts';
import { sqlBuilder } from './sql-builder.ts';

const METRES_PER_MILE = 1609.344;

export interface PublicMill {
  readonly name: string;
  readonly kind: 'band' | 'swing-blade' | 'chainsaw' | 'circular';
  readonly kerfIn: number;
  readonly largestLogIn: number;
  readonly widestCutIn: number;
  readonly widestBoardIn: number;
  readonly longestFt: number;
  readonly shortestFt: number;
  readonly turnsLogsBy: 'machine' | 'hand';
}

/** What anyone may know of a sawyer. The base is on the coarse grid and is given as a town and a distance only. */
export interface PublicSawyer {
  readonly id: string;
  readonly name: string;
  readonly town: string;
  readonly state: string;
  readonly distanceMi: number | null;
  readonly travelMiles: number;
  readonly mills: readonly PublicMill[];
  readonly card: RateCard;
  readonly settledJobs: number;
  readonly reviewCount: number;
  readonly meanStars: number | null;
  /** A moderator looked at a certificate that is valid until this day. */
  readonly certificateExpiresOn: string | null;
}

/** What a sawyer is called in public, in SQL. */
const sawyerName = `coalesce(nullif(s.business_name, ''), a.name)`;

/** The columns of a public sawyer, for `sawyer_profile s JOIN account a`. `metres` is SQL for the distance. */
export const publicSawyerColumns = (metres: string, at: string): string => `
  a.id, ${sawyerName} AS name, coalesce(s.town, '') AS town, coalesce(s.state, '') AS state,
  round((${metres} / ${METRES_PER_MILE})::numeric, 1)::float8 AS "distanceMi", s.travel_miles AS "travelMiles",
  (SELECT coalesce(json_agg(json_build_object('name', m.name, 'kind', m.kind, 'kerfIn', m.kerf_in, 'largestLogIn', m.largest_log_in, 'widestCutIn', m.widest_cut_in,
     'widestBoardIn', m.widest_board_in, 'longestFt', m.longest_ft, 'shortestFt', m.shortest_ft, 'turnsLogsBy', m.turns_logs_by) ORDER BY m.created_at), '[]')
   FROM mill m WHERE m.sawyer_id = a.id AND m.retired_at IS NULL) AS mills,
  (SELECT r.card FROM rate_card r WHERE r.sawyer_id = a.id ORDER BY r.revision DESC LIMIT 1) AS card,
  (SELECT count(*)::int FROM booking b WHERE b.sawyer_id = a.id AND b.status = 'settled') AS "settledJobs",
  (SELECT count(*)::int FROM review v WHERE v.subject_id = a.id AND v.hidden_at IS NULL) AS "reviewCount",
  (SELECT round(avg(v.stars), 1)::float8 FROM review v WHERE v.subject_id = a.id AND v.hidden_at IS NULL) AS "meanStars",
  (SELECT c.expires_on::text FROM certificate c WHERE c.sawyer_id = a.id AND c.kind = 'insurance' AND c.expires_on >= ${at}::date) AS "certificateExpiresOn"`;

/** Who is shown: an account in good standing with a base, a mill and a rate card. */
export const publicSawyerConditions = `a.status = 'active' AND a.is_sawyer AND a.email_confirmed_at IS NOT NULL AND s.base IS NOT NULL
  AND EXISTS (SELECT 1 FROM mill m WHERE m.sawyer_id = a.id AND m.retired_at IS NULL) AND EXISTS (SELECT 1 FROM rate_card r WHERE r.sawyer_id = a.id)`;

/** The most that one page shows. */
export const mostSawyers = 50;

/**
 * Sawyers nearest first, or by name when no place is given. `wouldCome` keeps those whose reach holds the place's road miles.
 * Leans on `sawyer_near` by nearest neighbour; one more than the page shows is asked for, to know whether there are more.
 * @param after the id of the sawyer after whom the page begins; one who is gone begins the list again
 */
export async function sawyersNear(from: Point | null, wouldCome: boolean, at: Date, after: string | null = null): Promise<{ readonly sawyers: readonly PublicSawyer[]; readonly next: string | null }> {
  const sql = sqlBuilder();
  const today = sql.value(at);
  const here = from && `ST_SetSRID(ST_MakePoint(${sql.value(from.lng)}::float8, ${sql.value(from.lat)}::float8), 4326)::geography`;
  const metres = here ? `(s.base <-> ${here})` : 'NULL::float8';
  const reach = here && wouldCome ? `AND ${metres} * ${ROAD_FACTOR} <= s.travel_miles * ${METRES_PER_MILE}` : '';
  const key = here ? metres : sawyerName;
  // Whoever is last on a page is looked up again: the address says who, not how far.
  const past = after === null ? '' : `AND coalesce((${key}, a.id) > (SELECT ${key}, a.id FROM sawyer_profile s JOIN account a ON a.id = s.account_id WHERE a.id = ${sql.value(after)}::uuid), true)`;
  const found = await rows<PublicSawyer>(
    `SELECT ${publicSawyerColumns(metres, today)} FROM sawyer_profile s JOIN account a ON a.id = s.account_id
     WHERE ${publicSawyerConditions} ${reach} ${past} ORDER BY ${key}, a.id LIMIT ${mostSawyers + 1}`,
    sql.values,
  );
  return { sawyers: found.slice(0, mostSawyers), next: found.length > mostSawyers ? (found[mostSawyers - 1]?.id ?? null) : null };
}
