import type { BookingState } from '~/domain/states/booking.ts';
import { day, days, filled, id, identity, instant, json, keyRef, nullable, ref, table, text, timeOfDay, whole, yes, type Row } from './table.ts';

export const Outing = table('outing', { id: id(), sawyerId: ref(), kind: text<'booking' | 'shared-trip'>(), createdAt: instant() });
export type Outing = Row<typeof Outing>;

export const Booking = table('booking', {
  id: id(),
  number: identity(),
  listingId: ref(),
  bidId: ref(),
  landownerId: ref(),
  sawyerId: ref(),
  outingId: ref(),
  status: filled(text<BookingState>()),
  timeZone: text(),
  startsAt: nullable(instant()),
  payBy: nullable(instant()),
  signBy: nullable(instant()),
  invitationSequence: filled(whole()),
  signReminders: filled(whole()),
  cancelledBy: nullable(ref()),
  cancelReason: nullable(text()),
  /** What is owed for a cancellation is reckoned from here. */
  cancelledAt: nullable(instant()),
  createdAt: instant(),
  updatedAt: instant(),
});
export type Booking = Row<typeof Booking>;

export type ProposalStatus = 'open' | 'confirmed' | 'replaced' | 'withdrawn';

export const DayProposal = table('day_proposal', {
  id: id(),
  bookingId: ref(),
  proposedBy: ref(),
  days: days(),
  startTime: filled(timeOfDay()),
  note: filled(text()),
  status: filled(text<ProposalStatus>()),
  createdAt: instant(),
  decidedAt: nullable(instant()),
});
export type DayProposal = Row<typeof DayProposal>;

export const BookedDay = table('booked_day', { id: id(), sawyerId: ref(), day: day(), outingId: ref(), bookingId: ref(), active: filled(yes()), eveningToldAt: nullable(instant()) });
export type BookedDay = Row<typeof BookedDay>;

export const WorkAgreement = table('work_agreement', {
  bookingId: keyRef(),
  textVersion: text(),
  terms: json<unknown>(),
  sha256: text(),
  frozenAt: instant(),
});
export type WorkAgreement = Row<typeof WorkAgreement>;

export const Conversation = table('conversation', {
  id: id(),
  listingId: ref(),
  landownerId: ref(),
  sawyerId: ref(),
  bookingId: nullable(ref()),
  lastMessageAt: instant(),
});
export type Conversation = Row<typeof Conversation>;

export const Message = table('message', {
  id: id(),
  conversationId: ref(),
  senderId: ref(),
  recipientId: ref(),
  body: text(),
  sentAt: instant(),
  readAt: nullable(instant()),
  hiddenAt: nullable(instant()),
  hiddenReason: nullable(text()),
});
export type Message = Row<typeof Message>;

export const Review = table('review', {
  id: id(),
  bookingId: ref(),
  authorId: ref(),
  subjectId: ref(),
  stars: whole(),
  body: filled(text()),
  createdAt: instant(),
  hiddenAt: nullable(instant()),
  hiddenReason: nullable(text()),
});
export type Review = Row<typeof Review>;
