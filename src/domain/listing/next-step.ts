import { paths } from '../paths.ts';
import type { ListingState } from '../states/listing.ts';
import { formatDay, formatInstant, dayAt } from '../time.ts';

interface Standing {
  readonly number: number;
  readonly status: ListingState;
  readonly closesAt: Date | null;
  readonly lapsesAt: Date | null;
  readonly timeZone: string | null;
  readonly isHidden: boolean;
  readonly openBids: number;
  readonly toConfirm: number;
  readonly booking: number | null;
}

export interface NextStep {
  readonly words: string;
  /** What to press; absent when there is nothing to do but wait. */
  readonly action?: { readonly label: string; readonly href: string };
}

const bidsSaid = (count: number): string => (count === 1 ? '1 bid' : `${count} bids`);

/** How a listing of one's own stands, and the one thing to do next. */
export function nextStep(listing: Standing): NextStep {
  const zone = listing.timeZone ?? 'UTC';
  const waiting = listing.toConfirm === 0 ? '' : ` ${bidsSaid(listing.toConfirm)} to be confirmed by the sawyer.`;
  const compare = { label: `Compare ${bidsSaid(listing.openBids)}`, href: paths.listingBids(listing.number) };
  const again = { label: 'List these logs again', href: paths.listAgain(listing.number) };
  if (listing.isHidden) return { words: 'A moderator has taken it off show.', action: { label: 'See why', href: paths.listing(listing.number) } };
  switch (listing.status) {
    case 'draft':
      return { words: 'Not on show yet.', action: { label: 'Go on and publish', href: paths.editListing(listing.number) } };
    case 'open': {
      const until = listing.closesAt ? `Open until ${formatDay(dayAt(new Date(listing.closesAt.getTime() - 1), zone))}.` : '';
      return listing.openBids === 0 ? { words: `No bids to choose from yet.${waiting} ${until}` } : { words: `${until}${waiting}`, action: compare };
    }
    case 'closed': {
      const by = listing.lapsesAt ? formatInstant(listing.lapsesAt, zone) : '';
      return listing.openBids === 0 ? { words: `Nobody has bid. It lapses on ${by}.${waiting}` } : { words: `Choose by ${by}.${waiting}`, action: compare };
    }
    case 'matched':
      return listing.booking === null ? { words: 'A bid is chosen.' } : { words: 'A bid is chosen.', action: { label: 'Go to the booking', href: paths.booking(listing.booking) } };
    case 'done':
      return listing.booking === null ? { words: 'Sawn and settled.' } : { words: 'Sawn and settled.', action: { label: 'See the booking', href: paths.booking(listing.booking) } };
    case 'withdrawn':
      return { words: 'You took it back.', action: again };
    case 'lapsed':
      return { words: 'Nobody was chosen in time.', action: again };
  }
}
