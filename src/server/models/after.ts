import { day, filled, id, instant, json, keyRef, nullable, real, ref, table, text, texts, type Row } from './table.ts';

export const DryingPlan = table('drying_plan', {
  bookingId: keyRef(),
  /** `MonthAir` as typed; the single figures are from before months could be typed. */
  months: filled(json<unknown[]>()),
  airSource: filled(text()),
  temperatureF: nullable(real()),
  humidityPct: nullable(real()),
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

/** `boards` is a list of `BoardLine`. */
export const BoardsLeft = table('boards_left', { id: id(), bookingId: ref(), listingId: ref(), boards: json<unknown[]>(), asks: filled(text()), putUpAt: instant(), takenDownAt: nullable(instant()) });
export type BoardsLeft = Row<typeof BoardsLeft>;

export const JobPage = table('job_page', {
  bookingId: keyRef(),
  photoIds: filled(texts()),
  words: filled(text()),
  landownerAgreedAt: nullable(instant()),
  sawyerAgreedAt: nullable(instant()),
  updatedAt: instant(),
});
export type JobPage = Row<typeof JobPage>;
