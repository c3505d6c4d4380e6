import { beforeAll, describe, expect, it } from 'vitest';
import { dryingPlanForm, moistureForm } from '~/schemas/after-forms.ts';
import { addMoistureReading, keepDryingPlan, removeMoistureReading } from '~/server/commands/keep-drying.ts';
import { takeEntries } from '~/server/commands/take-entries.ts';
import { inTransaction, rows } from '~/server/db.ts';
import { remindOfBoards } from '~/server/jobs/handlers/remind-boards.ts';
import { Booking, Tally } from '~/server/models/index.ts';
import { afterPage } from '~/server/queries/after-page.ts';
import { makeCast, type Cast } from '../support/cast.ts';
import { makeAgreedBooking } from '../support/money-market.ts';

let cast: Cast;
let number: number;
const at = new Date('2026-08-05T18:00:00Z');
const form = (change: Record<string, string> = {}) => dryingPlanForm.parse({ t8: '70', h8: '65', airSource: 'The station at the airport', targetPct: '8', stackWidthFt: '4', sawKerfIn: '1/8', pieces: '', remindOn: '', ...change });

beforeAll(async () => {
  cast = await makeCast();
  const booking = await makeAgreedBooking(cast.ada, cast.bram);
  number = booking.number;
  // Straight to sawing: how money is held is another file's subject.
  await inTransaction(async () => {
    await Booking.update({ status: 'sawing' }, { where: { id: booking.id } });
    await Tally.create({ bookingId: booking.id, createdAt: at });
  });
  await takeEntries(cast.bram, { booking: number, entries: [{ kind: 'board', id: crypto.randomUUID(), logId: null, boardKind: 'board', thicknessIn: 1, widthIn: 8, secondWidthIn: null, lengthFt: 8, count: 3 }] }, at);
});

describe('after the job', () => {
  it('assumes no air that nobody typed', async () => {
    expect(await afterPage(cast.ada, number, at)).toMatchObject({ months: [], now: null });
  });

  it('plans the stack of these boards and their sizes when dry', async () => {
    await keepDryingPlan(cast.ada, number, form(), at);
    const page = await afterPage(cast.ada, number, at);
    // Three boards 8 in wide with 3/4 in between are 25 1/2 in: one course of a stack 4 ft wide. 96 / 16 + 1 = 7 stickers, under and over: 14.
    expect(page.stacks.map(({ stack }) => [stack.layers, stack.stickersPerLayer, stack.stickers])).toEqual([[1, 7, 14]]);
    // White oak shrinks 10.5 % across (flat-sawn) and 5.6 % through when oven-dry (Wood Handbook); at 8 %, 22/30 of that:
    // 8 × (1 − 0.105 × 0.7333) = 7.384 in, 1 × (1 − 0.056 × 0.7333) = 0.959 in.
    expect(page.boards[0]?.dryWidthIn).toBeCloseTo(7.384, 3);
    expect(page.boards[0]?.dryThicknessIn).toBeCloseTo(0.959, 3);
    // 70 °F and 65 %: 12.0 % by the Wood Handbook's table.
    expect(page.now?.equilibriumPct).toBeCloseTo(12, 0);
    expect(page.plan.airSource).toBe('The station at the airport');
  });

  it('cuts the project from the boards, and names what is short', async () => {
    await keepDryingPlan(cast.ada, number, form({ pieces: 'Side, 2, 3/4, 7, 47\nTop, 1, 3/4, 7, 60\nWide, 1, 3/4, 9, 20' }), at);
    const { cuts } = await afterPage(cast.ada, number, at);
    // No board is 9 in wide when dry. 47 + 1/8 + 47 = 94 1/8 of one board of 96 in; 60 of another.
    expect(cuts.map(({ widthIn, plan }) => [widthIn, plan.usedIn, plan.short, plan.boards.map(({ pieces, offcutIn }) => [pieces, offcutIn])])).toEqual([
      [9, 0, [{ id: 'Wide', count: 1 }], []],
      [7, 192, [], expect.arrayContaining([[['Side', 'Side'], 1.75], [['Top'], 35.875]])],
    ]);
    await expect(keepDryingPlan(cast.ada, number, form({ pieces: 'Leg' }), at)).rejects.toMatchObject({ kind: 'invalid' });
  });

  it('keeps readings for the landowner alone to write, and for both to read', async () => {
    const reading = moistureForm.parse({ readOn: '2026-08-06', moisturePct: '62.5', note: 'Top board' });
    await expect(addMoistureReading(cast.bram, number, reading, at)).rejects.toMatchObject({ kind: 'forbidden' });
    await addMoistureReading(cast.ada, number, reading, at);
    const { readings } = await afterPage(cast.bram, number, at);
    expect(readings.map(({ readOn, moisturePct }) => [readOn, moisturePct])).toEqual([['2026-08-06', 62.5]]);
    await removeMoistureReading(cast.ada, number, readings[0]?.id ?? '');
    expect((await afterPage(cast.ada, number, at)).readings).toEqual([]);
    await expect(afterPage(cast.cleo, number, at)).rejects.toMatchObject({ kind: 'notFound' });
  });

  it('reminds on the day that was chosen, once', async () => {
    const letters = async (): Promise<number> => (await rows(`SELECT 1 FROM pgboss.job WHERE name = 'send-mail' AND data->>'subject' LIKE 'Your boards%'`)).length;
    await keepDryingPlan(cast.ada, number, form({ remindOn: '2026-10-01' }), at);
    await remindOfBoards(new Date('2026-09-30T20:00:00Z'));
    expect(await letters()).toBe(0);
    for (const hour of ['14', '20']) await remindOfBoards(new Date(`2026-10-01T${hour}:00:00Z`));
    expect(await letters()).toBe(1);
  });
});
