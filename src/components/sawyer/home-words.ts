import { certificateNames } from '~/domain/certificate.ts';
import { paths } from '~/domain/paths.ts';
import { dayAt, formatDayWithYear, formatInstant } from '~/domain/time.ts';
import type { HomeBooking, SawyerHome } from '~/server/queries/sawyer-home.ts';

/** One line of a sawyer's home: what it is about, how it stands, and what to press. */
export interface HomeLine {
  readonly key: string;
  readonly title: string;
  readonly about: string;
  readonly words: string;
  readonly action: { readonly label: string; readonly href: string };
  /** Whether the sawyer is the one who has to do something. */
  readonly mine: boolean;
}

const when = (booking: HomeBooking, instant: Date | null): string => (instant ? formatInstant(instant, booking.timeZone) : 'the agreed day');

/** How a booking stands for its sawyer, and the one thing to do. */
function standing(booking: HomeBooking, at: Date): Pick<HomeLine, 'words' | 'mine'> & { readonly label: string; readonly href?: string } {
  switch (booking.status) {
    case 'proposed':
      if (booking.proposal === 'theirs') return { mine: true, words: 'A day is proposed and waits for your answer.', label: 'Answer' };
      if (booking.proposal === 'mine') return { mine: false, words: 'You proposed a day; it waits for an answer.', label: 'See the booking' };
      return { mine: true, words: 'Your bid was chosen. Agree on a day.', label: 'Propose a day' };
    case 'agreed':
      if (booking.proposal === 'theirs') return { mine: true, words: 'Another day is proposed and waits for your answer.', label: 'Answer' };
      return { mine: false, words: `The hold is to be paid by ${when(booking, booking.payBy)}. Do not set out before it is.`, label: 'See the booking' };
    case 'held': {
      if (booking.proposal === 'theirs') return { mine: true, words: 'Another day is proposed and waits for your answer.', label: 'Answer' };
      const begun = booking.startsAt !== null && dayAt(booking.startsAt, booking.timeZone) <= dayAt(at, booking.timeZone);
      if (begun) return { mine: true, words: 'The milling day is here.', label: 'Open the tally', href: paths.tally(booking.number) };
      return { mine: false, words: `Set for ${when(booking, booking.startsAt)}. The money is held.`, label: 'See the booking' };
    }
    case 'sawing':
      return { mine: true, words: 'Sawing. Offer the tally for signing when the boards are counted.', label: 'Open the tally', href: paths.tally(booking.number) };
    case 'tallied':
      return { mine: false, words: `The tally waits to be signed. It counts as signed at ${when(booking, booking.signBy)}, up to the hold.`, label: 'See the booking' };
    case 'queried':
      return { mine: true, words: 'The tally is queried. Answer line by line.', label: 'Answer the query', href: paths.tally(booking.number) };
    case 'signed':
      return { mine: false, words: 'Signed. Your pay is released the same day.', label: 'See the booking' };
    default:
      return { mine: true, words: 'Settled. A review helps the next sawyer.', label: 'Write a review', href: paths.review(booking.number) };
  }
}

/** A sawyer's home as lines to act on: what is theirs to do first, then what waits for others. */
export function homeLines(home: SawyerHome, at: Date): readonly HomeLine[] {
  const confirm = home.toConfirm.map(({ listing, title, town }): HomeLine => ({
    key: `bid-${listing}`, title, about: town, mine: true, words: 'The listing changed. Your bid has to be confirmed before it can be chosen.', action: { label: 'Look and confirm', href: paths.bidOn(listing) },
  }));
  const booked = home.bookings.map((booking): HomeLine => {
    const { mine, words, label, href } = standing(booking, at);
    return { key: `booking-${booking.number}`, title: booking.title, about: `${booking.otherName} · ${booking.town}`, mine, words, action: { label, href: href ?? paths.booking(booking.number) } };
  });
  const payouts: readonly HomeLine[] =
    home.money.account !== 'ready' && home.bookings.length > 0
      ? [{ key: 'payouts', title: 'Payout account', about: '', mine: true, words: 'Your pay waits until the payment provider knows your bank.', action: { label: home.money.account === 'none' ? 'Set up payouts' : 'Go on setting up', href: paths.payouts } }]
      : [];
  const papers = home.certificates.map(({ kind, seenUntil, standing }): HomeLine => ({
    key: `certificate-${kind}`, title: certificateNames[kind].replace(/^./, (letter) => letter.toUpperCase()), about: '', mine: true,
    words: standing === 'expired' ? `It expired on ${formatDayWithYear(seenUntil ?? '')}. Landowners no longer read that one was seen.` : `It expires on ${formatDayWithYear(seenUntil ?? '')}. Send the next one before that day.`,
    action: { label: 'Send the next one', href: paths.certificateOf(kind) },
  }));
  const lines = [...payouts, ...confirm, ...booked, ...papers];
  return [...lines.filter(({ mine }) => mine), ...lines.filter(({ mine }) => !mine)];
}
