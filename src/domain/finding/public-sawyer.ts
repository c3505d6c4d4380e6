import type { MillKind } from '../trade/mill-fit.ts';
import type { RateCard } from '../trade/rate-card.ts';

export interface PublicMill {
  readonly name: string;
  readonly kind: MillKind;
  readonly kerfIn: number;
  readonly largestLogIn: number;
  readonly widestCutIn: number;
  readonly widestBoardIn: number;
  readonly longestFt: number;
  readonly shortestFt: number;
  readonly turnsLogsBy: 'machine' | 'hand';
}

/** What anyone may know of a sawyer. The base is on the coarse grid and is given as a town and a distance only. */
export interface PublicSawyer {
  readonly id: string;
  readonly name: string;
  readonly town: string;
  readonly state: string;
  readonly distanceMi: number | null;
  readonly travelMiles: number;
  readonly mills: readonly PublicMill[];
  readonly card: RateCard;
  readonly settledJobs: number;
  readonly reviewCount: number;
  readonly meanStars: number | null;
  /** A moderator looked at a certificate that is valid until this day. */
  readonly certificateExpiresOn: string | null;
}
