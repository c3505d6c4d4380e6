import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { NO_WORK } from '~/domain/trade/price.ts';
import { settle, settleCancellation, split } from '~/domain/trade/settlement.ts';
import { cancelCutOff, dayStart } from '~/domain/time.ts';
import { OAK_TERMS, termsWith } from '../../support/rate-cards.ts';

const money = (heldCents: number) => ({ heldCents, feeBasisPoints: 500 });

describe('the fee', () => {
  it('is taken on what is payable without tax', () => {
    // 100.00 work + 8.00 tax, 200.00 held: fee 5.00, transfer 103.00, back 92.00
    expect(split(10_800, 800, money(20_000))).toEqual({ payableCents: 10_800, taxCents: 800, feeCents: 500, transferCents: 10_300, refundCents: 9_200 });
  });

  it('when only part is payable, the tax is the same part', () => {
    // half of 108.00 is 54.00, of which 4.00 is tax: fee on 50.00 is 2.50
    expect(split(10_800, 800, money(5_400))).toEqual({ payableCents: 5_400, taxCents: 400, feeCents: 250, transferCents: 5_150, refundCents: 0 });
  });

  it('leaves nothing over and nothing missing, whatever is held', () => {
    fc.assert(
      fc.property(fc.nat(2_000_000), fc.nat(2_000_000), fc.nat(100), fc.nat(2_000), (cost, held, taxPct, feeBasisPoints) => {
        const tax = Math.floor((cost * taxPct) / (100 + taxPct));
        const result = split(cost, tax, { heldCents: held, feeBasisPoints });
        expect(result.transferCents + result.feeCents + result.refundCents).toBe(held);
        expect(result.payableCents).toBeLessThanOrEqual(held);
        expect(Math.min(result.transferCents, result.feeCents, result.refundCents, result.taxCents)).toBeGreaterThanOrEqual(0);
      }),
    );
  });
});

describe('cancelling', () => {
  const cutOffAt = cancelCutOff(dayStart('2026-12-10', 'America/Chicago'));
  const after = new Date(cutOffAt.getTime() + 1);
  const before = cutOffAt;

  it('is free until 48 hours before the first day starts, that instant included', () => {
    expect(cutOffAt.toISOString()).toBe('2026-12-08T14:00:00.000Z');
    expect(settleCancellation(OAK_TERMS, { by: 'landowner', at: before, cutOffAt }, money(41_900))).toMatchObject({ costCents: 0, feeCents: 0, transferCents: 0, refundCents: 41_900 });
  });

  it('later by the landowner owes set-up and travel, with the fee on it', () => {
    // 75.00 + 24.00 = 99.00; fee 4.95; to the sawyer 94.05; back 320.00
    expect(settleCancellation(OAK_TERMS, { by: 'landowner', at: after, cutOffAt }, money(41_900))).toMatchObject({ costCents: 9_900, feeCents: 495, transferCents: 9_405, refundCents: 32_000 });
  });

  it('owes a set-up for each landing, the travel once, and no tax', () => {
    const terms = termsWith({ tax: { pct: 5, label: 'Tax' } }, { landings: 2 });
    expect(settleCancellation(terms, { by: 'landowner', at: after, cutOffAt }, money(41_900))).toMatchObject({ costCents: 17_400, taxCents: 0 });
  });

  it('by the sawyer, or by both together, returns everything', () => {
    for (const by of ['sawyer', 'both'] as const) {
      expect(settleCancellation(OAK_TERMS, { by, at: after, cutOffAt }, money(41_900))).toMatchObject({ transferCents: 0, feeCents: 0, refundCents: 41_900 });
    }
  });

  it('before anything is held takes nothing', () => {
    expect(settleCancellation(OAK_TERMS, { by: 'landowner', at: after, cutOffAt }, money(0))).toMatchObject({ payableCents: 0, transferCents: 0, refundCents: 0 });
  });
});

describe('a sawyer who leaves early or breaks down', () => {
  it('is paid the tally and one journey: no minimum, no set-up', () => {
    const terms = termsWith({ minimum: { cents: 25_000, covers: 'whole-job' } });
    // 120 × 0.50 = 60.00 + travel 24.00 = 84.00; fee 4.20
    const job = settle(terms, { ...NO_WORK, boardFeet: 120, setUps: 1, trips: 2 }, money(41_900), { endedBySawyer: true });
    expect(job).toMatchObject({ costCents: 8_400, feeCents: 420, transferCents: 7_980, refundCents: 33_500 });
  });
});
