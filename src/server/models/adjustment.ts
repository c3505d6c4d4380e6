import { filled, id, instant, nullable, ref, table, text, whole, type Row } from './table.ts';

export type AdjustmentKind = 'forgive' | 'fee-to-landowner' | 'fee-to-sawyer' | 'hold-to-landowner' | 'enter-difference';

export const Adjustment = table('adjustment', {
  id: id(),
  kind: text<AdjustmentKind>(),
  bookingId: nullable(ref()),
  object: nullable(text()),
  against: nullable(text<'platform fee' | 'provider fee' | 'dispute loss'>()),
  amountCents: whole(),
  reason: text(),
  status: filled(text<'asked' | 'done' | 'refused'>()),
  askedBy: ref(),
  askedAt: instant(),
  decidedBy: nullable(ref()),
  decidedAt: nullable(instant()),
});
export type Adjustment = Row<typeof Adjustment>;
