import { abilities } from '~/domain/permissions.ts';
import { rolesOnBooking } from '../authorize.ts';
import { cancellationOf } from '../booking-money.ts';
import { notFound } from '../errors.ts';
import { Booking, Listing, NoShow } from '../models/index.ts';
import { partiesOf } from '../parties.ts';
import type { Viewer } from '../viewer.ts';

/** What a report that somebody did not come means, and how far it is. */
export interface NoShowPage {
  readonly number: number;
  readonly title: string;
  readonly timeZone: string;
  readonly side: 'landowner' | 'sawyer' | 'moderator';
  readonly landownerName: string;
  readonly sawyerName: string;
  readonly startsAt: Date | null;
  readonly report: {
    readonly absent: NoShow['absent'];
    readonly status: NoShow['status'];
    readonly says: string;
    readonly reportedAt: Date;
    readonly answerBy: Date;
    readonly answer: string | null;
    readonly because: string | null;
  } | null;
  /** What would be owed and go back if the report stands; for a report not made yet, if the other side is said to be absent. */
  readonly money: { readonly owedCents: number; readonly backCents: number; readonly feeCents: number } | null;
  readonly can: { readonly report: boolean; readonly withdraw: boolean; readonly answer: boolean; readonly decide: boolean };
}

/** @throws Refusal `notFound` for those who are neither side nor moderator */
export async function noShowPage(viewer: Viewer, number: number, at: Date): Promise<NoShowPage> {
  const booking = Number.isSafeInteger(number) ? await Booking.findOne({ where: { number } }) : null;
  const allowed = booking && abilities('booking', rolesOnBooking(viewer, booking), booking.status);
  if (!booking || !allowed?.see) throw notFound('booking');
  const side = viewer.id === booking.landownerId ? 'landowner' : viewer.id === booking.sawyerId ? 'sawyer' : 'moderator';
  const listing = await Listing.findByPk(booking.listingId, { rejectOnEmpty: true });
  const { landowner, sawyer } = await partiesOf(booking);
  const newest = await NoShow.findOne({ where: { bookingId: booking.id }, order: [['reportedAt', 'DESC']] });
  const report = newest && newest.status !== 'over' && (newest.status === 'stands' || newest.startsAt.getTime() === booking.startsAt?.getTime()) ? newest : null;
  const open = report?.status === 'reported' || report?.status === 'contested';
  const begun = booking.startsAt !== null && booking.startsAt <= at;
  const absent = open ? report.absent : side === 'landowner' ? 'sawyer' : 'landowner';
  const parts = booking.status === 'held' && begun ? await cancellationOf(booking, absent, open ? report.reportedAt : at) : null;
  return {
    number, side,
    title: listing.title ?? '',
    timeZone: booking.timeZone,
    landownerName: landowner.name,
    sawyerName: sawyer.name,
    startsAt: booking.startsAt,
    report: report && { absent: report.absent, status: report.status, says: report.says, reportedAt: report.reportedAt, answerBy: report.answerBy, answer: report.answer, because: report.because },
    money: parts && { owedCents: parts.payableCents, backCents: parts.refundCents, feeCents: parts.feeCents },
    can: {
      report: allowed.reportNoShow && begun && !open,
      withdraw: allowed.reportNoShow && open && report.absent !== side,
      answer: allowed.reportNoShow && report?.status === 'reported' && report.absent === side,
      decide: allowed.decideNoShow && report?.status === 'contested',
    },
  };
}
