import { day, filled, id, instant, keyRef, nullable, real, ref, table, text, type Row } from './table.ts';

export const DryingPlan = table('drying_plan', {
  bookingId: keyRef(),
  temperatureF: real(),
  humidityPct: real(),
  targetPct: real(),
  stackWidthFt: real(),
  sawKerfIn: real(),
  pieces: filled(text()),
  remindOn: nullable(day()),
  remindedAt: nullable(instant()),
  updatedAt: instant(),
});
export type DryingPlan = Row<typeof DryingPlan>;

export const MoistureReading = table('moisture_reading', {
  id: id(),
  bookingId: ref(),
  readOn: day(),
  moisturePct: real(),
  note: filled(text()),
  enteredBy: ref(),
  enteredAt: instant(),
});
export type MoistureReading = Row<typeof MoistureReading>;
