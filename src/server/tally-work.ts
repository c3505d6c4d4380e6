import { createHash } from 'node:crypto';
import { Op } from 'sequelize';
import { logToCharge } from '~/domain/trade/bid-estimate.ts';
import type { ClockActivity, ClockCorrection } from '~/domain/trade/clock.ts';
import { jobOf, limitOf } from '~/domain/trade/day-job.ts';
import { asLogInput, chargedMeasures, type DayLog } from '~/domain/trade/day-logs.ts';
import type { MillLimits } from '~/domain/trade/mill-fit.ts';
import type { WorkQuantities } from '~/domain/trade/price.ts';
import type { BidTerms } from '~/domain/trade/rate-card.ts';
import { settle, type Settlement } from '~/domain/trade/settlement.ts';
import { tallyContent } from '~/domain/trade/tally-content.ts';
import { countTally, NO_EXTRAS, type JobTally, type TallyExtras } from '~/domain/trade/tally-count.ts';
import { dayLogs, frozenMill } from './day-logs.ts';
import { oneRow } from './db.ts';
import { env } from './env.ts';
import { Bid, type Booking, CullLog, DayAllowance, Log, MetalHit, Tally, TallyBoard, TallyPart } from './models/index.ts';
import type { FrozenEstimate } from './bid-work.ts';
import { withShare } from './trip-share.ts';

/** A clock entry as it is kept. */
export interface KeptClock {
  readonly id: string;
  readonly activity: ClockActivity;
  readonly startsAt: string;
  readonly endsAt: string;
  readonly corrections?: readonly ClockCorrection[] | undefined;
}

/** Everything of a booking's tally, as kept and as counted by the frozen terms. */
export interface TallyWork {
  readonly tally: Tally;
  readonly boards: readonly TallyBoard[];
  readonly hits: readonly MetalHit[];
  readonly culls: readonly CullLog[];
  readonly clock: readonly KeptClock[];
  readonly logs: readonly Log[];
  readonly onTheDay: readonly DayLog[];
  readonly mill: MillLimits | null;
  readonly allowances: readonly DayAllowance[];
  readonly parts: readonly TallyPart[];
  readonly terms: BidTerms;
  readonly job: JobTally;
  readonly work: WorkQuantities;
  readonly heldCents: number;
  /** What is held, or what the landowner has signed for on the day when that is more. */
  readonly limitCents: number;
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
  return withShare(booking.id, (bid.estimate as FrozenEstimate).terms);
}

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
  const mill = await frozenMill(booking);
  const onTheDay = await dayLogs(booking, logs);
  const allowances = await DayAllowance.findAll({ where: { bookingId: booking.id }, order: [['enteredAt', 'ASC'], ['id', 'ASC']] });
  const parts = await TallyPart.findAll({ where: { tallyId: tally.id }, order: [['signedAt', 'ASC']] });
  const job = jobOf({ boards, hits, culls, clock, logs: onTheDay, allowances, extras: { ...NO_EXTRAS, wasteDone: terms.waste, ...(tally.extras as Partial<TallyExtras>) } });
  const charged = onTheDay.map((log) => ({ id: log.id, ...chargedMeasures(log, mill) }));
  const work = countTally(terms, job, onTheDay.map((log) => logToCharge({ id: log.id, ...asLogInput(log, chargedMeasures(log, mill)) })));
  const heldCents = await heldCentsOf(booking.id);
  const settlement = settle(terms, work, { heldCents, feeBasisPoints: env().FEE_BASIS_POINTS }, { endedBySawyer: tally.endedBySawyer });
  const content = tallyContent({ booking: booking.number, boards, hits, culls, clock, extras: job.extras, logs: charged, endedBySawyer: tally.endedBySawyer });
  const sha256 = createHash('sha256').update(content).digest('hex');
  return { tally, boards, hits, culls, clock, logs, onTheDay, mill, allowances, parts, terms, job, work, heldCents, limitCents: limitOf(heldCents, allowances), settlement, sha256 };
}
