import { rows } from '../../db.ts';
import { openDesk, anywhere, DESK_PAGE, pageOf } from '../../desk.ts';
import type { Viewer } from '../../viewer.ts';
import { sqlBuilder } from '../sql-builder.ts';

/** One line of the audit log, with what it is about as far as it still has a name. */
export interface DeskEvent {
  readonly id: string;
  readonly at: Date;
  readonly action: string;
  readonly thing: string;
  readonly thingId: string | null;
  readonly from: string | null;
  readonly to: string | null;
  readonly data: Readonly<Record<string, unknown>>;
  readonly requestId: string | null;
  readonly actorId: string | null;
  readonly actorName: string | null;
  readonly listing: number | null;
  readonly booking: number | null;
  readonly accountName: string | null;
}

const columns = `e.id::text AS id, e.at, e.action, e.thing, e.thing_id AS "thingId", e.from_status AS "from", e.to_status AS "to", e.data, e.request_id AS "requestId",
  e.actor_id AS "actorId", actor.name AS "actorName", coalesce(l.number, bl.number) AS listing, coalesce(k.number, hk.number) AS booking, subject.name AS "accountName"`;
const joins = `LEFT JOIN account actor ON actor.id = e.actor_id
  LEFT JOIN listing l ON e.thing = 'listing' AND l.id = e.thing_id
  LEFT JOIN bid b ON e.thing = 'bid' AND b.id = e.thing_id LEFT JOIN listing bl ON bl.id = b.listing_id
  LEFT JOIN booking k ON e.thing = 'booking' AND k.id = e.thing_id
  LEFT JOIN held_payment h ON e.thing = 'heldPayment' AND h.id = e.thing_id LEFT JOIN booking hk ON hk.id = h.booking_id
  LEFT JOIN account subject ON e.thing = 'account' AND subject.id = e.thing_id`;

export const eventKinds = ['all', 'places', 'moderators', 'system'] as const;
export type EventKind = (typeof eventKinds)[number];

/** What the audit log is asked for; days are in UTC, both included. */
export interface EventsAsked {
  readonly kind: EventKind;
  readonly who: string;
  readonly action: string;
  readonly from: string | null;
  readonly to: string | null;
  readonly before: string | null;
}

const kindConditions: Readonly<Record<EventKind, string | null>> = {
  all: null,
  places: `e.action = 'seePlace'`,
  moderators: `e.actor_id IN (SELECT id FROM account WHERE is_moderator)`,
  system: 'e.actor_id IS NULL',
};

/** A page of the audit log, newest first. Walks the primary key backwards; places lean on event_of_places, a person on event_of_actor. */
export async function deskEvents(viewer: Viewer | null, asked: EventsAsked): Promise<{ readonly events: readonly DeskEvent[]; readonly next: string | null }> {
  openDesk(viewer);
  const sql = sqlBuilder();
  const where = [kindConditions[asked.kind]];
  if (asked.who !== '') {
    const pattern = sql.value(anywhere(asked.who));
    where.push(`e.actor_id IN (SELECT id FROM account WHERE name ILIKE ${pattern} OR email::text ILIKE ${pattern} OR id::text = ${sql.value(asked.who.toLowerCase())})`);
  }
  if (asked.action !== '') where.push(`e.action = ${sql.value(asked.action)}`);
  if (asked.from !== null) where.push(`e.at >= ${sql.value(asked.from)}::date::timestamp AT TIME ZONE 'UTC'`);
  if (asked.to !== null) where.push(`e.at < (${sql.value(asked.to)}::date + 1)::timestamp AT TIME ZONE 'UTC'`);
  if (asked.before !== null) where.push(`e.id < ${sql.value(asked.before)}::bigint`);
  const found = await rows<DeskEvent>(
    `SELECT ${columns} FROM (SELECT * FROM event e WHERE ${where.filter((one) => one !== null).join(' AND ') || 'true'} ORDER BY e.id DESC LIMIT ${DESK_PAGE + 1}) e ${joins} ORDER BY e.id DESC`,
    sql.values,
  );
  const { rows: events, last } = pageOf(found);
  return { events, next: last?.id ?? null };
}

/** The deeds that the log knows, for its filter. */
export async function eventActions(viewer: Viewer | null): Promise<readonly string[]> {
  openDesk(viewer);
  return (await rows<{ action: string }>('SELECT DISTINCT action FROM event ORDER BY action')).map(({ action }) => action);
}

const mostHistory = 300;
const things: Readonly<Record<'listing' | 'booking' | 'account', string>> = {
  listing: `(e.thing = 'listing' AND e.thing_id = $1) OR (e.thing = 'bid' AND e.thing_id IN (SELECT id FROM bid WHERE listing_id = $1)) OR (e.thing = 'photo' AND e.thing_id IN (SELECT id FROM photo WHERE listing_id = $1))`,
  booking: `(e.thing = 'booking' AND e.thing_id = $1) OR (e.thing = 'heldPayment' AND e.thing_id IN (SELECT id FROM held_payment WHERE booking_id = $1)) OR (e.thing = 'bid' AND e.thing_id IN (SELECT bid_id FROM booking WHERE id = $1))`,
  account: `(e.thing = 'account' AND e.thing_id = $1) OR (e.thing = 'photo' AND e.thing_id IN (SELECT id FROM photo WHERE sawyer_id = $1))`,
};

/** Everything that happened to one thing, newest first (at most 300 lines). Leans on event_of_thing. */
export async function historyOf(viewer: Viewer | null, thing: keyof typeof things, id: string): Promise<DeskEvent[]> {
  openDesk(viewer);
  return rows<DeskEvent>(`SELECT ${columns} FROM event e ${joins} WHERE ${things[thing]} ORDER BY e.id DESC LIMIT ${mostHistory}`, [id]);
}
