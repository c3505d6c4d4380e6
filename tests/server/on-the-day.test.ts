import { spawnSync } from 'node:child_process';
import { randomUUID } from 'node:crypto';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { addDays, dayAt, dayStart } from '~/domain/time.ts';
import { dayEstimate } from '~/domain/trade/day-estimate.ts';
import type { RateCard } from '~/domain/trade/rate-card.ts';
import { tallyLines } from '~/components/tally-lines.ts';
import { hashOf } from '~/islands/day/content-hash.ts';
import type { TallyView } from '~/schemas/tally-view.ts';
import { withEntries } from '~/islands/tally-book/with-entries.ts';
import type { TallyEntry } from '~/schemas/tally-entries.ts';
import { chooseBid } from '~/server/commands/choose-bid.ts';
import { confirmDays } from '~/server/commands/confirm-days.ts';
import { placeBid } from '~/server/commands/place-bid.ts';
import { proposeDays } from '~/server/commands/propose-days.ts';
import { makeSigningCode } from '~/server/commands/sign-on-the-spot.ts';
import { answerQuery, queryTally } from '~/server/commands/query-tally.ts';
import { startCheckout } from '~/server/commands/start-checkout.ts';
import { takeEntries } from '~/server/commands/take-entries.ts';
import { rows } from '~/server/db.ts';
import { balances } from '~/server/ledger.ts';
import { tellEveningBefore } from '~/server/jobs/handlers/evening-before.ts';
import { BookedDay, Booking, DayProposal, Tally } from '~/server/models/index.ts';
import { dayPack } from '~/server/queries/day-pack.ts';
import { tallyPage, type TallyPage } from '~/server/queries/tally-page.ts';
import { makeCast, type Cast } from '../support/cast.ts';
import { checkBooks, makePayoutAccount, openMoneyHouse, type MoneyHouse } from '../support/money-market.ts';
import { OAK_CARD } from '../support/rate-cards.ts';
import { bidOf, makeOpenListing, setUpSawyer } from '../support/sawing-market.ts';
import { RateCard as RateCardRow } from '~/server/models/sawyer.ts';

// Bram's card: $0.50 / bf by the hardwood rule, set-up $75, $2 a mile beyond 25 (31 miles: 6 × 2 × $2 = $24), blades $10 and $35.
let house: MoneyHouse;
let cast: Cast;
let mill: string;
let card = OAK_CARD;
let ahead = 5;
const at = new Date();
const path = 'M10 10L50 60L90 20';
const word = { name: 'Ada Example', signature: path } as const;

beforeAll(async () => {
  house = await openMoneyHouse();
  cast = await makeCast();
  mill = await setUpSawyer(cast.bram.id);
  await makePayoutAccount(house, cast.bram);
});
afterAll(() => house.close());

const bookingOf = (number: number): Promise<Booking> => Booking.findOne({ where: { number }, rejectOnEmpty: true });
const page = (number: number): Promise<TallyPage> => tallyPage(cast.bram, number);
const take = (number: number, ...entries: TallyEntry[]): Promise<void> => takeEntries(cast.bram, { booking: number, entries }, at);
const allow = (what: 'metal' | 'increase' | 'larger-log' | 'added-log' | 'set-up-again', more: { logId?: string; limitCents?: number } = {}): TallyEntry => ({ kind: 'allow', id: randomUUID(), what, logId: more.logId ?? null, limitCents: more.limitCents ?? null, ...word });
const boards = (logId: string | null, thicknessIn: number, widthIn: number, lengthFt: number, count: number): TallyEntry & { kind: 'board' } => ({ kind: 'board', id: randomUUID(), logId, boardKind: 'board', thicknessIn, widthIn, secondWidthIn: null, lengthFt, count });
const hit = (outcome: 're-sharpened' | 'destroyed' = 'destroyed'): TallyEntry => ({ kind: 'hit', id: randomUUID(), logId: null, outcome, note: '' });
const clock = (activity: 'sawing' | 'waiting' | 'breakdown' | 'preparing', from: string, to: string): TallyEntry => ({ kind: 'clock', id: randomUUID(), activity, startsAt: `2026-08-04T${from}:00-05:00`, endsAt: `2026-08-04T${to}:00-05:00` });
const lineOf = (tally: TallyPage, label: RegExp) => tally.settlement.lines.find((line) => label.test(line.label));
const lettersTo = async (email: string, subject: string): Promise<number> => (await rows(`SELECT 1 FROM pgboss.job WHERE name = 'send-mail' AND data->>'to' = $1 AND data->>'subject' LIKE $2`, [email, `${subject}%`])).length;

/** The sheet that came with the letter, read back by Debian's poppler. */
async function expectSheet(number: number, email: string, words: readonly string[]): Promise<void> {
  const [mail] = await rows<{ content: string }>(
    `SELECT data->'attachments'->0->>'content' AS content FROM pgboss.job WHERE name = 'send-mail' AND data->>'to' = $1 AND data->'attachments'->0->>'filename' = $2`,
    [email, `tally-${number}.pdf`],
  );
  const pdf = Buffer.from(mail?.content ?? '', 'base64');
  expect(pdf.subarray(0, 5).toString()).toBe('%PDF-');
  const read = spawnSync('pdftotext', ['-layout', '-', '-'], { input: pdf, encoding: 'utf8' });
  expect(read.status, `pdftotext (Debian's poppler-utils): ${read.error?.message ?? read.stderr}`).toBe(0);
  for (const word of words) expect(read.stdout).toContain(word);
}

/** A held booking on Bram's card (or one of its own), sawing begun. */
async function sawing(change: Partial<RateCard> = {}): Promise<number> {
  card = { ...OAK_CARD, ...change };
  await RateCardRow.update({ card }, { where: { sawyerId: cast.bram.id } });
  const listing = await makeOpenListing(cast.ada.id, { closesAt: new Date(at.getTime() + 20 * 86_400_000) });
  const number = await chooseBid(cast.ada, await placeBid(cast.bram, listing.number, bidOf(mill, { days: [] }), at), 1, at);
  const booking = await bookingOf(number);
  await proposeDays(cast.bram, { booking: number, days: [addDays(dayAt(at, booking.timeZone), (ahead += 1))], startTime: '08:00', note: '' }, at);
  await confirmDays(cast.ada, { booking: number, proposal: (await DayProposal.findOne({ where: { bookingId: booking.id, status: 'open' }, rejectOnEmpty: true })).id }, at);
  house.fake.control.pay(new URL(await startCheckout(cast.ada, { booking: number }, new Date())).pathname.split('/').at(-1) ?? '');
  await house.work();
  await take(number, { kind: 'start', id: randomUUID() });
  return number;
}
const logIds = async (number: number): Promise<string[]> => (await page(number)).view.logs.map(({ id }) => id);

describe('metal', () => {
  it('stops the saw at two hits, goes on by the landowner’s word, and costs at most the cap', async () => {
    const number = await sawing();
    await take(number, boards(null, 1, 8, 12, 25), hit(), hit('re-sharpened'));
    expect(await lettersTo(cast.ada.email, '2 metal hits')).toBe(1);
    await take(number, allow('metal'));
    const tally = await page(number);
    // 25 boards 4/4 × 8 × 12: 8 bf each, 200 bf × $0.50 = $100.00; set-up $75, travel $24; blades $35 + $10 = $45: $244.00.
    expect([tally.view.metalAllowed, tally.settlement.costCents]).toEqual([2, 24_400]);
    // The landowner's word was given on Bram's phone, so a letter tells Ada.
    expect(await lettersTo(cast.ada.email, 'Allowed on Bram’s phone: two more metal hits')).toBe(1);
    // Two more destroyed: $35 × 3 + $10 = $115, but never more than the cap of $105: 100 + 75 + 24 + 105 = $304.00.
    await take(number, hit(), hit());
    expect((await page(number)).settlement.costCents).toBe(30_400);
    expect(await lettersTo(cast.ada.email, '4 metal hits')).toBe(1);
  });
});

describe('the hold', () => {
  it('warns both at 80 and 95 %, and goes on above 100 % only by a signed limit', async () => {
    const number = await sawing();
    const held = (await page(number)).view.heldCents;
    // What is left for sawing after set-up and travel ($99), at 50 cents a bf, in boards of 8 bf ($4.00 each).
    const boardsTo = (share: number): number => Math.ceil((held * share - 9_900) / 400);
    await take(number, boards(null, 1, 8, 12, boardsTo(0.8) - 1));
    expect(await lettersTo(cast.ada.email, 'The work has reached')).toBe(0);
    await take(number, boards(null, 1, 8, 12, 1));
    expect([await lettersTo(cast.ada.email, 'The work has reached 80 %'), await lettersTo(cast.bram.email, 'The work has reached 80 %')]).toEqual([1, 1]);
    await take(number, boards(null, 1, 8, 12, boardsTo(0.95) - boardsTo(0.8)));
    await take(number, boards(null, 1, 8, 12, 1));
    expect(await lettersTo(cast.ada.email, 'The work has reached 95 %'), 'once, however often entries come').toBe(1);
    await expect(take(number, allow('increase', { limitCents: held })), 'a limit no higher than the hold').rejects.toMatchObject({ kind: 'invalid' });
    await expect(takeEntries(cast.cleo, { booking: number, entries: [allow('increase', { limitCents: held + 10_000 })] }, at)).rejects.toMatchObject({ kind: 'forbidden' });
    const increase = allow('increase', { limitCents: held + 10_000 });
    await take(number, increase, increase);
    const tally = await page(number);
    expect(tally.view.allowances.map(({ what, limitCents, name }) => [what, limitCents, name])).toEqual([['increase', held + 10_000, 'Ada Example']]);
    // Above the hold now: what is payable stays what is held until the increase is paid.
    await take(number, boards(null, 1, 8, 12, boardsTo(1.02) - boardsTo(0.95)));
    const above = await page(number);
    expect(above.settlement.costCents).toBeGreaterThan(held);
    expect(above.settlement.payableCents).toBe(held);
    expect(await lettersTo(cast.ada.email, 'The work has reached all')).toBe(0);
    // Paid through a second checkout, it is held: 30 more dollars than before.
    house.fake.control.pay(new URL(await startCheckout(cast.ada, { booking: number, purpose: 'increase', amountCents: 3_000 }, new Date())).pathname.split('/').at(-1) ?? '');
    await house.work();
    expect((await page(number)).view.heldCents).toBe(held + 3_000);
  });
});

describe('logs that are not as listed', () => {
  it('asks first when a log scales over 15 % more, and charges it as listed until then', async () => {
    const number = await sawing({ basis: { kind: 'log-scale', rule: 'internationalQuarter', perBf: { withCents: 60, withoutCents: 50 }, smallestLog: null } });
    const [one = '', two = '', three = ''] = await logIds(number);
    const measure = (logId: string, smallEndIn: number): TallyEntry => ({ kind: 'measure', id: randomUUID(), logId, smallEndIn, largeEndIn: null, lengthFt: 12 });
    await take(number, boards(one, 1, 8, 12, 1), boards(two, 1, 8, 12, 1), boards(three, 1, 8, 12, 1));
    // Listed 18, 16 and 14 in × 12 ft: International ¼ 170 + 130 + 100 = 400 bf × $0.50 = $200.00; with set-up and travel $299.00.
    expect((await page(number)).settlement.costCents).toBe(29_900);
    // 14 in is really 15 in: 115 bf, exactly 15 % more than 100: not over, so it is charged as measured. 415 × 0.50 = 207.50 + 99.
    await take(number, measure(three, 15));
    expect((await page(number)).settlement.costCents).toBe(30_650);
    // 16 in is really 18 in: 170 over 130 is 30.8 % more: charged as listed until Ada agrees.
    await take(number, measure(two, 18));
    const asks = await page(number);
    expect([asks.settlement.costCents, asks.view.logs[1]?.waits]).toEqual([30_650, ['It scales 30.8 % more than listed.']]);
    // 170 + 170 + 115 = 455 against 400 listed is 13.8 % more; both read it, and Ada has a letter that asks before it is sawn.
    const [letter] = await rows<{ text: string }>(`SELECT data->>'text' AS text FROM pgboss.job WHERE name = 'send-mail' AND data->>'to' = $1 AND data->>'subject' LIKE '%asks about a log%' ORDER BY created_on DESC LIMIT 1`, [cast.ada.email]);
    expect(letter?.text).toContain('It scales 30.8 % more than listed.');
    expect(letter?.text).toContain('455 bf; listed 400 bf, +13.8 %');
    const { bid, mill: limits, logs, terms } = asks.view;
    expect(bid && limits && dayEstimate(logs, limits, bid, terms)).toMatchObject({ listedScaleBf: 400, scaleBf: 455 });
    await expect(take(number, allow('larger-log', { logId: one })), 'nothing to agree on').rejects.toMatchObject({ kind: 'invalid' });
    await take(number, allow('larger-log', { logId: two }));
    // 170 + 170 + 115 = 455 bf × 0.50 = 227.50 + 99 = 326.50.
    expect((await page(number)).settlement.costCents).toBe(32_650);
    // Measured once more, 19 in: the word was for 18 in, so it is asked again.
    await take(number, measure(two, 19));
    expect((await page(number)).settlement.costCents).toBe(30_650);
    // Less than listed simply costs less: 18 in is really 17 in, 150 bf: 150 + 130 + 115 = 395 × 0.50 = 197.50 + 99.
    await take(number, measure(one, 17));
    expect((await page(number)).settlement.costCents).toBe(29_650);
  });

  it('asks when a log is over the mill’s limits, whatever it scales', async () => {
    const number = await sawing();
    const [, , three = ''] = await logIds(number);
    await take(number, { kind: 'measure', id: randomUUID(), logId: three, smallEndIn: 14, largeEndIn: 32, lengthFt: 12 });
    expect((await page(number)).view.logs[2]?.waits.join(' ')).toContain('the mill takes 30');
  });

  it('counts a log added on the day once the landowner has accepted it, on a line of its own', async () => {
    const number = await sawing();
    const added = randomUUID();
    const addLog: TallyEntry = { kind: 'addLog', id: added, label: '', species: 'white-oak', smallEndIn: 12, largeEndIn: null, lengthFt: 10 };
    await take(number, boards(null, 1, 8, 12, 10), addLog, boards(added, 1, 6, 10, 4));
    await take(number, addLog);
    const waits = await page(number);
    // 80 bf × $0.50 = $40.00 + 75 + 24; the four boards of the added log wait.
    expect([waits.settlement.costCents, waits.view.logs.length, waits.view.logs[3]?.waits]).toEqual([13_900, 4, ['It is not on the listing.']]);
    await take(number, allow('added-log', { logId: added }));
    const accepted = await page(number);
    // 4 boards 4/4 × 6 × 10: 5 bf each, 20 bf × $0.50 = $10.00 more.
    expect(accepted.settlement.costCents).toBe(14_900);
    expect(lineOf(accepted, /added/i)).toMatchObject({ quantity: 20, amountCents: 1_000 });
  });

  it('charges opening a cull log, by its time', async () => {
    const number = await sawing();
    const [one = ''] = await logIds(number);
    await take(number, boards(null, 1, 8, 12, 10), { kind: 'cull', id: randomUUID(), logId: one, reason: 'Hollow from end to end.', openingMinutes: 30, passes: 0 });
    const tally = await page(number);
    // 80 bf × $0.50 = $40.00; opening half an hour at $80 an hour = $40.00; 75 + 24: $179.00.
    expect([tally.settlement.costCents, lineOf(tally, /cull/i)?.amountCents]).toEqual([17_900, 4_000]);
  });
});

describe('hours', () => {
  it('count sawing and waiting to the quarter hour, and no breakdown', async () => {
    const number = await sawing({ basis: { kind: 'hourly', from: 'first-cut', perHour: { withCents: 11_000, withoutCents: 9_000 } } });
    await take(number, clock('preparing', '08:00', '08:40'), clock('sawing', '08:40', '11:00'), clock('breakdown', '11:00', '12:10'), clock('waiting', '12:10', '12:32'), clock('sawing', '12:32', '14:00'));
    // From the first cut: 140 + 22 + 88 = 250 min = 4.17 h, to the quarter 4.25 h × $90 = $382.50; 75 + 24: $481.50.
    const tally = await page(number);
    expect([tally.settlement.costCents, lineOf(tally, /saw/i)?.quantity]).toEqual([48_150, 4.25]);
  });

  it('are put right with a reason before signing, once, and both times stay in sight', async () => {
    const number = await sawing({ basis: { kind: 'hourly', from: 'first-cut', perHour: { withCents: 11_000, withoutCents: 9_000 } } });
    // The phone's clock was an hour fast at the end: 12:00 was 11:00.
    const wrong = clock('sawing', '08:00', '12:00');
    await take(number, wrong, clock('waiting', '12:00', '12:30'));
    const before = await page(number);
    expect(before.settlement.costCents).toBe(9_900 + 40_500);
    const right: TallyEntry = { kind: 'correctClock', id: randomUUID(), clockId: wrong.id, startsAt: '2026-08-04T08:00:00-05:00', endsAt: '2026-08-04T11:00:00-05:00', reason: 'The phone was an hour fast' };
    for (const _ of ['sent', 'sent again']) await take(number, right);
    const after = await page(number);
    // Three and a half hours × $90 = $315, with 75 + 24.
    expect(after.settlement.costCents).toBe(9_900 + 31_500);
    expect(after.sha256).not.toBe(before.sha256);
    expect(after.view.clock.find(({ id }) => id === wrong.id)).toMatchObject({ endsAt: '2026-08-04T11:00:00-05:00', corrections: [{ startsAt: '2026-08-04T08:00:00-05:00', endsAt: '2026-08-04T12:00:00-05:00', reason: 'The phone was an hour fast' }] });
    expect(tallyLines(after.view, 'America/Chicago').find(({ ref }) => ref === `clock:${wrong.id}`)?.text).toBe('Sawing, Tue 4 Aug, 8:00 am to 11:00 am; put right, first written Tue 4 Aug, 8:00 am to Tue 4 Aug, 12:00 pm: The phone was an hour fast');
    // The phone shows the same before it has sent it, and is bound to the same.
    expect(await hashOf(withEntries(before.view, [right]))).toBe(after.sha256);
    expect(withEntries(after.view, [right]).clock).toEqual(after.view.clock);
    await expect(take(number, { ...right, id: randomUUID(), endsAt: '2026-08-04T12:10:00-05:00' })).rejects.toMatchObject({ kind: 'invalid' });
  });
});

describe('the evening before', () => {
  it('sends both their list once, with the code for the landowner alone', async () => {
    const number = await sawing();
    const booking = await bookingOf(number);
    const [day] = await BookedDay.findAll({ where: { bookingId: booking.id, active: true } });
    const dayBefore = addDays(day?.day ?? '', -1);
    await tellEveningBefore(dayStart(dayBefore, booking.timeZone, '16:59'));
    expect(await lettersTo(cast.ada.email, 'Tomorrow')).toBe(0);
    await tellEveningBefore(dayStart(dayBefore, booking.timeZone, '17:00'));
    await tellEveningBefore(dayStart(dayBefore, booking.timeZone, '18:00'));
    expect([await lettersTo(cast.ada.email, 'Tomorrow'), await lettersTo(cast.bram.email, 'Tomorrow')]).toEqual([1, 1]);
    const letters = await rows<{ to: string; text: string }>(`SELECT data->>'to' AS to, data->>'text' AS text FROM pgboss.job WHERE name = 'send-mail' AND data->>'subject' LIKE 'Tomorrow%'`);
    const code = await makeSigningCode(booking.id);
    expect(letters.map(({ to, text }) => [to, text.includes(code)]).sort()).toEqual([[cast.ada.email, true], [cast.bram.email, false]]);
    // 400 bf as 50 boards 4/4 × 8 × 12 in a stack 4 ft wide: (50 × 8.75 − 0.75) / 48 = 9.1, 10 layers; 144 / 16 + 1 = 10 stickers a layer, 11 rows.
    expect(letters.find(({ to }) => to === cast.ada.email)?.text).toContain('About 110 dry stickers');
  });
});

describe('rain', () => {
  it('signs the part that is sawn, goes on another day, and owes travel again only by the card', async () => {
    const number = await sawing({ travel: { freeMiles: 25, perMileCents: 200, owedAgainAfterRain: true } });
    const first = boards(null, 1, 8, 12, 10);
    await take(number, first);
    const soFar = await page(number);
    expect(await hashOf(soFar.view), 'phone and server read the same').toBe(soFar.sha256);
    const part: TallyEntry = { kind: 'part', id: randomUUID(), sha256: soFar.sha256, ...word };
    await take(number, part, part);
    // 80 bf × $0.50 + 75 + 24 = $139.00 for the part, and its line stands.
    expect((await page(number)).view.parts.map(({ name, lineIds, costCents }) => [name, lineIds, costCents])).toEqual([['Ada Example', [first.id], 13_900]]);
    await expect(take(number, { kind: 'remove', id: first.id })).rejects.toThrow('Some answers');
    await expect(take(number, { kind: 'part', id: randomUUID(), sha256: '0'.repeat(64), ...word })).rejects.toThrow('changed');

    const booking = await bookingOf(number);
    const before = await BookedDay.findAll({ where: { bookingId: booking.id, active: true } });
    // The day that was sawn lies behind by then.
    const later = new Date(at.getTime() + (ahead + 1) * 86_400_000);
    const next = addDays(dayAt(later, booking.timeZone), 25);
    await proposeDays(cast.bram, { booking: number, days: [next], startTime: '08:00', note: 'Rain.' }, later);
    await confirmDays(cast.ada, { booking: number, proposal: (await DayProposal.findOne({ where: { bookingId: booking.id, status: 'open' }, rejectOnEmpty: true })).id }, later);
    const days = await BookedDay.findAll({ where: { bookingId: booking.id, active: true }, order: [['day', 'ASC']] });
    expect(days.map(({ day }) => day)).toEqual([before[0]?.day, next]);
    expect((await bookingOf(number)).status).toBe('sawing');

    await take(number, { kind: 'extras', id: randomUUID(), rainReturns: 1 }, boards(null, 1, 8, 12, 5));
    // 120 bf × $0.50 = $60.00; one set-up 75; travel twice, 24 × 2 = 48: $183.00.
    expect((await page(number)).settlement.costCents).toBe(18_300);
    await take(number, allow('set-up-again'));
    // A second set-up by Ada's word: $75 more.
    expect((await page(number)).settlement.costCents).toBe(25_800);
  });
});

describe('signing on the spot', () => {
  it('binds the finger to what was on the phone, asks again after a change, and settles at once', async () => {
    const number = await sawing();
    await take(number, boards(null, 1, 8, 12, 20));
    const offer: TallyEntry = { kind: 'offer', id: randomUUID(), endedBySawyer: false, note: '' };
    // The phone has no signal: it lays the offer over what it knows and signs the hash of that.
    const sha256 = await hashOf(withEntries((await page(number)).view, [offer]));
    const booking = await bookingOf(number);
    const code = await makeSigningCode(booking.id);
    const sign = (more: Partial<TallyEntry & { kind: 'sign' }> = {}): TallyEntry => ({ kind: 'sign', id: randomUUID(), sha256, code, ...word, ...more });
    // Before it is sent, the second phone sends a board: the signature is not for that.
    await take(number, boards(null, 1, 6, 12, 1));
    await take(number, offer);
    await expect(take(number, sign())).rejects.toThrow('changed');
    const now = (await page(number)).sha256;
    await expect(take(number, sign({ sha256: now, signature: null }))).rejects.toMatchObject({ kind: 'invalid' });
    await expect(take(number, sign({ sha256: now, code: code === '000000' ? '000001' : '000000' }))).rejects.toThrow('not the landowner’s code');
    const signed = sign({ sha256: now });
    await take(number, offer, signed, signed);
    await house.work();
    const tally = await Tally.findOne({ where: { bookingId: booking.id }, rejectOnEmpty: true });
    expect([(await bookingOf(number)).status, tally.signedName, tally.signature, tally.signedOn]).toEqual(['settled', 'Ada Example', path, 'sawyer']);
    // 20 × 8 + 6 = 166 bf × $0.50 = $83.00 + 75 + 24 = $182.00.
    expect((await tallyPage(cast.ada, number)).settlement.costCents).toBe(18_200);
    expect(await checkBooks(house)).toEqual([]);
    await expectSheet(number, cast.ada.email, ['166 bf', '$182.00', 'Signed by Ada Example']);
    // Bram's sheet says the fee of 5 % ($9.10) and his pay ($172.90), as the ledger has them.
    await expectSheet(number, cast.bram.email, ['$9.10', '$172.90']);
    const ledger = await balances((await bookingOf(number)).id);
    expect([-ledger['platform fee'], ledger['sawyer payable'], ledger['landowner held']]).toEqual([910, 0, 0]);
  });

  it('takes the landowner’s signature from their own phone, kept without signal, for the lines that were on it alone', async () => {
    const number = await sawing();
    await take(number, boards(null, 1, 8, 12, 20), { kind: 'offer', id: randomUUID(), endedBySawyer: false, note: '' });
    // Ada's phone has the tally as it was offered, and no signal any more.
    const kept = (await dayPack(cast.ada, at)).bookings.find((booking) => booking.number === number);
    if (!kept) throw new Error('The booking is not on her phone.');
    const sign = async (view: TallyView): Promise<TallyEntry> => ({ kind: 'sign', id: randomUUID(), sha256: await hashOf(view), code: null, ...word });
    const first = await sign(kept.tally);
    // Before it is sent she queries a line at home and Bram corrects it: the signature was for other lines.
    const [line] = kept.tally.boards;
    await queryTally(cast.ada, { booking: number, lines: [{ line: 'board', lineId: line?.id ?? '' }], says: 'Two of them are split.' }, at);
    await take(number, { kind: 'remove', id: line?.id ?? '' }, boards(null, 1, 8, 12, 18));
    const [query] = (await tallyPage(cast.ada, number)).view.queries;
    await answerQuery(cast.bram, { booking: number, query: query?.id ?? '', answer: 'They are. Eighteen.' }, at);
    await expect(takeEntries(cast.ada, { booking: number, entries: [first] }, at)).rejects.toMatchObject({ kind: 'conflict' });
    expect((await bookingOf(number)).status).toBe('queried');
  });
  it('takes an increase, a metal word and a part from the landowner’s own phone, each once', async () => {
    const number = await sawing();
    await take(number, boards(null, 1, 8, 12, 20), hit(), hit());
    const view = (await dayPack(cast.ada, at)).bookings.find((booking) => booking.number === number)?.tally;
    if (!view) throw new Error('The booking is not on her phone.');
    const more = view.heldCents + 10_000;
    const part: TallyEntry = { kind: 'part', id: randomUUID(), sha256: await hashOf(view), ...word };
    const words = [part, allow('metal'), allow('increase', { limitCents: more })];
    await takeEntries(cast.ada, { booking: number, entries: words }, at);
    await takeEntries(cast.ada, { booking: number, entries: words }, at);
    const after = (await page(number)).view;
    // Given at one instant, they stand in the order of their ids, which are random.
    expect(new Map(after.allowances.map(({ what, limitCents }) => [what, limitCents]))).toEqual(new Map([['metal', null], ['increase', more]]));
    expect(after.allowances).toHaveLength(2);
    // One row of boards and two hits stand: 20 × 8 bf × $0.50 = $80.00, set-up $75, travel $24, two blades at $35 = $249.00.
    expect(after.parts.map(({ lineIds, costCents }) => [lineIds.length, costCents])).toEqual([[3, 24_900]]);
    expect(after.metalAllowed).toBe(2);
    // A landowner's phone writes no lines of the tally.
    await expect(takeEntries(cast.ada, { booking: number, entries: [boards(null, 1, 8, 12, 1)] }, at)).rejects.toMatchObject({ kind: 'forbidden' });
  });

  it('shuts the code after five wrong ones; the landowner’s own account still signs', async () => {
    const number = await sawing();
    await take(number, boards(null, 1, 8, 12, 20), { kind: 'offer', id: randomUUID(), endedBySawyer: true, note: '' });
    const booking = await bookingOf(number);
    const code = await makeSigningCode(booking.id);
    const { sha256, settlement } = await page(number);
    // The sawyer left early: the tally and one journey, no set-up: 160 × $0.50 + 24 = $104.00.
    expect(settlement.costCents).toBe(10_400);
    const wrong = code === '123456' ? '654321' : '123456';
    for (let tries = 0; tries < 5; tries += 1) await expect(take(number, { kind: 'sign', id: randomUUID(), sha256, code: wrong, ...word })).rejects.toThrow('not the landowner’s code');
    await expect(take(number, { kind: 'sign', id: randomUUID(), sha256, code, ...word })).rejects.toThrow('Too many wrong codes');
    await takeEntries(cast.ada, { booking: number, entries: [{ kind: 'sign', id: randomUUID(), sha256, code: null, ...word }] }, at);
    expect((await bookingOf(number)).status).toBe('signed');
  });
});
