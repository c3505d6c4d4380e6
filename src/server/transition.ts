import type { Model, ModelStatic } from 'sequelize';
import { allows, type Machine } from '~/domain/states/machine.ts';
import { currentTransaction } from './db.ts';
import { conflict } from './errors.ts';
import { Event } from './models/event.ts';
import type { Actor } from './viewer.ts';

type StatusRow<State extends string> = Model & { readonly id: string; status: State };

/** What a deed leaves in the audit log besides the change itself. */
export interface Trace {
  readonly data?: Readonly<Record<string, unknown>>;
  readonly requestId?: string;
}

/** Writes one line of the audit log for a deed that changes no status. */
export async function record(actor: Pick<Actor, 'id' | 'name'>, action: string, thing: string, thingId: string | null, at: Date, trace: Trace = {}): Promise<void> {
  await Event.create({ at, actorId: actor.id, action, thing, thingId, data: { ...(actor.id === null ? { by: actor.name } : {}), ...trace.data }, requestId: trace.requestId ?? null });
}

/**
 * The only writer of a status. Call it inside a transaction on a row read with a lock, after `authorize`.
 * Compares and swaps, so that of two racers one wins even without the lock, and writes the audit line.
 * @param set other columns of the row that change in the same step
 * @throws Refusal `conflict` when the table has no such move from the row's state, or someone else was first.
 */
export async function transition<State extends string, Move extends string>(
  table: Machine<State, Move>,
  move: Move,
  row: StatusRow<State>,
  actor: Actor,
  at: Date,
  set: Readonly<Record<string, unknown>> = {},
  trace: Trace = {},
): Promise<void> {
  if (!currentTransaction()) throw new Error('transition needs a transaction');
  const from = row.status;
  if (!allows(table, move, from)) throw conflict('That can no longer be done: things have moved on. Load the page again to see where it stands.');
  const to = table.moves[move].to;
  const model = row.constructor as ModelStatic<Model>;
  const change = { ...set, status: to };
  const [count] = await model.update(change, { where: { id: row.id, status: from } });
  if (count !== 1) throw conflict('Someone else was first. Load the page again to see where it stands.');
  row.set(change as never, { raw: true });
  await Event.create({
    at, actorId: actor.id, action: move, thing: table.thing, thingId: row.id, fromStatus: from, toStatus: to,
    data: { ...(actor.id === null ? { by: actor.name } : {}), ...trace.data }, requestId: trace.requestId ?? null,
  });
}
