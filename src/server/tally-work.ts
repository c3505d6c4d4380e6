import { createHash } from 'node:crypto';
import { Op } from 'sequelize';
import { canonicalJson } from '~/domain/trade/agreement.ts';
import { logToCharge } from '~/domain/trade/bid-estimate.ts';
import type { ClockActivity } from '~/domain/trade/clock.ts';
import type { WorkQuantities } from '~/domain/trade/price.ts';
import type { BidTerms } from '~/domain/trade/rate-card.ts';
import { settle, type Settlement } from '~/domain/trade/settlement.ts';
import { countTally, NO_EXTRAS, type JobTally, type TallyExtras } from '~/domain/trade/tally-count.ts';
import type { Defect } from '~/domain/timber/defects.ts';
import { oneRow } from './db.ts';
import { env } from './env.ts';
import { Bid, type Booking, CullLog, Log, MetalHit, Tally, TallyBoard } from './models/index.ts';
import type { FrozenEstimate } from './bid-work.ts';

/** A clock entry as it is kept. */
export interface KeptClock {
  readonly id: string;
  readonly activity: ClockActivity;
  readonly startsAt: string;
  readonly endsAt: string;
}

/** Everything of a booking's tally, as kept and as counted by the frozen terms. */
export interface TallyWork {
  readonly tally: Tally;
  readonly boards: readonly TallyBoard[];
  readonly hits: readonly MetalHit[];
  readonly culls: readonly CullLog[];
  readonly clock: readonly KeptClock[];
  readonly logs: readonly Log[];
  readonly terms: BidTerms;
  readonly job: JobTally;
  readonly work: WorkQuantities;
  readonly heldCents: number;
  readonly settlement: Settlement;
  /** Binds a signature to what was read: any later change gives another one. */
  readonly sha256: string;
}

/** What was held for a booking: all that was charged for it, less what came when it was no longer due and went back. */
export async function heldCentsOf(bookingId: string): Promise<number> {
  const row = await oneRow<{ cents: number }>(
    `SELECT coalesce(sum(charge.amount_cents), 0)::int AS cents FROM charge JOIN held_payment ON held_payment.id = charge.payment_id
     WHERE held_payment.booking_id = $1 AND charge.returned_because IS NULL`,
    [bookingId],
  );
  return row?.cents ?? 0;
}

/** The terms that a booking froze when its bid was chosen. */
export async function frozenTerms(booking: Booking): Promise<BidTerms> {
  const bid = await Bid.findByPk(booking.bidId, { rejectOnEmpty: true });
  return (bid.estimate as FrozenEstimate).terms;
}

const chargeable = (log: Log) =>
  logToCharge({ id: log.id, species: log.species, smallEndIn: log.smallEndIn, lengthFt: log.lengthFt, ...(log.largeEndIn === null ? {} : { largeEndIn: log.largeEndIn }), defects: log.defects as Defect[] });

/** The logs of the job: as listed, and those added on the day. */
export const jobLogs = (booking: Booking): Promise<Log[]> =>
  Log.findAll({ where: { listingId: booking.listingId, [Op.or]: [{ removedAt: null }, { addedOnTheDay: true }] }, order: [['position', 'ASC']] });

/** Reads the tally of a booking and counts it. @returns null while none has been begun */
export async function tallyWork(booking: Booking): Promise<TallyWork | null> {
  const tally = await Tally.findOne({ where: { bookingId: booking.id, part: 1 } });
  if (!tally) return null;
  const standing = { where: { tallyId: tally.id, removedAt: null } } as const;
  const boards = await TallyBoard.findAll({ ...standing, order: [['sequence', 'ASC'], ['id', 'ASC']] });
  const hits = await MetalHit.findAll({ ...standing, order: [['enteredAt', 'ASC'], ['id', 'ASC']] });
  const culls = await CullLog.findAll({ ...standing, order: [['enteredAt', 'ASC'], ['id', 'ASC']] });
  const logs = await jobLogs(booking);
  const clock = tally.clock as KeptClock[];
  const terms = await frozenTerms(booking);
  const job: JobTally = {
    boards,
    clock: clock.map(({ activity, startsAt, endsAt }) => ({ activity, startsAt: new Date(startsAt), endsAt: new Date(endsAt) })),
    blades: hits.map(({ outcome }) => ({ blade: outcome, cause: 'metal' as const })),
    culls,
    extras: { ...NO_EXTRAS, wasteDone: terms.waste, ...(tally.extras as Partial<TallyExtras>) },
  };
  const work = countTally(terms, job, logs.map(chargeable));
  const heldCents = await heldCentsOf(booking.id);
  const settlement = settle(terms, work, { heldCents, feeBasisPoints: env().FEE_BASIS_POINTS }, { endedBySawyer: tally.endedBySawyer });
  return { tally, boards, hits, culls, clock, logs, terms, job, work, heldCents, settlement, sha256: contentHash(booking, boards, hits, culls, clock, job.extras) };
}

function contentHash(booking: Booking, boards: readonly TallyBoard[], hits: readonly MetalHit[], culls: readonly CullLog[], clock: readonly KeptClock[], extras: TallyExtras): string {
  const content = {
    booking: booking.number,
    boards: boards.map(({ id, kind, logId, thicknessIn, widthIn, secondWidthIn, lengthFt, count }) => ({ id, kind, logId, thicknessIn, widthIn, secondWidthIn, lengthFt, count })),
    hits: hits.map(({ id, outcome, logId }) => ({ id, outcome, logId })),
    culls: culls.map(({ id, logId, openingMinutes, passes }) => ({ id, logId, openingMinutes, passes })),
    clock,
    extras,
  };
  return createHash('sha256').update(canonicalJson(content)).digest('hex');
}
