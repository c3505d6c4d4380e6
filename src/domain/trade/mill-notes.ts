import { FIRST_YIELD } from '../sawing/expected.ts';

/** What one settled job says of the mill that sawed it. */
export interface JobNote {
  /** The sawing plan's best on the logs as listed, board feet. */
  readonly plannedBf: number;
  /** Boards of the signed tally, board feet of nominal size. */
  readonly talliedBf: number;
  /** Sawing on the clock, minutes; 0 when no hours were entered. */
  readonly sawingMinutes: number;
  /** The sawyer left early or broke down. */
  readonly endedEarly: boolean;
  /** A log was culled, or one was added that no plan knew. */
  readonly otherLogs: boolean;
}

/** Jobs that count before a mill's own record is used at all. */
export const FEWEST_JOBS = 2;
/** The latest jobs alone are looked at: a mill changes. */
export const MOST_JOBS = 12;
/** The first figures weigh as much as this much sawing: about two days of an ordinary mill. One odd job so moves little. */
export const FIRST_WEIGHT_BF = 1500;
export const FIRST_WEIGHT_HOURS = 10;
/** A job says nothing below this plan; nor outside these shares of it, where something else happened than sawing the logs as listed. */
const SMALLEST_PLAN_BF = 50;
const SHARES = { least: 0.4, most: 1.3 } as const;
/** From these minutes on a clock says something about a pace. */
const FEWEST_MINUTES = 30;

/** Why a job does not count for the yield, in words; null when it counts. The limits are ours, no source. */
export function leftOut(job: JobNote): string | null {
  if (job.plannedBf < SMALLEST_PLAN_BF) return 'too little was planned';
  if (job.endedEarly) return 'the work ended early';
  if (job.otherLogs) return 'a log was culled or added';
  const share = job.talliedBf / job.plannedBf;
  return share < SHARES.least || share > SHARES.most ? 'the tally is too far from the plan to be about the mill' : null;
}

/** Board feet tallied per hour of sawing on the clock; null when no hours were entered that say anything. */
export const paceOf = (job: JobNote): number | null => (job.sawingMinutes >= FEWEST_MINUTES && job.talliedBf > 0 ? job.talliedBf / (job.sawingMinutes / 60) : null);

export interface Learned {
  /** Tallied over planned, to be used for estimates. */
  readonly yieldShare: number;
  readonly yieldJobs: number;
  /** Board feet an hour, to be used for estimates. */
  readonly paceBfPerHour: number;
  readonly paceJobs: number;
}

/**
 * A mill's yield and pace from its own jobs, drawn toward the first figures: what was tallied and planned is added up with
 * `FIRST_WEIGHT_BF` planned at 0.85, what was sawn and the hours with `FIRST_WEIGHT_HOURS` at the pace the sawyer typed. With fewer than
 * `FEWEST_JOBS` that count, the first figure stands. (Shrinkage by a fixed weight; the weights are ours, no source.)
 * @param jobs newest first
 */
export function learn(jobs: readonly JobNote[], typedPaceBfPerHour: number): Learned {
  const latest = jobs.slice(0, MOST_JOBS);
  const counted = latest.filter((job) => leftOut(job) === null);
  const timed = latest.filter((job) => paceOf(job) !== null);
  const sum = (of: readonly JobNote[], figure: (job: JobNote) => number): number => of.reduce((total, job) => total + figure(job), 0);
  const yieldShare = counted.length < FEWEST_JOBS ? FIRST_YIELD : (FIRST_YIELD * FIRST_WEIGHT_BF + sum(counted, ({ talliedBf }) => talliedBf)) / (FIRST_WEIGHT_BF + sum(counted, ({ plannedBf }) => plannedBf));
  const pace = timed.length < FEWEST_JOBS ? typedPaceBfPerHour : (typedPaceBfPerHour * FIRST_WEIGHT_HOURS + sum(timed, ({ talliedBf }) => talliedBf)) / (FIRST_WEIGHT_HOURS + sum(timed, ({ sawingMinutes }) => sawingMinutes / 60));
  return { yieldShare, yieldJobs: counted.length, paceBfPerHour: Math.max(1, Math.round(pace)), paceJobs: timed.length };
}
