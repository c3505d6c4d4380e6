import type { ClockActivity } from './clock.ts';
import { counts, type DayLog } from './day-logs.ts';
import type { CullLog, JobTally, TalliedBoard, TallyExtras } from './tally-count.ts';

/** What the landowner has allowed on the day, with their signature. */
export interface Allowance {
  readonly id: string;
  readonly what: 'metal' | 'increase' | 'larger-log' | 'added-log' | 'set-up-again';
  readonly logId: string | null;
  /** For an increase: the whole limit that they allow, not what is added to the hold. */
  readonly limitCents: number | null;
}

/** Everything entered on the job, as the phone and the server both keep it. */
export interface DayLines {
  readonly boards: readonly TalliedBoard[];
  readonly hits: readonly { readonly outcome: 're-sharpened' | 'destroyed' }[];
  readonly culls: readonly CullLog[];
  readonly clock: readonly { readonly activity: ClockActivity; readonly startsAt: string; readonly endsAt: string }[];
  readonly extras: TallyExtras;
  readonly logs: readonly Pick<DayLog, 'id' | 'added' | 'agreed'>[];
  readonly allowances: readonly Allowance[];
}

/** The extras as they are charged: logs added and further set-ups count by the landowner's word alone. */
export const chargedExtras = ({ extras, logs, allowances }: Pick<DayLines, 'extras' | 'logs' | 'allowances'>): TallyExtras => ({
  ...extras,
  addedLogIds: logs.filter(({ added, agreed }) => added && agreed).map(({ id }) => id),
  setUpsAgreedAgain: allowances.filter(({ what }) => what === 'set-up-again').length,
});

/** The job as it is counted: boards of a log that nobody has accepted wait and count nothing. */
export function jobOf(lines: DayLines): JobTally {
  const waiting = new Set(lines.logs.filter((log) => !counts(log)).map(({ id }) => id));
  return {
    boards: lines.boards.filter(({ logId }) => logId === null || !waiting.has(logId)),
    clock: lines.clock.map(({ activity, startsAt, endsAt }) => ({ activity, startsAt: new Date(startsAt), endsAt: new Date(endsAt) })),
    blades: lines.hits.map(({ outcome }) => ({ blade: outcome, cause: 'metal' })),
    culls: lines.culls,
    extras: chargedExtras(lines),
  };
}

/** How far the work may go: what is held, or what the landowner has signed for when that is more. Only what is held is certain. */
export const limitOf = (heldCents: number, allowances: readonly Allowance[]): number => Math.max(heldCents, ...allowances.map(({ limitCents }) => limitCents ?? 0));
