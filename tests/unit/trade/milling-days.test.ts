import { describe, expect, it } from 'vitest';
import { weekdaysSaid } from '~/domain/trade/milling-days.ts';

describe('days of the week in words', () => {
  it('are a range where three or more follow each other', () => {
    expect(weekdaysSaid([1, 2, 3, 4, 5, 6])).toBe('Monday to Saturday');
    expect(weekdaysSaid([6, 5, 7])).toBe('Friday to Sunday');
    expect(weekdaysSaid([1, 2, 3, 6, 7])).toBe('Monday to Wednesday, Saturday, Sunday');
    expect(weekdaysSaid([1, 3, 5])).toBe('Monday, Wednesday, Friday');
    expect(weekdaysSaid([2])).toBe('Tuesday');
    expect(weekdaysSaid([])).toBe('');
  });
});
