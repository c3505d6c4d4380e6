import type { BookingState } from '~/domain/states/booking.ts';
import type { Said } from '~/domain/listing/page-words.ts';
import type { Day } from '~/domain/time.ts';
import type { TallyView } from './tally-view.ts';

/** A booking as a phone keeps it for the milling day: all that the field asks for, so that nothing is looked up there. */
export interface DayBooking {
  readonly number: number;
  readonly title: string;
  readonly side: 'landowner' | 'sawyer';
  readonly status: BookingState;
  readonly otherName: string;
  readonly otherEmail: string;
  readonly town: string;
  /** The exact place with the way to it; null until the reader may see it. */
  readonly place: { readonly lat: number; readonly lng: number; readonly directions: string } | null;
  readonly days: readonly Day[];
  readonly startsAt: string | null;
  readonly timeZone: string;
  readonly tree: readonly Said[];
  readonly access: readonly Said[];
  readonly landing: readonly Said[];
  readonly note: string;
  /** What this side has ready the evening before. */
  readonly ready: readonly string[];
  /** Tells whether the cut sheet that the phone keeps is still the plan. */
  readonly sheetKey: string;
  /** The landowner's own: by it they sign on the sawyer's phone. Null for the sawyer. */
  readonly signingCode: string | null;
  readonly tally: TallyView;
}

/** What `GET /api/day` answers and the phone keeps. `at` is the server's clock, by which a wrong clock of the phone is noticed. */
export interface DayPack {
  readonly account: { readonly id: string; readonly name: string };
  readonly at: string;
  readonly bookings: readonly DayBooking[];
}
