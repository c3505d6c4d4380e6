import { createHash } from 'node:crypto';
import { type AgreedTerms, canonicalJson } from '~/domain/trade/agreement.ts';
import { authorize, rolesOnBooking } from '../authorize.ts';
import { notFound, signedOut } from '../errors.ts';
import { Booking, WorkAgreement } from '../models/booking.ts';
import type { Viewer } from '../viewer.ts';

/** The work agreement of a booking, for both sides and moderators. `intact`: its content still has the hash it was frozen with. */
export async function agreementOf(viewer: Viewer | null, bookingNumber: number) {
  if (!viewer) throw signedOut();
  const booking = Number.isSafeInteger(bookingNumber) ? await Booking.findOne({ where: { number: bookingNumber } }) : null;
  const roles = booking && rolesOnBooking(viewer, booking);
  if (!booking || !roles || !['landowner', 'sawyer', 'moderator'].some((role) => roles.has(role as 'landowner'))) throw notFound('booking');
  authorize(viewer, 'booking', 'see', roles, booking.status);
  const agreement = await WorkAgreement.findByPk(booking.id);
  if (!agreement) throw notFound('agreement');
  const terms = agreement.terms as AgreedTerms;
  const sha256 = createHash('sha256').update(canonicalJson(terms)).digest('hex');
  return { booking, terms, textVersion: agreement.textVersion, frozenAt: agreement.frozenAt, sha256: agreement.sha256, intact: sha256 === agreement.sha256 };
}
