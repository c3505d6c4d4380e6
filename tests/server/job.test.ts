import { randomUUID } from 'node:crypto';
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import { addDays, dayAt } from '~/domain/time.ts';
import { chooseBid } from '~/server/commands/choose-bid.ts';
import { confirmDays } from '~/server/commands/confirm-days.ts';
import { allowOnTheDay } from '~/server/commands/allow-on-the-day.ts';
import { enterTally } from '~/server/commands/enter-tally.ts';
import { offerTally } from '~/server/commands/offer-tally.ts';
import { placeBid } from '~/server/commands/place-bid.ts';
import { proposeDays } from '~/server/commands/propose-days.ts';
import { answerQuery, decideTally, queryTally } from '~/server/commands/query-tally.ts';
import { signTally } from '~/server/commands/sign-tally.ts';
import { startCheckout } from '~/server/commands/start-checkout.ts';
import { startSawing } from '~/server/commands/start-sawing.ts';
import type { Line } from '~/server/commands/take-entries.ts';
import { writeReview } from '~/server/commands/write-review.ts';
import { oneRow, rows } from '~/server/db.ts';
import { sweepTallies } from '~/server/jobs/handlers/sweep-tallies.ts';
import { BookedDay, Booking, DayProposal, Event, HeldPayment, Listing, Log, Review, Tally, TallyBoard, TallyQuery } from '~/server/models/index.ts';
import { bookingCalendar } from '~/server/queries/booking-calendar.ts';
import { bookingPage } from '~/server/queries/booking-page.ts';
import { tallyPage } from '~/server/queries/tally-page.ts';
import { makeCast, type Cast } from '../support/cast.ts';
import { checkBooks, makePayoutAccount, openMoneyHouse, type MoneyHouse } from '../support/money-market.ts';
import { bidOf, makeOpenListing, setUpSawyer } from '../support/sawing-market.ts';

let house: MoneyHouse;
let cast: Cast;
let mills: Record<'bram' | 'cleo', string>;
const at = new Date();
const day = (ahead: number): string => addDays(dayAt(at, 'America/Chicago'), ahead);
let nextDay = 5;

beforeAll(async () => {
  house = await openMoneyHouse();
  cast = await makeCast();
  mills = { bram: await setUpSawyer(cast.bram.id), cleo: await setUpSawyer(cast.cleo.id) };
  await makePayoutAccount(house, cast.bram);
});
afterAll(() => house.close());
beforeEach(() => (nextDay += 1));

/** A chosen bid of Bram's on a fresh listing of Ada's: the booking's number. */
async function chosen(owner = cast.ada): Promise<number> {
  const listing = await makeOpenListing(owner.id, { closesAt: new Date(at.getTime() + 20 * 86_400_000) });
  const bid = await placeBid(cast.bram, listing.number, bidOf(mills.bram, { days: [] }), at);
  return chooseBid(owner, bid, 1, at);
}
const openProposal = async (number: number): Promise<string> => {
  const booking = await Booking.findOne({ where: { number }, rejectOnEmpty: true });
  return (await DayProposal.findOne({ where: { bookingId: booking.id, status: 'open' }, rejectOnEmpty: true })).id;
};
async function agreed(ahead = (nextDay += 1)): Promise<number> {
  const number = await chosen();
  await proposeDays(cast.bram, { booking: number, days: [day(ahead)], startTime: '08:00', note: '' }, at);
  await confirmDays(cast.ada, { booking: number, proposal: await openProposal(number) }, at);
  return number;
}
async function held(): Promise<number> {
  const number = await agreed();
  const url = await startCheckout(cast.ada, { booking: number }, new Date());
  house.fake.control.pay(new URL(url).pathname.split('/').at(-1) ?? '');
  await house.work();
  return number;
}
const logsOf = async (number: number): Promise<Log[]> => {
  const booking = await Booking.findOne({ where: { number }, rejectOnEmpty: true });
  return Log.findAll({ where: { listingId: booking.listingId }, order: [['position', 'ASC']] });
};
const boards = (logId: string | null, thicknessIn: number, widthIn: number, lengthFt: number, count: number): Line => ({ kind: 'board', id: randomUUID(), logId, boardKind: 'board', thicknessIn, widthIn, secondWidthIn: null, lengthFt, count });
const stateOf = async (number: number): Promise<string[]> => {
  const booking = await Booking.findOne({ where: { number }, rejectOnEmpty: true });
  const payment = await HeldPayment.findOne({ where: { bookingId: booking.id } });
  const listing = await Listing.findByPk(booking.listingId, { rejectOnEmpty: true });
  return [booking.status, payment?.status ?? 'none', listing.status];
};

/** The tally of the worked oak job (shared worked example, computed): 378 bf by the hardwood rule. */
async function oakTally(number: number): Promise<Line[]> {
  const [one, two, three] = await logsOf(number);
  return [boards(one?.id ?? null, 1, 8, 12, 20), boards(two?.id ?? null, 1.25, 6.5, 12, 8), boards(three?.id ?? null, 2, 9, 12, 6), boards(three?.id ?? null, 0.75, 10, 11 + 8 / 12, 5)];
}
async function tallied(entries?: Line[]): Promise<number> {
  const number = await held();
  await startSawing(cast.bram, number, at);
  await enterTally(cast.bram, { booking: number, entries: entries ?? (await oakTally(number)) }, at);
  await offerTally(cast.bram, { booking: number, endedBySawyer: false, note: '' }, at);
  return number;
}

describe('a job from the chosen bid to settled', () => {
  it('comes out to the cent, and the books balance', async () => {
    const number = await tallied();
    expect(await stateOf(number)).toEqual(['tallied', 'held', 'matched']);
    const page = await tallyPage(cast.ada, number);
    // 378 bf × $0.50 = 189.00, set-up 75, travel 6 × 2 × $2 = 24: 288.00; fee 5 % 14.40; to the sawyer 273.60.
    expect(page.settlement).toMatchObject({ costCents: 28_800, feeCents: 1_440, transferCents: 27_360, overHold: null });
    expect(page.settlement.refundCents).toBe(page.view.heldCents - 28_800);
    await signTally(cast.ada, { booking: number, sha256: page.sha256, name: 'Ada' }, at);
    await house.work();
    expect(await stateOf(number)).toEqual(['settled', 'settled', 'done']);
    expect(await checkBooks(house)).toEqual([]);
    await writeReview(cast.ada, { booking: number, stars: 5, body: 'Straight boards.' }, at);
    await expect(writeReview(cast.ada, { booking: number, stars: 1, body: '' }, at)).rejects.toThrow('already');
    expect(await Review.count({ where: { subjectId: cast.bram.id } })).toBe(1);
  });
});

describe('agreeing on a day', () => {
  it('is confirmed by the other side only, and only the newest proposal', async () => {
    const number = await chosen();
    await proposeDays(cast.bram, { booking: number, days: [day(nextDay)], startTime: '08:00', note: '' }, at);
    const first = await openProposal(number);
    await expect(confirmDays(cast.bram, { booking: number, proposal: first }, at)).rejects.toMatchObject({ kind: 'forbidden' });
    await proposeDays(cast.ada, { booking: number, days: [day(nextDay + 30)], startTime: '09:30', note: 'After the hay.' }, at);
    await expect(confirmDays(cast.bram, { booking: number, proposal: first }, at)).rejects.toMatchObject({ kind: 'conflict' });
    await confirmDays(cast.bram, { booking: number, proposal: await openProposal(number) }, at);
    expect(await stateOf(number)).toEqual(['agreed', 'due', 'matched']);
  });

  it('refuses days past, too far ahead, unreal or none', async () => {
    const number = await chosen();
    const propose = (days: string[], startTime = '08:00') => proposeDays(cast.ada, { booking: number, days, startTime, note: '' }, at);
    for (const days of [[], ['2020-01-01'], [day(61)], ['2026-02-30'], ['soon']]) await expect(propose(days)).rejects.toMatchObject({ kind: 'invalid' });
    await expect(propose([day(nextDay)], '25:00')).rejects.toMatchObject({ kind: 'invalid' });
    await expect(proposeDays(cast.cleo, { booking: number, days: [day(nextDay)], startTime: '08:00', note: '' }, at)).rejects.toMatchObject({ kind: 'forbidden' });
  });

  it('gives one day to one outing when two landowners confirm at the same instant', async () => {
    const [one, two] = [await chosen(cast.ada), await chosen(cast.dora)];
    for (const number of [one, two]) await proposeDays(cast.bram, { booking: number, days: [day(nextDay + 20)], startTime: '08:00', note: '' }, at);
    const proposals = [await openProposal(one), await openProposal(two)];
    const tries = await Promise.allSettled([
      ...Array.from({ length: 4 }, () => confirmDays(cast.ada, { booking: one, proposal: proposals[0] ?? '' }, at)),
      ...Array.from({ length: 4 }, () => confirmDays(cast.dora, { booking: two, proposal: proposals[1] ?? '' }, at)),
    ]);
    expect(tries.filter(({ status }) => status === 'fulfilled')).toHaveLength(1);
    for (const one of tries) if (one.status === 'rejected') expect(one.reason).toMatchObject({ kind: 'conflict' });
    expect(await BookedDay.count({ where: { day: day(nextDay + 20), active: true } })).toBe(1);
  });

  it('moves a held booking in one step, frees the old day and pays nothing again', async () => {
    const number = await held();
    const before = await HeldPayment.findAll();
    await proposeDays(cast.ada, { booking: number, days: [day(50), day(51)], startTime: '07:30', note: '' }, at);
    await confirmDays(cast.bram, { booking: number, proposal: await openProposal(number) }, at);
    const page = await bookingPage(cast.ada, number, at);
    expect([page.status, page.days, page.startTime]).toEqual(['held', [day(50), day(51)], '07:30']);
    expect((await HeldPayment.findAll()).map(({ status, dueCents }) => [status, dueCents])).toEqual(before.map(({ status, dueCents }) => [status, dueCents]));
    const [mail] = await rows<{ ics: string }>(`SELECT data->'calendar'->>'ics' AS ics FROM pgboss.job WHERE name = 'send-mail' AND data ? 'calendar' ORDER BY created_on DESC LIMIT 1`);
    expect(mail?.ics).toContain(`UID:booking-${number}-2@skidway`);
    await proposeDays(cast.bram, { booking: number, days: [day(52)], startTime: '08:00', note: '' }, at);
    await confirmDays(cast.ada, { booking: number, proposal: await openProposal(number) }, at);
    const [later] = await rows<{ ics: string }>(`SELECT data->'calendar'->>'ics' AS ics FROM pgboss.job WHERE name = 'send-mail' AND data ? 'calendar' AND data->'calendar'->>'ics' LIKE '%booking-${number}-1@%' ORDER BY created_on DESC LIMIT 1`);
    expect(later?.ics).toMatch(/STATUS:CANCELLED/);
  });

  it('tells the exact place to the chosen sawyer only once the money is held', async () => {
    const number = await agreed();
    expect((await bookingPage(cast.bram, number, at)).place).toBeNull();
    const paid = await held();
    expect((await bookingPage(cast.bram, paid, at)).place).toEqual({ lat: 43.65, lng: -90.64 });
    await expect(bookingPage(cast.cleo, paid, at)).rejects.toMatchObject({ kind: 'notFound' });
    const seen = await Event.count({ where: { action: 'seePlace', actorId: cast.mo.id } });
    await bookingPage(cast.mo, paid, at);
    expect(await Event.count({ where: { action: 'seePlace', actorId: cast.mo.id } })).toBe(seen + 1);
  });
});

describe('an invitation', () => {
  it('tells neither side the mail address of the other', async () => {
    const number = await agreed();
    const sent = await rows<{ to: string; ics: string }>(`SELECT data->>'to' AS to, data->'calendar'->>'ics' AS ics FROM pgboss.job WHERE name = 'send-mail' AND data->'calendar'->>'ics' LIKE '%booking-${number}-1@%'`);
    const plain = (ics: string): string => ics.replaceAll(/\r\n[ \t]/g, '');
    const [ada, bram] = [cast.ada.email, cast.bram.email];
    expect(new Set(sent.map(({ to }) => to))).toEqual(new Set([ada, bram]));
    for (const { to, ics } of sent) expect([plain(ics).includes(ada), plain(ics).includes(bram)]).toEqual([to === ada, to === bram]);
    const own = plain(await bookingCalendar(cast.bram, number, at));
    expect([own.includes(ada), own.includes(bram)]).toEqual([false, true]);
    const desk = plain(await bookingCalendar(cast.mo, number, at));
    expect([desk.includes(ada), desk.includes(bram)]).toEqual([false, false]);
  });
});

describe('the tally', () => {
  it('takes a repeated send once, in any number', async () => {
    const number = await held();
    await startSawing(cast.bram, number, at);
    const entries = await oakTally(number);
    await Promise.all(Array.from({ length: 5 }, () => enterTally(cast.bram, { booking: number, entries }, at)));
    expect((await tallyPage(cast.bram, number)).view.boards).toHaveLength(4);
    const [first] = entries;
    if (first?.kind !== 'board') throw new Error('the first entry is a board');
    await enterTally(cast.bram, { booking: number, entries: [{ kind: 'remove', id: first.id }] }, at);
    await enterTally(cast.bram, { booking: number, entries }, at);
    expect((await tallyPage(cast.bram, number)).view.boards, 'what was taken back stays taken back').toHaveLength(3);
  });

  it('is entered by its sawyer only, and only while sawing, with logs of this listing', async () => {
    const number = await held();
    await expect(enterTally(cast.bram, { booking: number, entries: [boards(null, 1, 8, 12, 1)] }, at)).rejects.toMatchObject({ kind: 'conflict' });
    await startSawing(cast.bram, number, at);
    await expect(enterTally(cast.ada, { booking: number, entries: [boards(null, 1, 8, 12, 1)] }, at)).rejects.toMatchObject({ kind: 'forbidden' });
    await expect(enterTally(cast.bram, { booking: number, entries: [boards(randomUUID(), 1, 8, 12, 1)] }, at)).rejects.toMatchObject({ kind: 'invalid' });
    await expect(offerTally(cast.bram, { booking: number, endedBySawyer: false, note: '' }, at)).rejects.toThrow('nothing in the tally');
  });

  it('stops at the second metal hit until the landowner allows more', async () => {
    const number = await held();
    await startSawing(cast.bram, number, at);
    const hit = (): Line => ({ kind: 'hit', id: randomUUID(), logId: null, outcome: 'destroyed', note: '' });
    await enterTally(cast.bram, { booking: number, entries: [hit(), hit()] }, at);
    const [mail] = await rows(`SELECT 1 FROM pgboss.job WHERE name = 'send-mail' AND data->>'subject' LIKE '2 metal hits%'`);
    expect(mail).toBeDefined();
    await allowOnTheDay(cast.ada, { booking: number, allow: { kind: 'allow', id: randomUUID(), what: 'metal', logId: null, limitCents: null, name: 'Ada', signature: null } }, at);
    expect((await tallyPage(cast.ada, number)).view.metalAllowed).toBe(2);
  });

  it('refuses a signature under a tally that has changed, and lets one of eight sign', async () => {
    const number = await tallied();
    const page = await tallyPage(cast.ada, number);
    await expect(signTally(cast.ada, { booking: number, sha256: '0'.repeat(64), name: 'Ada' }, at)).rejects.toThrow('changed');
    await expect(signTally(cast.bram, { booking: number, sha256: page.sha256, name: 'Bram' }, at)).rejects.toMatchObject({ kind: 'forbidden' });
    const tries = await Promise.allSettled(Array.from({ length: 8 }, () => signTally(cast.ada, { booking: number, sha256: page.sha256, name: 'Ada' }, at)));
    expect(tries.filter(({ status }) => status === 'fulfilled')).toHaveLength(1);
    await house.work();
    expect(await stateOf(number)).toEqual(['settled', 'settled', 'done']);
    expect(await checkBooks(house)).toEqual([]);
  });

  it('signs itself after 72 hours, having reminded both twice', async () => {
    const number = await tallied();
    const after = (hours: number): Date => new Date(at.getTime() + hours * 3_600_000);
    const reminders = async (): Promise<number> => (await Booking.findOne({ where: { number }, rejectOnEmpty: true })).signReminders;
    for (const [hours, expected] of [[1, 0], [25, 1], [26, 1], [61, 2], [71.9, 2]] as const) {
      await sweepTallies(after(hours));
      expect([await reminders(), (await stateOf(number))[0]]).toEqual([expected, 'tallied']);
    }
    await sweepTallies(after(72));
    await sweepTallies(after(73));
    await house.work();
    expect((await stateOf(number))[0]).toBe('settled');
    const booking = await Booking.findOne({ where: { number }, rejectOnEmpty: true });
    expect((await Tally.findOne({ where: { bookingId: booking.id }, rejectOnEmpty: true })).signedBy).toBe('deadline');
  });

  it('is queried by line, answered, amended and decided by a moderator with a reason', async () => {
    const number = await tallied();
    const page = await tallyPage(cast.ada, number);
    const [first, second] = page.view.boards;
    if (!first || !second) throw new Error('the tally has boards');
    await queryTally(cast.ada, { booking: number, lines: [{ line: 'board', lineId: first.id }, { line: 'board', lineId: second.id }], says: 'I counted 18 and 8.' }, at);
    await sweepTallies(new Date(at.getTime() + 100 * 3_600_000));
    expect((await stateOf(number))[0], 'a queried tally never signs itself').toBe('queried');
    const queries = (await tallyPage(cast.bram, number)).view.queries;
    // Queries made at one instant come in no particular order.
    const queryOf = (board: { id: string }): string => queries.find(({ lineId }) => lineId === board.id)?.id ?? '';
    await answerQuery(cast.bram, { booking: number, query: queryOf(first), answer: 'Two went to the stack behind the barn.' }, at);
    const because = 'The photograph of the stack shows 18.';
    await expect(decideTally(cast.ada, { booking: number, sha256: page.sha256, decisions: [] }, at)).rejects.toMatchObject({ kind: 'forbidden' });
    await expect(decideTally(cast.mo, { booking: number, sha256: page.sha256, decisions: [{ query: queryOf(first), decision: { kind: 'count', count: 18 }, because }] }, at)).rejects.toThrow('every queried line');
    await decideTally(cast.mo, { booking: number, sha256: page.sha256, decisions: [{ query: queryOf(first), decision: { kind: 'count', count: 18 }, because }, { query: queryOf(second), decision: { kind: 'stands' }, because: 'It agrees with the count.' }] }, at);
    await house.work();
    // 18 boards of 8 instead of 20: 362 bf × $0.50 = 181.00 + 75 + 24 = 280.00.
    expect((await tallyPage(cast.ada, number)).settlement.costCents).toBe(28_000);
    expect((await stateOf(number))[0]).toBe('settled');
    expect(await TallyQuery.count({ where: { decidedBecause: because } })).toBe(1);
    expect(await checkBooks(house)).toEqual([]);
  });

  it('is decided only as the moderator read it, with what was entered since it was queried', async () => {
    const number = await tallied();
    const page = await tallyPage(cast.ada, number);
    const [first] = page.view.boards;
    if (!first) throw new Error('the tally has boards');
    await queryTally(cast.ada, { booking: number, lines: [{ line: 'board', lineId: first.id }], says: 'I counted 18.' }, at);
    const [asked] = (await tallyPage(cast.mo, number)).view.queries;
    const because = 'The photograph shows it.';
    const later: Line = { kind: 'board', id: randomUUID(), logId: null, boardKind: 'board', thicknessIn: 1, widthIn: 12, secondWidthIn: null, lengthFt: 12, count: 40 };
    const extras: Line = { kind: 'extras', id: randomUUID(), stickers: 5000 };
    await enterTally(cast.bram, { booking: number, entries: [later, extras] }, at);
    await enterTally(cast.bram, { booking: number, entries: [later, extras] }, at);
    const stands = (query: string) => ({ query, decision: { kind: 'stands' } as const, because });
    await expect(decideTally(cast.mo, { booking: number, sha256: page.sha256, decisions: [stands(asked?.id ?? '')] }, at)).rejects.toThrow('has changed since');
    const { sha256, view } = await tallyPage(cast.mo, number);
    expect(view.queries.map(({ line, says }) => [line, says])).toEqual([['board', 'I counted 18.'], ['board', ''], ['extras', '']]);
    await expect(decideTally(cast.mo, { booking: number, sha256, decisions: [stands(asked?.id ?? '')] }, at)).rejects.toThrow('every queried line');
    await decideTally(cast.mo, { booking: number, sha256, decisions: view.queries.map(({ id, says }) => ({ query: id, decision: { kind: says === '' ? 'struck' : 'stands' }, because })) }, at);
    expect((await tallyPage(cast.ada, number)).settlement.costCents, 'as it was offered').toBe(page.settlement.costCents);
  });

  it('charges hours to the quarter, waiting with them, and no breakdown', async () => {
    const overlapping = await held();
    await startSawing(cast.bram, overlapping, at);
    const clock = (from: string, to: string, activity: 'sawing' | 'waiting' = 'sawing'): Line => ({ kind: 'clock', id: randomUUID(), activity, startsAt: `2026-08-04T${from}:00-05:00`, endsAt: `2026-08-04T${to}:00-05:00` });
    await expect(enterTally(cast.bram, { booking: overlapping, entries: [clock('09:00', '11:00'), clock('10:30', '12:00')] }, at)).rejects.toMatchObject({ kind: 'invalid' });
    await enterTally(cast.bram, { booking: overlapping, entries: [clock('09:00', '09:50', 'waiting')] }, at);
    const page = await tallyPage(cast.bram, overlapping);
    // 50 minutes are 3 quarters of an hour at $60 of waiting: 45.00.
    expect(page.settlement.lines.find(({ label }) => label === 'Waiting')?.amountCents).toBe(4_500);
    expect(await oneRow(`SELECT 1 FROM tally_board WHERE tally_id = (SELECT id FROM tally WHERE booking_id = (SELECT id FROM booking WHERE number = $1))`, [overlapping])).toBeUndefined();
    expect(await TallyBoard.count()).toBeGreaterThan(0);
  });
});
