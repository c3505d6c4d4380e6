import { weekdayOf } from '~/domain/month.ts';
import { addDays, dayAt, type Day } from '~/domain/time.ts';
import type { BookingState } from '~/domain/states/booking.ts';
import { authorize } from '../authorize.ts';
import { daysOffFrom } from '../days-off.ts';
import { rows } from '../db.ts';
import { baseRoles, type Viewer } from '../viewer.ts';
import { certificatePage, type OwnCertificate } from './certificate-page.ts';
import { offeredIn } from './sawyer-calendar.ts';
import { payoutsPage, type PayoutsPage } from './payouts-page.ts';
import { setUpOf, type SawyerSetUp } from './sawyer-setup.ts';

/** A booking that still goes on, or that was settled lately and not reviewed by the sawyer. */
export interface HomeBooking {
  readonly number: number;
  readonly status: BookingState;
  readonly title: string;
  readonly town: string;
  readonly otherName: string;
  readonly startsAt: Date | null;
  readonly payBy: Date | null;
  readonly signBy: Date | null;
  readonly timeZone: string;
  /** Whose open proposal of days waits; null when there is none. */
  readonly proposal: 'mine' | 'theirs' | null;
  readonly days: readonly Day[];
}

export interface SawyerHome {
  readonly setUp: SawyerSetUp;
  /** The sawyer's own calendar day. */
  readonly today: Day;
  readonly toConfirm: readonly { readonly listing: number; readonly title: string; readonly town: string }[];
  readonly openBids: number;
  readonly bookings: readonly HomeBooking[];
  /** Every day from today to six days on. */
  readonly week: readonly HomeDay[];
  /** Certificates that run out soon or have run out, with nothing sent since. */
  readonly certificates: readonly OwnCertificate[];
  readonly money: Pick<PayoutsPage, 'account' | 'heldCents' | 'waitingCents' | 'owedBackCents'>;
}

/** One of the next days, and what stands on it. */
export interface HomeDay {
  readonly day: Day;
  /** Open: a working day, far enough ahead for the notice the sawyer needs, with nothing on it. */
  readonly standing: 'booked' | 'off' | 'offered' | 'open' | 'too soon' | 'not worked';
  readonly bookings: readonly HomeBooking[];
  readonly offered: readonly { readonly listing: number; readonly title: string; readonly town: string }[];
}

/** How long after settling a review is still asked for, in days. */
const REVIEW_ASKED_DAYS = 30;

const goingOn = (sawyerId: string, at: Date): Promise<HomeBooking[]> =>
  rows<HomeBooking>(
    `SELECT booking.number, booking.status, coalesce(listing.title, '') AS title, concat_ws(', ', listing.town, listing.state) AS town, landowner.name AS "otherName",
       booking.starts_at AS "startsAt", booking.pay_by AS "payBy", booking.sign_by AS "signBy", booking.time_zone AS "timeZone",
       (SELECT CASE WHEN proposed_by = $1 THEN 'mine' ELSE 'theirs' END FROM day_proposal WHERE booking_id = booking.id AND status = 'open') AS proposal,
       ARRAY(SELECT day::text FROM booked_day WHERE booking_id = booking.id AND active ORDER BY day) AS days
     FROM booking JOIN listing ON listing.id = booking.listing_id JOIN account landowner ON landowner.id = booking.landowner_id
     WHERE booking.sawyer_id = $1 AND (booking.status NOT IN ('settled', 'lapsed', 'cancelled')
       OR (booking.status = 'settled' AND booking.updated_at > $2 AND NOT EXISTS (SELECT 1 FROM review WHERE review.booking_id = booking.id AND review.author_id = $1)))
     ORDER BY booking.starts_at NULLS FIRST, booking.updated_at DESC LIMIT 200`,
    [sawyerId, new Date(at.getTime() - REVIEW_ASKED_DAYS * 86_400_000)],
  );

/**
 * All that waits for a sawyer, and the week ahead. Leans on `booking_of_sawyer` and `bid_of_sawyer`.
 * @throws Refusal when the viewer is no sawyer
 */
export async function sawyerHome(viewer: Viewer | null, at: Date): Promise<SawyerHome> {
  authorize(viewer, 'sawyer', 'keepProfile', baseRoles(viewer));
  const setUp = await setUpOf(viewer.id);
  const today = dayAt(at, setUp.profile?.timeZone ?? 'UTC');
  const toConfirm = await rows<SawyerHome['toConfirm'][number]>(
    `SELECT l.number AS listing, coalesce(l.title, '') AS title, concat_ws(', ', l.town, l.state) AS town FROM bid b JOIN listing l ON l.id = b.listing_id WHERE b.sawyer_id = $1 AND b.status = 'toConfirm' ORDER BY b.updated_at`,
    [viewer.id],
  );
  const [open] = await rows<{ count: number }>(`SELECT count(*)::int AS count FROM bid WHERE sawyer_id = $1 AND status = 'open'`, [viewer.id]);
  const bookings = await goingOn(viewer.id, at);
  const last = addDays(today, 6);
  const offered = await offeredIn(viewer.id, today, last);
  const off = await daysOffFrom(viewer.id, today);
  const workingDays: readonly number[] = setUp.profile?.workingDays ?? [];
  const noticeDays = setUp.profile?.noticeDays ?? 0;
  const week = Array.from({ length: 7 }, (_, ahead): HomeDay => {
    const day = addDays(today, ahead);
    const here = bookings.filter(({ days }) => days.includes(day));
    const offers = offered.filter((one) => one.day === day);
    const standing = here.length > 0 ? 'booked' : off.has(day) ? 'off' : offers.length > 0 ? 'offered' : !workingDays.includes(weekdayOf(day)) ? 'not worked' : ahead < noticeDays ? 'too soon' : 'open';
    return { day, standing, bookings: here, offered: offers };
  });
  const { certificates } = await certificatePage(viewer, at);
  const { account, heldCents, waitingCents, owedBackCents } = await payoutsPage(viewer);
  return { setUp, today, toConfirm, openBids: open?.count ?? 0, bookings, week, certificates: certificates.filter(({ standing, waits }) => (standing === 'soon' || standing === 'expired') && waits === null), money: { account, heldCents, waitingCents, owedBackCents } };
}
