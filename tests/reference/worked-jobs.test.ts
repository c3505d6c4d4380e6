/**
 * Two whole jobs by the project's own money rules, worked by hand (computed, no outside source).
 * Fee 5 %, half up.
 */
import { describe, expect, it } from 'vitest';
import { scaleLog } from '~/domain/timber/log-scale.ts';
import { NO_WORK } from '~/domain/trade/price.ts';
import { settle } from '~/domain/trade/settlement.ts';
import { largerLogs } from '~/domain/trade/on-the-day.ts';
import { countTally, NO_EXTRAS, type TalliedBoard } from '~/domain/trade/tally-count.ts';
import { OAK_TERMS, termsWith } from '../support/rate-cards.ts';

describe('oak by the hardwood rule, $310 held', () => {
  const boards = ([[1, 8, 12, 20], [1.25, 6.5, 12, 8], [2, 9, 12, 6], [0.75, 10, 11 + 8 / 12, 5]] as const).map(
    ([thicknessIn, widthIn, lengthFt, count]): TalliedBoard => ({ kind: 'board', logId: null, thicknessIn, widthIn, lengthFt, count }),
  );
  const work = countTally(OAK_TERMS, { boards, clock: [], blades: [], culls: [], extras: NO_EXTRAS }, []);
  // 378 × 0.50 = 189.00 + set-up 75 + travel (31 − 25) × 2 × 2 = 24 → 288.00
  const job = settle(OAK_TERMS, work, { heldCents: 31_000, feeBasisPoints: 500 });

  it('scales 400 by International ¼, 370 by Scribner, 330 by Doyle', () => {
    const scaled = [18, 16, 14].map((smallEndIn) => scaleLog({ smallEndIn, lengthFt: 12 }).boardFeet);
    expect(scaled.map(({ internationalQuarter }) => internationalQuarter)).toEqual([170, 130, 100]);
    expect(scaled.map(({ scribnerDecimalC }) => scribnerDecimalC)).toEqual([160, 120, 90]);
    expect(scaled.map(({ doyle }) => doyle)).toEqual([147, 108, 75]);
  });

  it('tallies 160 + 65 + 108 + 45 = 378 bf', () => {
    expect(work.boardFeet).toBe(378);
  });

  it('prices each line once', () => {
    expect(job.lines.map(({ label, amountCents }) => [label, amountCents])).toEqual([
      ['Sawing, lumber tally', 18_900],
      ['Set-up', 7_500],
      ['Travel beyond the free miles, both ways', 2_400],
    ]);
  });

  it('pays the sawyer, takes the fee and sends the rest back', () => {
    expect(job).toMatchObject({ costCents: 28_800, payableCents: 28_800, feeCents: 1_440, transferCents: 27_360, refundCents: 2_200, overHold: null });
  });
});

describe('red oak with metal, a larger log and a top-up, $480 held', () => {
  const terms = termsWith(
    { basis: { kind: 'lumber-tally', rule: 'hardwood', perBf: { withCents: 55, withoutCents: 55 } }, setUpPerLanding: 10_000 },
    { roadMiles: 12, metalCapCents: 10_500 },
  );

  it('asks the landowner first: 590 listed, 690 measured, 16.9 % more', () => {
    const larger = largerLogs([
      { id: 'Log 1', listedBf: 210, measuredBf: 210, overLimits: [] },
      { id: 'Log 2', listedBf: 210, measuredBf: 310, overLimits: [] },
      { id: 'Log 3', listedBf: 170, measuredBf: 170, overLimits: [] },
    ]);
    expect(larger).toMatchObject({ listedBf: 590, measuredBf: 690 });
    expect(larger.jobChangePct).toBeCloseTo(16.949, 3);
    expect(larger.reasons).toEqual(['The job scales 16.9 % more than listed.', 'Log 2 scales 47.6 % more than listed.']);
  });

  // 640 × 0.55 = 352.00 + 100 + four blades at 35 = 140, the cap 105 → 557.00, 77.00 over the hold
  const job = settle(terms, { ...NO_WORK, boardFeet: 640, setUps: 1, trips: 1, bladesDestroyed: 4 }, { heldCents: 48_000, feeBasisPoints: 500 });

  it('charges metal up to the cap', () => {
    expect(job.lines.filter(({ kind }) => kind === 'metal').map(({ amountCents }) => amountCents)).toEqual([14_000, -3_500]);
    expect(job).toMatchObject({ costCents: 55_700, overHold: { lackingCents: 7_700 } });
  });

  it('topped up: fee 27.85, to the sawyer 529.15', () => {
    expect(job.overHold?.ifToppedUp).toEqual({ payableCents: 55_700, taxCents: 0, feeCents: 2_785, transferCents: 52_915, refundCents: 0 });
  });

  it('or the held amount accepted: fee 24.00, to the sawyer 456.00', () => {
    expect(job.overHold?.ifHeldIsAccepted).toEqual({ payableCents: 48_000, taxCents: 0, feeCents: 2_400, transferCents: 45_600, refundCents: 0 });
  });
});
