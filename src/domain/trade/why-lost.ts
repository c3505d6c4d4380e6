import type { Cents } from '../money.ts';
import type { BidState } from '../states/bid.ts';
import type { Day } from '../time.ts';

/** What is known of a bid that did not become a job. */
export interface BidOutcome {
  readonly status: BidState;
  readonly listingStatus: string;
  readonly expectedCents: Cents;
  readonly daysOffered: readonly Day[];
  /** The bid that was chosen instead; null when none was. Only compared, never shown. */
  readonly chosen: { readonly expectedCents: Cents; readonly daysOffered: readonly Day[] } | null;
  /** How the booking that followed this bid ended; null without one. */
  readonly bookingStatus: string | null;
}

const first = (days: readonly Day[]): Day => [...days].sort()[0] ?? '9999-12-31';

/**
 * Why a bid is over, in words for its sawyer; null while it is live. Of the chosen bid only "lower" and "sooner" are told,
 * never a figure: what others bid is theirs.
 */
export function whyLost(bid: BidOutcome): string | null {
  switch (bid.status) {
    case 'declined': {
      if (bid.chosen === null) return 'Not chosen.';
      const lower = bid.chosen.expectedCents < bid.expectedCents;
      const sooner = first(bid.chosen.daysOffered) < first(bid.daysOffered);
      if (lower && sooner) return 'The chosen bid was lower and could come sooner.';
      if (lower) return 'The chosen bid was lower.';
      if (sooner) return 'The chosen bid could come sooner.';
      return 'Chosen for another reason than price or day.';
    }
    case 'withdrawn':
      return 'You withdrew it.';
    case 'lapsed':
      return bid.listingStatus === 'withdrawn' ? 'The landowner withdrew the listing.' : 'Nobody was chosen in time.';
    case 'released':
      return bid.bookingStatus === 'lapsed' ? 'Chosen, but the hold was not paid in time.' : 'Chosen, but the booking was cancelled.';
    default:
      return null;
  }
}
