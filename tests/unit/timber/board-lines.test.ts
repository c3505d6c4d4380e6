import { describe, expect, it } from 'vitest';
import { boardLine, gathered, readBoardLines, type BoardLine } from '~/domain/timber/board-lines.ts';

const oak: BoardLine = { species: 'white-oak', thicknessIn: 1.25, widthIn: 8, lengthFt: 10, count: 6 };

describe('boards written one size a line', () => {
  it('are read as the trade writes them', () => {
    expect(readBoardLines('White oak, 5/4, 8, 10, 6\n\n eastern white pine, 2, 7 1/2, 12 ft, 3 ')).toEqual({
      ok: true,
      value: [oak, { species: 'eastern-white-pine', thicknessIn: 2, widthIn: 7.5, lengthFt: 12, count: 3 }],
    });
  });

  it('are written as they are read', () => {
    const lines = [oak, { ...oak, species: 'eastern-white-pine', thicknessIn: 2, widthIn: 7.5 }];
    expect(lines.map(boardLine)).toEqual(['White oak, 5/4, 8, 10, 6', 'Eastern white pine, 2, 7 1/2, 10, 6']);
    expect(readBoardLines(lines.map(boardLine).join('\n'))).toEqual({ ok: true, value: lines });
  });

  it.each([
    ['', /at least one/],
    ['White oak, 5/4, 8, 10', /Line 1: write species/],
    ['Sawdust, 5/4, 8, 10, 6', /not a species/],
    ['White oak, thick, 8, 10, 6', /thickness/],
    ['White oak, 5/4, 61, 10, 6', /width/],
    ['White oak, 5/4, 8, 41, 6', /length/],
    ['White oak, 5/4, 8, 10, 0', /whole number/],
    [Array.from({ length: 41 }, () => 'White oak, 5/4, 8, 10, 6').join('\n'), /At most 40/],
  ])('say what is wrong: %j', (text, why) => {
    const read = readBoardLines(text);
    expect(read.ok ? '' : read.problems[0]?.message).toMatch(why);
  });

  it('are gathered by size, in order of size', () => {
    expect(gathered([oak, { ...oak, widthIn: 6 }, { ...oak, count: 2 }])).toEqual([{ ...oak, widthIn: 6 }, { ...oak, count: 8 }]);
  });
});
