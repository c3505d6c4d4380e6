import { describe, expect, it } from 'vitest';
import { readSpokenBoards } from '~/domain/trade/spoken-boards.ts';

const read = (heard: string): string | null => {
  const boards = readSpokenBoards(heard);
  return boards && [boards.thicknessIn, boards.widthIn, boards.lengthFt, boards.count].join(' ');
};

describe('boards spoken beside the mill', () => {
  it.each([
    ['five quarter by eight by ten, three', '1.25 8 10 3'],
    ['Five quarters by ate by ten three boards.', '1.25 8 10 3'],
    ['5/4 x 8 x 10 times 3', '1.25 8 10 3'],
    ['5/4x8x10, 3', '1.25 8 10 3'],
    ['four quarter by twelve by eight', '1 12 8 1'],
    ['eight quarter by ten by sixteen', '2 10 16 1'],
    ['two by six by twelve', '2 6 12 1'],
    ['to by six by twelve for', '2 6 12 4'],
    ['two by six by twelve feet, twenty', '2 6 12 20'],
    ['two by seven and a half by ten', '2 7.5 10 1'],
    ['1 1/2 by 7 1/4 by 10 ft, 2', '1.5 7.25 10 2'],
    ['one inch by six inches by eight feet five boards', '1 6 8 5'],
    ['four quarter by nine by twenty two', '1 9 22 1'],
    ['four quarter by nine by twenty, two', '1 9 20 2'],
    ['four quarter by nine by twelve twenty one', '1 9 12 21'],
    ["6/4 by 8 by 10'", '1.5 8 10 1'],
    ['4/4 by 8 by 10.5', '1 8 10.5 1'],
  ])('“%s”', (heard, boards) => {
    expect(read(heard)).toBe(boards);
  });

  it.each(['', 'three', 'five quarter by eight', 'hold the cant', 'five quarter by eight by ten by four by six', 'five quarter by eight by sixty', 'zero by eight by ten', 'four quarter by ninety by ten', 'four quarter by eight by ten half', '1/0 by 8 by 10'])('does not guess at “%s”', (heard) => {
    expect(readSpokenBoards(heard)).toBeNull();
  });
});
