import type { HoldWarning } from '~/domain/trade/on-the-day.ts';
import { filled, givenId, id, instant, json, nullable, real, ref, table, text, texts, whole, yes, type Row } from './table.ts';

export const Tally = table('tally', {
  id: id(),
  bookingId: ref(),
  part: filled(whole()),
  revision: filled(whole()),
  clock: filled(json<unknown[]>()),
  extras: filled(json<Record<string, unknown>>()),
  note: filled(text()),
  metalAllowed: filled(whole()),
  endedBySawyer: filled(yes()),
  holdWarned: filled(text<HoldWarning>()),
  createdAt: instant(),
  offeredAt: nullable(instant()),
  contentSha256: nullable(text()),
  signedAt: nullable(instant()),
  signedBy: nullable(text<'landowner' | 'deadline' | 'moderator'>()),
  signedName: nullable(text()),
  signature: nullable(text()),
  /** Whose phone it was signed on. */
  signedOn: nullable(text<'landowner' | 'sawyer'>()),
  settlement: nullable(json<unknown>()),
});
export type Tally = Row<typeof Tally>;

export const TallyBoard = table('tally_board', {
  id: givenId(),
  tallyId: ref(),
  logId: nullable(ref()),
  kind: filled(text<'board' | 'slab' | 'out-of-size'>()),
  thicknessIn: real(),
  widthIn: real(),
  secondWidthIn: nullable(real()),
  lengthFt: real(),
  count: whole(),
  enteredAt: instant(),
  sequence: whole(),
  removedAt: nullable(instant()),
});
export type TallyBoard = Row<typeof TallyBoard>;

export const MetalHit = table('metal_hit', {
  id: givenId(),
  tallyId: ref(),
  logId: nullable(ref()),
  outcome: text<'re-sharpened' | 'destroyed'>(),
  note: filled(text()),
  enteredAt: instant(),
  removedAt: nullable(instant()),
});
export type MetalHit = Row<typeof MetalHit>;

export const CullLog = table('cull_log', {
  id: givenId(),
  tallyId: ref(),
  logId: nullable(ref()),
  reason: text(),
  openingMinutes: filled(whole()),
  passes: filled(whole()),
  enteredAt: instant(),
  removedAt: nullable(instant()),
});
export type CullLog = Row<typeof CullLog>;

export const TallyQuery = table('tally_query', {
  id: id(),
  tallyId: ref(),
  line: text(),
  lineId: nullable(ref()),
  says: text(),
  wanted: nullable(json<unknown>()),
  answer: nullable(text()),
  answered: nullable(json<unknown>()),
  decision: nullable(json<unknown>()),
  decidedBecause: nullable(text()),
  decidedBy: nullable(ref()),
  createdAt: instant(),
  answeredAt: nullable(instant()),
  decidedAt: nullable(instant()),
});
export type TallyQuery = Row<typeof TallyQuery>;

export const TallyPart = table('tally_part', {
  id: givenId(),
  tallyId: ref(),
  lineIds: texts(),
  contentSha256: text(),
  costCents: whole(),
  signedName: text(),
  signature: nullable(text()),
  onPhoneOf: text<'landowner' | 'sawyer'>(),
  signedAt: instant(),
});
export type TallyPart = Row<typeof TallyPart>;
