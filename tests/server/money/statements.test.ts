import Papa from 'papaparse';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { numberDocument } from '~/server/commands/number-document.ts';
import { reconcile } from '~/server/commands/reconcile.ts';
import { startCheckout } from '~/server/commands/start-checkout.ts';
import { execute } from '~/server/db.ts';
import { moneyCsv, moneyPdf } from '~/server/documents/money-sheet.ts';
import { earningsSheet, paymentsSheet, receiptSheet } from '~/server/documents/money-sheets.ts';
import { Booking, Charge } from '~/server/models/index.ts';
import { earningsStatement } from '~/server/queries/earnings-statement.ts';
import { moneyOfBooking } from '~/server/queries/money-of-booking.ts';
import { paidMonths } from '~/server/queries/payments-page.ts';
import { paymentsStatement } from '~/server/queries/payments-statement.ts';
import { makeCast, type Cast } from '../../support/cast.ts';
import { makeAgreedBooking, makePayoutAccount, openMoneyHouse, sawAndSign, type MoneyHouse } from '../../support/money-market.ts';

let house: MoneyHouse;
let cast: Cast;
let first: Booking;
const year = String(new Date().getFullYear());

beforeAll(async () => {
  house = await openMoneyHouse();
  cast = await makeCast();
  house.fake.control.topUp(10_000_000);
  await reconcile(new Date());
  await makePayoutAccount(house, cast.bram);
  const settle = async (cost: number): Promise<Booking> => {
    const booking = await makeAgreedBooking(cast.ada, cast.bram);
    house.fake.control.pay(new URL(await startCheckout(cast.ada, { booking: booking.number }, new Date())).pathname.split('/').at(-1) ?? '');
    await house.work();
    await sawAndSign(booking, cost);
    await house.work();
    return booking;
  };
  first = await settle(50_000);
  const lost = await settle(20_000);
  const charge = await Charge.findOne({ where: {}, order: [['receivedAt', 'DESC']], rejectOnEmpty: true });
  house.fake.control.closeDispute(house.fake.control.openDispute(charge.providerChargeId).id, 'lost');
  await house.work();
  expect(lost.number).toBeGreaterThan(first.number);
});
afterAll(() => house.close());

describe('a sawyer’s year', () => {
  it('sums what the ledger says, with what a lost dispute took back', async () => {
    const statement = await earningsStatement(cast.bram.id, year);
    expect(statement.lines.map(({ what, workCents, feeCents, toSawyerCents }) => [what, workCents, feeCents, toSawyerCents])).toEqual([
      ['settlement', 50_000, 2_500, 47_500], ['settlement', 20_000, 1_000, 19_000], ['dispute', -19_000, 0, -19_000],
    ]);
    expect(statement.totals).toEqual({ workCents: 51_000, taxCents: 0, feeCents: 3_500, toSawyerCents: 47_500 });
    expect((await earningsStatement(cast.bram.id, '2019')).lines).toEqual([]);
    expect((await earningsStatement(cast.cleo.id, year)).lines).toEqual([]);
    const [month] = statement.lines.map(({ day }) => day.slice(0, 7));
    expect((await earningsStatement(cast.bram.id, month ?? '')).lines.length).toBeGreaterThan(0);
  });
});

describe('a landowner’s year', () => {
  it('has what was paid and what came back, by card and by the bank', async () => {
    const statement = await paymentsStatement(cast.ada.id, year);
    expect(statement.totals).toEqual({ paidCents: 120_000, backCents: 10_000 + 40_000 + 20_000 });
    expect(statement.lines.filter(({ what }) => what === 'dispute')).toHaveLength(1);
    expect(await paidMonths(cast.ada)).toContain(statement.lines[0]?.day.slice(0, 7));
  });
});

describe('numbers', () => {
  const number = (content: unknown, accountId = cast.bram.id): Promise<string> => numberDocument({ accountId, kind: 'earnings', subject: year, content }, new Date());

  it('never repeat: the same content keeps its own, also when asked for at once', async () => {
    const same = await Promise.all(Array.from({ length: 6 }, () => number({ total: 1 })));
    expect(new Set(same).size).toBe(1);
    const others = [await number({ total: 2 }), await number({ total: 1 }, cast.ada.id), await numberDocument({ accountId: cast.bram.id, kind: 'receipt', subject: year, content: { total: 1 } }, new Date())];
    expect(new Set([same[0], ...others].map((one) => one?.slice(2))).size).toBe(4);
  });

  it('are kept by the database', async () => {
    await number({ total: 3 });
    await expect(execute('DELETE FROM money_document')).rejects.toThrow();
    await expect(execute(`UPDATE money_document SET sha256 = 'x'`)).rejects.toThrow();
  });
});

describe('paper and spreadsheet', () => {
  it('a spreadsheet reads the same rows', async () => {
    const sheet = earningsSheet('=Bram', await earningsStatement(cast.bram.id, year), 'E-1');
    const read = Papa.parse<string[]>(moneyCsv(sheet).trimEnd()).data;
    expect(read[0]).toEqual(['Earnings', 'E-1']);
    expect(read[1]).toEqual(['Sawyer', `'=Bram`]);
    expect(read.at(-1)).toEqual([`${year} in all`, '', '$510.00', '$0.00', '$35.00', '$475.00']);
  });

  it('paper is a PDF with its number, over as many pages as it needs', async () => {
    const statement = await paymentsStatement(cast.ada.id, year);
    const long = { ...statement, lines: Array.from({ length: 120 }, () => statement.lines[0]).filter((line) => line !== undefined) };
    const pdf = Buffer.from(await moneyPdf(paymentsSheet('Ada', long, 'P-1'))).toString('latin1');
    expect(pdf.startsWith('%PDF-')).toBe(true);
    expect(Number(/\/Count (\d+)/.exec(pdf)?.[1])).toBeGreaterThan(2);
  });

  it('a receipt says the same to each side in their own terms', async () => {
    const sheet = async (viewer: Cast['ada']): Promise<string[]> => receiptSheet(await moneyOfBooking(viewer, first.number), 'R-1').totals.map((row) => `${row[0]} ${row[3]}`);
    expect(await sheet(cast.ada)).toEqual(['The work came to $500.00', 'Paid for the work $500.00', 'Back to your card $100.00']);
    expect(await sheet(cast.bram)).toEqual(['The work came to $500.00', 'Paid for the work $500.00', 'Fee (5 %, not on tax) −$25.00', 'To the sawyer $475.00']);
  });
});
