import { givenId, instant, keyRef, nullable, real, ref, table, text, whole, type Row } from './table.ts';

export const MeasuredLog = table('measured_log', {
  bookingId: keyRef(),
  logId: keyRef(),
  smallEndIn: real(),
  largeEndIn: nullable(real()),
  lengthFt: real(),
  measuredAt: instant(),
  agreedAt: nullable(instant()),
});
export type MeasuredLog = Row<typeof MeasuredLog>;

export type AllowedThing = 'metal' | 'increase' | 'larger-log' | 'added-log' | 'set-up-again';

export const DayAllowance = table('day_allowance', {
  id: givenId(),
  bookingId: ref(),
  what: text<AllowedThing>(),
  logId: nullable(ref()),
  limitCents: nullable(whole()),
  signedName: text(),
  signature: nullable(text()),
  onPhoneOf: text<'landowner' | 'sawyer'>(),
  enteredBy: ref(),
  enteredAt: instant(),
});
export type DayAllowance = Row<typeof DayAllowance>;

export const SigningCode = table('signing_code', { bookingId: keyRef(), code: text(), wrongTries: whole() });
