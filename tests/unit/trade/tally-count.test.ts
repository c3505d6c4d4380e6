import { describe, expect, it } from 'vitest';
import { priceWork } from '~/domain/trade/price.ts';
import { countTally, NO_EXTRAS, slabSquareFeet, type JobTally, type TalliedBoard } from '~/domain/trade/tally-count.ts';
import { chargedLogScale } from '~/domain/trade/log-charge.ts';
import { logToCharge } from '~/domain/trade/bid-estimate.ts';
import { OAK_TERMS, termsWith } from '../../support/rate-cards.ts';

const board = (thicknessIn: number, widthIn: number, lengthFt: number, count: number, logId = 'log-1', kind: TalliedBoard['kind'] = 'board'): TalliedBoard => ({ kind, logId, thicknessIn, widthIn, lengthFt, count });
const tally = (boards: readonly TalliedBoard[], rest: Partial<JobTally> = {}): JobTally => ({ boards, clock: [], blades: [], culls: [], extras: NO_EXTRAS, ...rest });
const logs = [
  logToCharge({ id: 'log-1', species: 'white-oak', smallEndIn: 18, lengthFt: 12 }),
  logToCharge({ id: 'log-2', species: 'white-oak', smallEndIn: 16, lengthFt: 12 }),
  logToCharge({ id: 'log-3', species: 'white-oak', smallEndIn: 10, lengthFt: 8 }),
];

describe('lumber tally', () => {
  it('counts by the card’s rule; boards out of size are recorded at nothing', () => {
    const boards = [board(1, 8, 12, 20), board(1, 8, 12, 5, 'log-1', 'out-of-size')];
    expect(countTally(OAK_TERMS, tally(boards), logs).boardFeet).toBe(160); // 20 × 8
    const exact = termsWith({ basis: { kind: 'lumber-tally', rule: 'exact', perBf: { withCents: 50, withoutCents: 50 } } });
    expect(countTally(exact, tally([board(2, 6, 10, 3)]), logs).boardFeet).toBe(30); // 2 × 6 × 10 / 12 × 3
  });
  it('counts accepted added logs by themselves, and quartersawn and thin boards for their surcharges', () => {
    const boards = [board(1, 8, 12, 10), board(0.75, 6, 12, 4, 'log-2'), board(1, 8, 12, 3, 'log-3')];
    const work = countTally(OAK_TERMS, tally(boards, { extras: { ...NO_EXTRAS, addedLogIds: ['log-3'], quartersawnLogIds: ['log-2'] } }), logs);
    // 10 × 8 = 80; 4 × 6 = 24 (¾ counts as 1 in); added 3 × 8 = 24
    expect(work).toMatchObject({ boardFeet: 104, addedBoardFeet: 24, quartersawnBf: 24, underFourQuarterBf: 24 });
  });
});

describe('log scale', () => {
  const terms = termsWith({ basis: { kind: 'log-scale', rule: 'internationalQuarter', smallestLog: { diameterIn: 12, lengthFt: 8 }, perBf: { withCents: 40, withoutCents: 40 } } });
  it('counts the logs sawn, none for less than the smallest log counted', () => {
    if (terms.card.basis.kind !== 'log-scale') throw new Error('the card charges log scale');
    // International ¼: 18 × 12 is 170, 16 × 12 is 130; 10 × 8 is 30 and counts as 12 × 8, which is 45.
    expect(chargedLogScale(terms.card.basis, logs)).toBe(345);
    expect(countTally(terms, tally([board(1, 8, 12, 1, 'log-1'), board(1, 6, 8, 1, 'log-3')]), logs).boardFeet).toBe(215);
  });
  it('leaves out a rotten log though a few boards came from it', () => {
    const work = countTally(terms, tally([board(1, 8, 12, 1, 'log-1'), board(1, 8, 12, 1, 'log-2')], { culls: [{ logId: 'log-2', openingMinutes: 20, passes: 2 }] }), logs);
    expect(work).toMatchObject({ boardFeet: 170, cullOpeningMinutes: 20, cullPasses: 2 });
  });
});

describe('slabs', () => {
  it('are the mean of both faces at mid-length', () => {
    // faces 22 and 18 in: 20 / 12 × 9 ft = 15 sq ft each
    const slab: TalliedBoard = { kind: 'slab', logId: 'log-1', thicknessIn: 2.5, widthIn: 22, secondWidthIn: 18, lengthFt: 9, count: 2 };
    expect(slabSquareFeet(slab)).toBe(30);
    const work = countTally(termsWith({ slabs: { kind: 'board-foot', cents: 60 } }), tally([slab]), logs);
    expect(work).toMatchObject({ boardFeet: 0, slabSquareFeet: 30, slabBoardFeet: 75 }); // 30 × 2.5
    expect(priceWork(termsWith({ slabs: { kind: 'board-foot', cents: 60 } }), work).sawingCents).toBe(4_500);
  });
});

describe('a sawyer’s surcharges on logs', () => {
  it('count logs over the card’s limits among those sawn, and dragged logs', () => {
    const terms = termsWith({ surcharges: { quartersawnPerBf: 0, underFourQuarterPerBf: 0, overWide: { aboveIn: 19, perLogCents: 2_500 }, overLong: { aboveFt: 10, perLogCents: 1_000 }, dirtyPerLog: 500 } });
    const work = countTally(terms, tally([board(1, 8, 12, 1, 'log-1'), board(1, 8, 12, 1, 'log-2'), board(1, 6, 8, 1, 'log-3')], { extras: { ...NO_EXTRAS, draggedLogIds: ['log-3'] }, blades: [{ blade: 're-sharpened', cause: 'dirt' }] }), logs);
    // Butts with bark: 18 + 1.5 and 16 + 1.5 in inside bark, white oak's bark on; the 10-in log is under both limits.
    expect(work).toMatchObject({ overLongLogs: 2, dirtyLogs: 1, bladesResharpened: 1 });
    expect(work.overWideLogs).toBe(logs.filter(({ largestEndObIn }) => largestEndObIn > 19).length);
    expect(work.overWideLogs).toBeGreaterThan(0);
  });
});
