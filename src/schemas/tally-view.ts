import type { BookingState } from '~/domain/states/booking.ts';
import type { ClockActivity, ClockCorrection } from '~/domain/trade/clock.ts';
import type { Allowance } from '~/domain/trade/day-job.ts';
import type { BidOfDay } from '~/domain/trade/day-estimate.ts';
import type { MillLimits } from '~/domain/trade/mill-fit.ts';
import type { BidTerms } from '~/domain/trade/rate-card.ts';
import type { TallyExtras } from '~/domain/trade/tally-count.ts';
import type { TallyLog } from './tally-log.ts';

export interface TallyBoardView {
  readonly id: string;
  readonly logId: string | null;
  readonly kind: 'board' | 'slab' | 'out-of-size';
  readonly thicknessIn: number;
  readonly widthIn: number;
  readonly secondWidthIn: number | null;
  readonly lengthFt: number;
  readonly count: number;
}

export interface TallyQueryView {
  readonly id: string;
  readonly line: string;
  readonly lineId: string | null;
  /** What the landowner says of it; empty when the sawyer entered it after the tally was queried, so that nobody has read it yet. */
  readonly says: string;
  readonly answer: string | null;
  readonly decision: { readonly kind: 'stands' | 'struck' | 'count'; readonly count?: number } | null;
  readonly because: string | null;
}

/** A booking's tally as its two sides read it. */
export interface TallyView {
  readonly booking: number;
  readonly status: BookingState;
  readonly revision: number;
  readonly terms: BidTerms;
  readonly heldCents: number;
  readonly feeBasisPoints: number;
  readonly logs: readonly TallyLog[];
  readonly cutList: readonly { readonly label: string; readonly thicknessIn: number; readonly widthIn: number; readonly lengthFt: number; readonly count: number }[];
  readonly boards: readonly TallyBoardView[];
  readonly hits: readonly { readonly id: string; readonly logId: string | null; readonly outcome: 're-sharpened' | 'destroyed'; readonly note: string }[];
  readonly culls: readonly { readonly id: string; readonly logId: string | null; readonly reason: string; readonly openingMinutes: number; readonly passes: number }[];
  readonly clock: readonly { readonly id: string; readonly activity: ClockActivity; readonly startsAt: string; readonly endsAt: string; readonly corrections?: readonly ClockCorrection[] | undefined }[];
  readonly extras: TallyExtras;
  readonly metalAllowed: number;
  readonly allowances: readonly (Allowance & { readonly name: string })[];
  /** What was signed for part of the work: these lines stand. */
  readonly parts: readonly { readonly id: string; readonly name: string; readonly lineIds: readonly string[]; readonly costCents: number | null }[];
  /** Photographs of the day that have arrived. */
  readonly photos: readonly { readonly id: string; readonly shows: 'metal' | 'boards'; readonly hitId: string | null }[];
  readonly mill: MillLimits | null;
  /** What the bid froze of its estimate; null where there is none to go by. */
  readonly bid: BidOfDay | null;
  readonly endedBySawyer: boolean;
  readonly queries: readonly TallyQueryView[];
}
