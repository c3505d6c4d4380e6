import { canonicalJson } from './agreement.ts';
import type { Measures } from './day-logs.ts';
import type { TallyExtras } from './tally-count.ts';

/** A tally's lines as a signature binds them. Ids are those the entries were made with. */
export interface TallyLines {
  readonly booking: number;
  readonly boards: readonly { readonly id: string; readonly kind: string; readonly logId: string | null; readonly thicknessIn: number; readonly widthIn: number; readonly secondWidthIn: number | null; readonly lengthFt: number; readonly count: number }[];
  readonly hits: readonly { readonly id: string; readonly outcome: string; readonly logId: string | null }[];
  readonly culls: readonly { readonly id: string; readonly logId: string | null; readonly openingMinutes: number; readonly passes: number }[];
  readonly clock: readonly { readonly id: string; readonly activity: string; readonly startsAt: string; readonly endsAt: string }[];
  readonly extras: TallyExtras;
  /** What each log is charged by. */
  readonly logs: readonly ({ readonly id: string } & Measures)[];
  readonly endedBySawyer: boolean;
}

const byId = <Row extends { readonly id: string }>(rows: readonly Row[]): Row[] => [...rows].sort((a, b) => (a.id < b.id ? -1 : 1));

/**
 * Everything of a tally that its money follows from, as one text: the same on the phone and on the server, so that a signature made
 * without signal is bound to what was on the screen. Boards keep their order, because the hardwood rule rounds halves by it.
 */
export function tallyContent(lines: TallyLines): string {
  return canonicalJson({
    booking: lines.booking,
    boards: lines.boards.map(({ id, kind, logId, thicknessIn, widthIn, secondWidthIn, lengthFt, count }) => ({ id, kind, logId, thicknessIn, widthIn, secondWidthIn, lengthFt, count })),
    hits: byId(lines.hits).map(({ id, outcome, logId }) => ({ id, outcome, logId })),
    culls: byId(lines.culls).map(({ id, logId, openingMinutes, passes }) => ({ id, logId, openingMinutes, passes })),
    clock: byId(lines.clock).map(({ id, activity, startsAt, endsAt }) => ({ id, activity, startsAt, endsAt })),
    extras: lines.extras,
    logs: byId(lines.logs).map(({ id, smallEndIn, largeEndIn, lengthFt }) => ({ id, smallEndIn, largeEndIn, lengthFt })),
    endedBySawyer: lines.endedBySawyer,
  });
}
