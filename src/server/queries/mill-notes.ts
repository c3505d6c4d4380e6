import { FIRST_YIELD } from '~/domain/sawing/expected.ts';
import { jobsOfMill, type NotedJob } from '../mill-notes.ts';
import { Bid, Booking, type Mill } from '../models/index.ts';

/** What a mill's settled jobs have shown, and what its estimates go by. For its sawyer only: the caller has it from their own set-up. */
export interface MillNotes {
  readonly jobs: readonly NotedJob[];
  readonly learns: boolean;
  readonly uses: { readonly yieldShare: number; readonly paceBfPerHour: number };
  readonly yieldJobs: number;
  readonly paceJobs: number;
}

export async function millNotes(mill: Mill): Promise<MillNotes> {
  return {
    jobs: await jobsOfMill(mill),
    learns: mill.learns,
    uses: { yieldShare: mill.learns ? mill.realisedYield : FIRST_YIELD, paceBfPerHour: mill.learns ? (mill.learnedPace ?? mill.paceBfPerHour) : mill.paceBfPerHour },
    yieldJobs: mill.yieldJobs,
    paceJobs: mill.paceJobs,
  };
}

/** What one settled job says of the sawyer's mill; null for others than its sawyer, and when it is not among the mill's latest. */
export async function noteOfJob(viewerId: string, number: number): Promise<NotedJob | null> {
  const booking = await Booking.findOne({ where: { number, sawyerId: viewerId, status: 'settled' } });
  const bid = booking && (await Bid.findByPk(booking.bidId, { attributes: ['millId'] }));
  if (!booking || !bid) return null;
  return (await jobsOfMill({ id: bid.millId, sawyerId: viewerId })).find((job) => job.number === number) ?? null;
}
