import { abilities, type Action } from '~/domain/permissions.ts';
import type { Settlement } from '~/domain/trade/settlement.ts';
import type { TallyView } from '~/schemas/tally-view.ts';
import { rolesOnBooking } from '../authorize.ts';
import { notFound } from '../errors.ts';
import { Booking, Listing } from '../models/index.ts';
import { partiesOf } from '../parties.ts';
import { tallyView } from '../tally-view.ts';
import { tallyWork } from '../tally-work.ts';
import type { Viewer } from '../viewer.ts';

export interface TallyPage {
  readonly number: number;
  readonly title: string;
  readonly side: 'landowner' | 'sawyer' | 'moderator';
  readonly landownerName: string;
  readonly sawyerName: string;
  readonly timeZone: string;
  readonly signBy: Date | null;
  readonly offeredAt: Date | null;
  readonly signedAt: Date | null;
  readonly signedBy: string | null;
  readonly signedName: string | null;
  /** The drawn signature, an SVG path on a field of 1000 × 400. */
  readonly signature: string | null;
  readonly note: string;
  readonly sha256: string;
  /** As signed, or as it would come to now. */
  readonly settlement: Settlement;
  readonly view: TallyView;
  readonly can: Record<Action<'booking'>, boolean>;
}

/**
 * The tally of a booking for its two sides and moderators.
 * @throws Refusal `notFound` for others, and while no tally has been begun
 */
export async function tallyPage(viewer: Viewer, number: number): Promise<TallyPage> {
  const booking = Number.isSafeInteger(number) ? await Booking.findOne({ where: { number } }) : null;
  if (!booking) throw notFound('booking');
  const can = abilities('booking', rolesOnBooking(viewer, booking), booking.status);
  if (!can.see) throw notFound('booking');
  const work = await tallyWork(booking);
  if (!work) throw notFound('tally: sawing has not begun');
  const listing = await Listing.findByPk(booking.listingId, { rejectOnEmpty: true });
  const { landowner, sawyer } = await partiesOf(booking);
  return {
    number: booking.number,
    title: listing.title ?? '',
    side: viewer.id === booking.landownerId ? 'landowner' : viewer.id === booking.sawyerId ? 'sawyer' : 'moderator',
    landownerName: landowner.name,
    sawyerName: sawyer.name,
    timeZone: booking.timeZone,
    signBy: booking.signBy,
    offeredAt: work.tally.offeredAt,
    signedAt: work.tally.signedAt,
    signedBy: work.tally.signedBy,
    signedName: work.tally.signedName,
    signature: work.tally.signature,
    note: work.tally.note,
    sha256: work.sha256,
    settlement: work.tally.settlement ? (work.tally.settlement as Settlement) : work.settlement,
    view: await tallyView(booking, work),
    can,
  };
}
