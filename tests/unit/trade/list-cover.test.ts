import { describe, expect, it } from 'vitest';
import { LIST_PLAN_VERSION, coverWords, listCover, listInWords, type ListCover } from '~/domain/trade/list-cover.ts';

const piece = (id: string, label: string, count: number) => ({ id, label, thicknessIn: 2, widthIn: 6, lengthFt: 8, count, sizing: 'full-sawn' as const, forDwelling: false, kind: 'board' as const });
const list = (...short: readonly [string, number, number][]) => ({
  covered: short.map(([id, made, missing]) => ({ id, made, short: missing })), surplusBoardFeet: 0, boardFeetShort: short.reduce((sum, [, , missing]) => sum + missing * 8, 0), boundBoardFeetShort: 0, gapBoardFeet: 0, provenBest: true,
});
const planned = { revision: 3, millId: 'mill' };
const cover = (...short: readonly number[]): ListCover => listCover(list(...short.map((missing, index): [string, number, number] => [String(index), 12 - missing, missing])), short.map((_, index) => piece(String(index), index === 0 ? 'rafters' : '', 12)), planned);

describe('what a bid makes of a cut list', () => {
  it('is kept with what was planned, piece by piece', () => {
    expect(cover(3)).toEqual({ version: LIST_PLAN_VERSION, revision: 3, millId: 'mill', boardFeetShort: 24, provenBest: true, pieces: [{ label: 'rafters', size: '2 × 6 in × 8 ft', count: 12, short: 3 }] });
  });
  it('counts a piece that the plan does not know as short', () => {
    expect(listCover(list(), [piece('x', '', 5)], planned).pieces[0]?.short).toBe(5);
  });
  it('says made, or which pieces are short', () => {
    expect(coverWords(cover(0, 0))).toEqual({ made: true, text: 'made', note: 'all 2 sizes' });
    expect(coverWords(cover(3, 0, 1, 1, 1))).toEqual({ made: false, text: 'short, 48 bf', note: '3 of 12 rafters (2 × 6 in × 8 ft); 1 of 12 2 × 6 in × 8 ft; 1 of 12 2 × 6 in × 8 ft; and 1 more' });
  });
  it('says over a comparison who makes it, once every bid is worked out', () => {
    const bids = (...all: readonly (number | null)[]) => all.map((short, index) => ({ sawyer: ['Ash', 'Birch', 'Cedar'][index] ?? '', cover: short === null ? null : cover(short) }));
    expect(listInWords(bids(0))).toEqual([]);
    expect(listInWords(bids(0, null))).toEqual([]);
    expect(listInWords(bids(0, 0))).toEqual(['Every mill makes your cut list as planned.']);
    expect(listInWords(bids(4, 0, 2))).toEqual(['Your cut list is made by Birch only; on the other mills it comes out short.']);
    expect(listInWords(bids(4, 1))).toEqual(['No mill makes the whole of your cut list from these logs; Birch leaves least short, 8 bf.']);
  });
});
