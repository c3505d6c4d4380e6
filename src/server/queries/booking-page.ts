import { abilities, type Action } from '~/domain/permissions.ts';
import type { BookingState } from '~/domain/states/booking.ts';
import type { PaymentState } from '~/domain/states/payment.ts';
import { cancelCutOff, type Day } from '~/domain/time.ts';
import type { dayStates } from '~/domain/trade/milling-days.ts';
import { rolesOnBooking } from '../authorize.ts';
import { dayPhotos, type DayPhoto } from '../day-photos.ts';
import { oneRow, rows } from '../db.ts';
import { notFound } from '../errors.ts';
import { bookedDaysOf, startTimeOf } from '../invitations.ts';
import { Booking, DayProposal, HeldPayment, Listing, NoShow, Review } from '../models/index.ts';
import { otherParty, partiesOf } from '../parties.ts';
import { notePlaceSeen } from '../place-views.ts';
import type { Viewer } from '../viewer.ts';
import { sawyerDays } from './open-days.ts';

/** One thing that has happened to a booking, as its page tells it. */
export interface Happened {
  readonly at: Date;
  readonly action: string;
  readonly thing: string;
  readonly byName: string | null;
}

export interface BookingPage {
  readonly number: number;
  readonly status: BookingState;
  readonly timeZone: string;
  readonly side: 'landowner' | 'sawyer' | 'moderator';
  readonly landowner: { readonly id: string; readonly name: string };
  readonly sawyer: { readonly id: string; readonly name: string };
  readonly otherName: string;
  readonly listing: { readonly number: number; readonly title: string; readonly town: string; readonly logCount: number; readonly boardFeet: number };
  readonly days: readonly Day[];
  readonly startTime: string;
  readonly startsAt: Date | null;
  readonly payBy: Date | null;
  readonly signBy: Date | null;
  readonly freeToCancelUntil: Date | null;
  readonly holdCents: number;
  readonly payment: { readonly status: PaymentState; readonly disputed: boolean } | null;
  readonly proposal: { readonly id: string; readonly mine: boolean; readonly days: readonly Day[]; readonly startTime: string; readonly note: string } | null;
  readonly calendar: ReturnType<typeof dayStates>;
  /** Only for those who may see it now. */
  readonly place: { readonly lat: number; readonly lng: number } | null;
  readonly conversationId: string | null;
  readonly reviews: readonly { readonly id: string; readonly byName: string; readonly mine: boolean; readonly stars: number; readonly body: string }[];
  /** Photographs of the milling day, for the two sides and moderators. */
  readonly photos: readonly DayPhoto[];
  readonly history: readonly Happened[];
  readonly cancelReason: string | null;
  /** From the day's start on: whether somebody is said not to have come, and whether this reader may say so. */
  readonly noShow: { readonly open: { readonly absentMe: boolean; readonly contested: boolean; readonly answerBy: Date } | null; readonly mayReport: boolean };
  readonly can: Record<Action<'booking'>, boolean>;
}

const historyOf = (bookingId: string): Promise<Happened[]> =>
  rows<Happened>(
    `SELECT event.at, event.action, event.thing, account.name AS "byName"
     FROM event LEFT JOIN account ON account.id = event.actor_id
     WHERE (event.thing = 'booking' AND event.thing_id = $1)
        OR (event.thing = 'heldPayment' AND event.thing_id IN (SELECT id FROM held_payment WHERE booking_id = $1))
     ORDER BY event.id`,
    [bookingId],
  );

async function reviewsOf(bookingId: string, viewerId: string): Promise<BookingPage['reviews']> {
  const found = await Review.findAll({ where: { bookingId, hiddenAt: null }, order: [['createdAt', 'ASC']] });
  const names = await rows<{ id: string; name: string }>('SELECT id, name FROM account WHERE id = ANY($1::uuid[])', [found.map((review) => review.authorId)]);
  return found.map((review) => ({ id: review.id, byName: names.find(({ id }) => id === review.authorId)?.name ?? '', mine: review.authorId === viewerId, stars: review.stars, body: review.body }));
}

async function noShowOf(booking: Booking, side: BookingPage['side'], may: boolean, at: Date): Promise<BookingPage['noShow']> {
  if (booking.status !== 'held' || !booking.startsAt || booking.startsAt > at) return { open: null, mayReport: false };
  const report = await NoShow.findOne({ where: { bookingId: booking.id, status: ['reported', 'contested'], startsAt: booking.startsAt } });
  return { open: report && { absentMe: report.absent === side, contested: report.status === 'contested', answerBy: report.answerBy }, mayReport: may && !report };
}

/**
 * All that a booking's page shows to this reader. Showing the exact place to anybody but its owner is written to the audit log.
 * @throws Refusal `notFound` for those who are neither side nor moderator
 */
export async function bookingPage(viewer: Viewer, number: number, at: Date): Promise<BookingPage> {
  const booking = Number.isSafeInteger(number) ? await Booking.findOne({ where: { number } }) : null;
  if (!booking) throw notFound('booking');
  const can = abilities('booking', rolesOnBooking(viewer, booking), booking.status);
  if (!can.see) throw notFound('booking');
  const side = viewer.id === booking.landownerId ? 'landowner' : viewer.id === booking.sawyerId ? 'sawyer' : 'moderator';
  const listing = await Listing.findByPk(booking.listingId, { rejectOnEmpty: true });
  const parties = await partiesOf(booking);
  const proposal = await DayProposal.findOne({ where: { bookingId: booking.id, status: 'open' } });
  const payment = await HeldPayment.findOne({ where: { bookingId: booking.id } });
  const bid = await oneRow<{ holdCents: number; daysOffered: string[] }>('SELECT hold_cents AS "holdCents", days_offered::text[] AS "daysOffered" FROM bid WHERE id = $1', [booking.bidId]);
  const conversation = await oneRow<{ id: string }>('SELECT id FROM conversation WHERE listing_id = $1 AND sawyer_id = $2', [booking.listingId, booking.sawyerId]);
  const place = can.seePlace && listing.place ? { lat: listing.place.coordinates[1], lng: listing.place.coordinates[0] } : null;
  if (place) await notePlaceSeen(viewer, listing, at, { booking: booking.number });
  return {
    number: booking.number,
    status: booking.status,
    timeZone: booking.timeZone,
    side,
    landowner: { id: parties.landowner.id, name: parties.landowner.name },
    sawyer: { id: parties.sawyer.id, name: parties.sawyer.name },
    otherName: otherParty(parties, viewer.id).name,
    listing: { number: listing.number, title: listing.title ?? '', town: [listing.town, listing.state].filter(Boolean).join(', '), logCount: listing.logCount, boardFeet: listing.boardFeet },
    days: await bookedDaysOf(booking.id),
    startTime: await startTimeOf(booking.id),
    startsAt: booking.startsAt,
    payBy: booking.payBy,
    signBy: booking.signBy,
    freeToCancelUntil: booking.startsAt ? cancelCutOff(booking.startsAt) : null,
    holdCents: payment?.dueCents ?? bid?.holdCents ?? 0,
    payment: payment ? { status: payment.status, disputed: payment.disputedAt !== null } : null,
    proposal: proposal ? { id: proposal.id, mine: proposal.proposedBy === viewer.id, days: proposal.days, startTime: proposal.startTime.slice(0, 5), note: proposal.note } : null,
    calendar: can.proposeDay ? await sawyerDays(booking.sawyerId, booking.timeZone, at, bid?.daysOffered ?? [], booking.id) : [],
    place,
    conversationId: conversation?.id ?? null,
    reviews: await reviewsOf(booking.id, viewer.id),
    photos: await dayPhotos(booking.id),
    history: await historyOf(booking.id),
    cancelReason: booking.cancelReason,
    noShow: await noShowOf(booking, side, can.reportNoShow, at),
    can: { ...can, review: can.review && (await Review.count({ where: { bookingId: booking.id, authorId: viewer.id } })) === 0 },
  };
}
