import { beforeAll, beforeEach, describe, expect, it } from 'vitest';
import { addDays, dayAt } from '~/domain/time.ts';
import { chooseBid } from '~/server/commands/choose-bid.ts';
import { confirmDays } from '~/server/commands/confirm-days.ts';
import { importCalendar } from '~/server/commands/busy-days.ts';
import { changeDaysOff } from '~/server/commands/days-off.ts';
import { moveDay } from '~/server/commands/move-day.ts';
import { placeBid } from '~/server/commands/place-bid.ts';
import { proposeDays } from '~/server/commands/propose-days.ts';
import { execute, rows } from '~/server/db.ts';
import { Booking, DayProposal } from '~/server/models/index.ts';
import type { Listing } from '~/server/models/listing.ts';
import { Bid } from '~/server/models/sawyer.ts';
import { type Cast, makeCast } from '../support/cast.ts';
import { bidOf, makeOpenListing, MARKET_AT, setUpSawyer } from '../support/sawing-market.ts';

const today = dayAt(MARKET_AT, 'America/Chicago');
const day = (ahead: number): string => addDays(today, ahead);
let cast: Cast;
let mill = '';
let listing: Listing;

beforeAll(async () => {
  cast = await makeCast();
  mill = await setUpSawyer(cast.bram.id);
  await setUpSawyer(cast.cleo.id);
});
beforeEach(async () => {
  await execute('DELETE FROM day_off');
  await execute('DELETE FROM busy_day');
  listing = await makeOpenListing(cast.ada.id);
});

const daysOff = async (): Promise<string[]> => (await rows<{ day: string }>('SELECT day::text AS day FROM sawyer_off WHERE sawyer_id = $1 ORDER BY day', [cast.bram.id])).map((row) => row.day);
const offered = async (id: string): Promise<readonly string[]> => (await Bid.findByPk(id, { rejectOnEmpty: true })).daysOffered;
const atTo = { kind: 'invalid', problems: [{ path: 'to' }] };

/** A day of the sawyer's that is booked. */
async function bookedDay(on: string): Promise<void> {
  const other = await makeOpenListing(cast.ada.id);
  const number = await chooseBid(cast.ada, await placeBid(cast.bram, other.number, bidOf(mill, { days: [on] }), MARKET_AT), 1, MARKET_AT);
  await proposeDays(cast.bram, { booking: number, days: [on], startTime: '08:00', note: '' }, MARKET_AT);
  const booking = await Booking.findOne({ where: { number }, rejectOnEmpty: true });
  await confirmDays(cast.ada, { booking: number, proposal: (await DayProposal.findOne({ where: { bookingId: booking.id, status: 'open' }, rejectOnEmpty: true })).id }, MARKET_AT);
}

describe('a day off', () => {
  it('is moved whole, and only once', async () => {
    await changeDaysOff(cast.bram, { add: [day(3)], remove: [] }, MARKET_AT);
    const moves = await Promise.allSettled([day(5), day(6)].map((to) => moveDay(cast.bram, { what: 'off', from: day(3), to }, MARKET_AT)));
    expect(moves.map(({ status }) => status).sort()).toEqual(['fulfilled', 'rejected']);
    expect((await daysOff()).length).toBe(1);
  });

  it('stays where it is when the other day is past, off or booked', async () => {
    await changeDaysOff(cast.bram, { add: [day(3), day(4)], remove: [] }, MARKET_AT);
    await bookedDay(day(12));
    for (const to of [day(-1), day(4), day(12), day(3)]) await expect(moveDay(cast.bram, { what: 'off', from: day(3), to }, MARKET_AT)).rejects.toMatchObject(atTo);
    await expect(moveDay(cast.bram, { what: 'off', from: day(9), to: day(10) }, MARKET_AT)).rejects.toMatchObject({ kind: 'conflict' });
    await expect(moveDay(cast.ada, { what: 'off', from: day(3), to: day(10) }, MARKET_AT)).rejects.toMatchObject({ kind: 'forbidden' });
    expect(await daysOff()).toEqual([day(3), day(4)]);
  });

  it('that another calendar names is moved here only, and stays moved when that calendar is read again', async () => {
    const brought = { text: `BEGIN:VCALENDAR\r\nVERSION:2.0\r\nPRODID:x\r\nBEGIN:VEVENT\r\nUID:1\r\nDTSTAMP:20260101T000000Z\r\nDTSTART;VALUE=DATE:${day(3).replaceAll('-', '')}\r\nEND:VEVENT\r\nEND:VCALENDAR\r\n`, name: 'mine.ics', leastHours: 4 };
    await importCalendar(cast.bram, brought, MARKET_AT);
    await moveDay(cast.bram, { what: 'off', from: day(3), to: day(5) }, MARKET_AT);
    expect(await daysOff()).toEqual([day(5)]);
    await importCalendar(cast.bram, brought, MARKET_AT);
    expect(await daysOff()).toEqual([day(5)]);
    await expect(moveDay(cast.bram, { what: 'off', from: day(3), to: day(6) }, MARKET_AT)).rejects.toMatchObject({ kind: 'conflict' });
  });
});

describe('an offered day', () => {
  it('is moved in the bid, which is otherwise as it was, and the landowner hears of it', async () => {
    const id = await placeBid(cast.bram, listing.number, bidOf(mill, { days: [day(5), day(7)] }), MARKET_AT);
    const before = await Bid.findByPk(id, { rejectOnEmpty: true });
    await moveDay(cast.bram, { what: listing.number, from: day(7), to: day(2) }, MARKET_AT);
    expect(await offered(id)).toEqual([day(2), day(5)]);
    expect(await Bid.findByPk(id)).toMatchObject({ status: 'open', expectedCents: before.expectedCents, estimate: before.estimate });
    const [letter] = await rows<{ data: { to: string; subject: string } }>(`SELECT data FROM pgboss.job WHERE name = 'send-mail' ORDER BY created_on DESC LIMIT 1`);
    expect(letter?.data.to).toBe(cast.ada.email);
  });

  it('goes to no day that is past, off, booked, offered already or too far ahead', async () => {
    const id = await placeBid(cast.bram, listing.number, bidOf(mill, { days: [day(5), day(7)] }), MARKET_AT);
    await changeDaysOff(cast.bram, { add: [day(4)], remove: [] }, MARKET_AT);
    await bookedDay(day(14));
    for (const to of [day(-1), day(4), day(14), day(7), day(5), day(90)]) await expect(moveDay(cast.bram, { what: listing.number, from: day(5), to }, MARKET_AT)).rejects.toMatchObject(atTo);
    await expect(moveDay(cast.bram, { what: listing.number, from: day(6), to: day(8) }, MARKET_AT)).rejects.toMatchObject({ kind: 'conflict' });
    expect(await offered(id)).toEqual([day(5), day(7)]);
  });

  it('is the bidder’s own, on a bid that stands', async () => {
    const id = await placeBid(cast.bram, listing.number, bidOf(mill, { days: [day(5)] }), MARKET_AT);
    for (const who of [cast.cleo]) await expect(moveDay(who, { what: listing.number, from: day(5), to: day(8) }, MARKET_AT)).rejects.toMatchObject({ kind: 'notFound' });
    await expect(moveDay(cast.bram, { what: 999_999, from: day(5), to: day(8) }, MARKET_AT)).rejects.toMatchObject({ kind: 'notFound' });
    await Bid.update({ status: 'toConfirm' }, { where: { id } });
    await expect(moveDay(cast.bram, { what: listing.number, from: day(5), to: day(8) }, MARKET_AT)).rejects.toMatchObject({ kind: 'conflict' });
  });
});
