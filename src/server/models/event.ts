import { filled, identity, instant, json, nullable, ref, table, text } from './table.ts';

/** The audit log: append only, the database refuses anything else. */
export const Event = table('event', {
  id: { options: { ...identity().options, primaryKey: true, autoIncrement: true }, given: true } as ReturnType<typeof identity>,
  at: instant(),
  actorId: nullable(ref()),
  action: text(),
  thing: text(),
  thingId: nullable(ref()),
  fromStatus: nullable(text()),
  toStatus: nullable(text()),
  data: filled(json<Record<string, unknown>>()),
  requestId: nullable(text()),
});
