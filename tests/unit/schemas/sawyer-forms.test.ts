import { describe, expect, it } from 'vitest';
import { bidForm } from '~/schemas/bid-form.ts';
import { millForm } from '~/schemas/mill-form.ts';
import { rateCardForm, rateCardTyped } from '~/schemas/rate-card-form.ts';
import { OAK_CARD, termsWith } from '../../support/rate-cards.ts';

const problems = (read: { success: boolean; error?: { issues: readonly { path: PropertyKey[]; message: string }[] } | undefined }) =>
  Object.fromEntries((read.error?.issues ?? []).map(({ path, message }) => [path.join('.'), message]));

describe('the rate card form', () => {
  it('gives back every card it was filled in with', () => {
    const cards = [
      OAK_CARD,
      termsWith({ basis: { kind: 'log-scale', rule: 'doyle', smallestLog: { diameterIn: 12.5, lengthFt: 8 }, perBf: { withCents: 45, withoutCents: 40 } }, tax: { pct: 5.5, label: 'Sales tax' }, cullOpening: null }).card,
      termsWith({
        basis: { kind: 'hourly', from: 'arrival', perHour: { withCents: 11_000, withoutCents: 9_550 } }, slabs: { kind: 'square-foot', cents: 325 },
        surcharges: { quartersawnPerBf: 15, underFourQuarterPerBf: 5, overWide: { aboveIn: 28, perLogCents: 2_500 }, overLong: { aboveFt: 16.5, perLogCents: 2_000 }, dirtyPerLog: 1_000 },
        extras: { movingMill: 4_000, waitingPerHour: 6_000, wasteHauled: 0, wasteBundled: 3_000, stickerEach: 40, deliveryPerLoad: 7_500 },
        minimum: { cents: 25_000, covers: 'sawing-only' }, travel: { freeMiles: 20, perMileCents: 150, owedAgainAfterRain: true },
      }).card,
    ];
    for (const card of cards) expect(rateCardForm.parse(rateCardTyped(card))).toEqual(card);
  });
  it('names every field that is wrong at once', () => {
    expect(problems(rateCardForm.safeParse({ ...rateCardTyped(OAK_CARD), priceWith: 'cheap', freeMiles: '3.5', basis: '' }))).toEqual({
      basis: 'Choose what you charge by.',
      priceWith: 'Write an amount in dollars, like 75 or 0.55; at most $1,000,000.',
      freeMiles: 'Write a whole number.',
    });
  });
  it('asks only for what the chosen basis needs', () => {
    expect(problems(rateCardForm.safeParse({ ...rateCardTyped(OAK_CARD), basis: 'log-scale', logRule: '' }))).toEqual({ logRule: 'Choose the log rule.' });
    expect(rateCardForm.safeParse({ ...rateCardTyped(OAK_CARD), logRule: '', clockFrom: '' }).success).toBe(true);
  });
});

describe('the mill form', () => {
  const typed = { name: 'Wide band', kind: 'band', kerfIn: '3/32', largestLogIn: '30', widestCutIn: '26"', widestBoardIn: '2 ft', longestFt: "18' 6\"", shortestFt: '4', paceBfPerHour: '250', turnsLogsBy: 'machine' };
  it('reads fractions and units', () => {
    expect(millForm.parse(typed)).toMatchObject({ kerfIn: 0.09375, widestCutIn: 26, widestBoardIn: 24, longestFt: 18.5 });
  });
  it('refuses limits that contradict each other, at their fields', () => {
    expect(problems(millForm.safeParse({ ...typed, widestCutIn: '31', shortestFt: '20' }))).toEqual({
      shortestFt: 'The shortest log is longer than the longest.',
      widestCutIn: 'The widest cut is wider than the largest log.',
    });
  });
});

describe('the bid form', () => {
  const typed = { millId: '0d2f6a7e-95b1-4c53-8f0e-6f1f1f6c9a01', listingRevision: '1', offBearer: 'sawyer-brings', waste: 'left', roadMiles: '31', metalCap: '105', days: ['2026-12-10', ''], message: '' };
  it('reads days, and one day alone', () => {
    expect(bidForm.parse(typed).days).toEqual(['2026-12-10']);
    expect(bidForm.parse({ ...typed, days: '2026-12-10' }).days).toEqual(['2026-12-10']);
  });
  it('wants a day, a real one, and a reason for an own figure', () => {
    expect(problems(bidForm.safeParse({ ...typed, days: [] }))).toHaveProperty('days', 'Offer at least one day you could come.');
    expect(problems(bidForm.safeParse({ ...typed, days: ['2026-02-30'] }))).toHaveProperty('days');
    expect(problems(bidForm.safeParse({ ...typed, ownBf: '1,100' }))).toHaveProperty('ownReason');
  });
});
