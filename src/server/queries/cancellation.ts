import { abilities } from '~/domain/permissions.ts';
import { cancelCutOff } from '~/domain/time.ts';
import { rolesOnBooking } from '../authorize.ts';
import { cancellationOf } from '../booking-money.ts';
import { notFound } from '../errors.ts';
import { Booking, Listing } from '../models/index.ts';
import { otherParty, partiesOf } from '../parties.ts';
import type { Viewer } from '../viewer.ts';

/** What cancelling a booking would mean now, before anybody does it. */
export interface Cancellation {
  readonly number: number;
  readonly title: string;
  readonly timeZone: string;
  readonly otherName: string;
  readonly mine: 'landowner' | 'sawyer';
  readonly canCancel: boolean;
  readonly freeUntil: Date | null;
  /** Null while nothing is held. */
  readonly money: { readonly owedCents: number; readonly backCents: number; readonly feeCents: number; readonly toSawyerCents: number } | null;
}

/** @throws Refusal `notFound` for anyone but the two sides */
export async function cancellation(viewer: Viewer, number: number, at: Date): Promise<Cancellation> {
  const booking = Number.isSafeInteger(number) ? await Booking.findOne({ where: { number } }) : null;
  if (!booking || (viewer.id !== booking.landownerId && viewer.id !== booking.sawyerId)) throw notFound('booking');
  const mine = viewer.id === booking.landownerId ? 'landowner' : 'sawyer';
  const listing = await Listing.findByPk(booking.listingId, { rejectOnEmpty: true });
  const parts = booking.status === 'held' ? await cancellationOf(booking, mine, at) : null;
  return {
    number, mine,
    title: listing.title ?? '',
    timeZone: booking.timeZone,
    otherName: otherParty(await partiesOf(booking), viewer.id).name,
    canCancel: abilities('booking', rolesOnBooking(viewer, booking), booking.status).cancel,
    freeUntil: booking.startsAt ? cancelCutOff(booking.startsAt) : null,
    money: parts && { owedCents: parts.payableCents, backCents: parts.refundCents, feeCents: parts.feeCents, toSawyerCents: parts.transferCents },
  };
}
