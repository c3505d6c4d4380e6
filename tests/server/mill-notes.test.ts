import { randomUUID } from 'node:crypto';
import { beforeAll, describe, expect, it } from 'vitest';
import { bidMill } from '~/server/bid-work.ts';
import { learnFromJob } from '~/server/commands/learn-from-job.ts';
import { letMillLearn } from '~/server/commands/save-mill.ts';
import { takeEntries } from '~/server/commands/take-entries.ts';
import { execute, inTransaction } from '~/server/db.ts';
import { Bid, Booking, Mill, Tally } from '~/server/models/index.ts';
import { millNotes, noteOfJob } from '~/server/queries/mill-notes.ts';
import { makeCast, type Cast } from '../support/cast.ts';
import { makeAgreedBooking } from '../support/money-market.ts';

let cast: Cast;
const at = new Date('2026-08-05T18:00:00Z');
const jobs: Booking[] = [];

/** A settled job: 4/4 × 12 × 10 ft boards (10 bf each) sawn in these hours, where the plan said this much. */
async function settledJob(plannedBf: number, boards: number, hours: number): Promise<Booking> {
  const booking = await makeAgreedBooking(cast.ada, cast.bram);
  // Straight to sawing, and from there to settled: how money is held and paid is another file's subject.
  await inTransaction(async () => {
    await Booking.update({ status: 'sawing' }, { where: { id: booking.id } });
    await Tally.create({ bookingId: booking.id, createdAt: at });
  });
  // One mill sawed them all.
  const mill = jobs[0] ? (await millOf(jobs[0])).id : (await millOf(booking)).id;
  await execute('UPDATE bid SET mill_id = $3, estimate = estimate || $2::jsonb WHERE id = $1', [booking.bidId, JSON.stringify({ estimate: { lumber: { best: { low: plannedBf, expected: plannedBf, high: plannedBf } } } }), mill]);
  await takeEntries(cast.bram, {
    booking: booking.number,
    entries: [
      { kind: 'board', id: randomUUID(), logId: null, boardKind: 'board', thicknessIn: 1, widthIn: 12, secondWidthIn: null, lengthFt: 10, count: boards },
      { kind: 'clock', id: randomUUID(), activity: 'sawing', startsAt: '2026-08-05T13:00:00Z', endsAt: new Date(Date.parse('2026-08-05T13:00:00Z') + hours * 3_600_000).toISOString() },
      // The sawyer's own breakdown is not sawing.
      { kind: 'clock', id: randomUUID(), activity: 'breakdown', startsAt: '2026-08-06T13:00:00Z', endsAt: '2026-08-06T15:00:00Z' },
    ],
  }, at);
  await Booking.update({ status: 'settled' }, { where: { id: booking.id } });
  await learnFromJob(booking.id);
  return booking;
}
const millOf = async (booking: Booking): Promise<Mill> => {
  const bid = await Bid.findByPk(booking.bidId, { rejectOnEmpty: true });
  return Mill.findByPk(bid.millId, { rejectOnEmpty: true });
};

beforeAll(async () => {
  cast = await makeCast();
});

describe('notes for the next time', () => {
  it('feed the mill’s own estimates from the second job on', async () => {
    jobs.push(await settledJob(1000, 90, 5));
    const first = await millOf(jobs[0]!);
    const typed = first.paceBfPerHour;
    expect(bidMill(first)).toMatchObject({ realisedYield: 0.85, paceBfPerHour: typed });

    jobs.push(await settledJob(500, 45, 2.5));
    const mill = await millOf(jobs[1]!);
    const notes = await millNotes(mill);
    const planned = notes.jobs.reduce((sum, job) => sum + job.plannedBf, 0);
    const tallied = notes.jobs.reduce((sum, job) => sum + job.talliedBf, 0);
    expect(notes.jobs.map(({ talliedBf, paceBfPerHour, leftOut }) => [talliedBf, paceBfPerHour, leftOut])).toEqual([[450, 180, null], [900, 180, null]]);
    // (0.85 × 1,500 + 1,350) / (1,500 + 1,500) = 0.875; (typed × 10 + 1,350) / (10 + 7.5).
    expect([planned, tallied]).toEqual([1500, 1350]);
    expect(bidMill(mill).realisedYield).toBeCloseTo(0.875, 6);
    expect(bidMill(mill).paceBfPerHour).toBe(Math.round((typed * 10 + 1350) / 17.5));
  });

  it('can be switched off and on again, by their sawyer alone', async () => {
    const mill = await millOf(jobs[1]!);
    await expect(letMillLearn(cast.cleo, mill.id, false, at)).rejects.toMatchObject({ kind: 'notFound' });
    await letMillLearn(cast.bram, mill.id, false, at);
    expect(bidMill(await mill.reload())).toMatchObject({ realisedYield: 0.85, paceBfPerHour: mill.paceBfPerHour });
    await letMillLearn(cast.bram, mill.id, true, at);
    expect(bidMill(await mill.reload()).realisedYield).toBeCloseTo(0.875, 6);
  });

  it('are told to the sawyer alone', async () => {
    const { number } = jobs[0]!;
    expect(await noteOfJob(cast.bram.id, number)).toMatchObject({ talliedBf: 900, paceBfPerHour: 180 });
    for (const other of [cast.ada, cast.cleo, cast.mo]) expect(await noteOfJob(other.id, number)).toBeNull();
  });
});
