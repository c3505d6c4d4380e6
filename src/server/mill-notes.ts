import { type JobNote, learn, leftOut, MOST_JOBS, paceOf } from '~/domain/trade/mill-notes.ts';
import { minutesOf, type ClockActivity } from '~/domain/trade/clock.ts';
import { rows } from './db.ts';
import { Mill } from './models/sawyer.ts';

interface Row {
  number: number;
  title: string | null;
  signedAt: Date | null;
  plannedBf: number | null;
  talliedBf: number;
  clock: { activity: ClockActivity; startsAt: string; endsAt: string }[];
  endedEarly: boolean;
  otherLogs: boolean;
}

/** A settled job as it stands in a mill's notes. */
export interface NotedJob extends JobNote {
  readonly number: number;
  readonly title: string;
  readonly signedAt: Date | null;
  readonly paceBfPerHour: number | null;
  /** Why it does not count for the yield; null when it does. */
  readonly leftOut: string | null;
}

/** The latest settled jobs of a mill, newest first. Leans on `booking`'s index by sawyer. */
export async function jobsOfMill(mill: { readonly id: string; readonly sawyerId: string }): Promise<NotedJob[]> {
  const found = await rows<Row>(
    `SELECT booking.number, listing.title, tally.signed_at AS "signedAt", (bid.estimate->'estimate'->'lumber'->'best'->>'expected')::float8 AS "plannedBf",
       coalesce((SELECT sum(thickness_in * width_in * length_ft / 12 * count) FROM tally_board WHERE tally_id = tally.id AND kind = 'board' AND removed_at IS NULL), 0) AS "talliedBf",
       tally.clock, tally.ended_by_sawyer AS "endedEarly",
       EXISTS (SELECT 1 FROM cull_log WHERE tally_id = tally.id AND removed_at IS NULL) OR EXISTS (SELECT 1 FROM log WHERE log.listing_id = listing.id AND log.added_on_the_day) AS "otherLogs"
     FROM booking JOIN bid ON bid.id = booking.bid_id JOIN listing ON listing.id = booking.listing_id JOIN tally ON tally.booking_id = booking.id AND tally.part = 1
     WHERE booking.sawyer_id = $1 AND bid.mill_id = $2 AND booking.status = 'settled' ORDER BY tally.signed_at DESC NULLS LAST, booking.number DESC LIMIT ${MOST_JOBS}`,
    [mill.sawyerId, mill.id],
  );
  return found.map(({ number, title, signedAt, plannedBf, talliedBf, clock, endedEarly, otherLogs }) => {
    const sawingMinutes = minutesOf(clock.map(({ activity, startsAt, endsAt }) => ({ activity, startsAt: new Date(startsAt), endsAt: new Date(endsAt) })), 'sawing');
    const note: JobNote = { plannedBf: plannedBf ?? 0, talliedBf, sawingMinutes, endedEarly, otherLogs };
    return { ...note, number, title: title ?? '', signedAt, paceBfPerHour: paceOf(note), leftOut: leftOut(note) };
  });
}

/** Works a mill's pace and yield out anew from its settled jobs. Done again it changes nothing. */
export async function learnOfMill(mill: Mill): Promise<void> {
  const learned = learn(await jobsOfMill(mill), mill.paceBfPerHour);
  await mill.update({ realisedYield: learned.yieldShare, yieldJobs: learned.yieldJobs, learnedPace: learned.paceBfPerHour, paceJobs: learned.paceJobs });
}
