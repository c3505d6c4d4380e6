import { describe, expect, it } from 'vitest';
import { endOfRange, expectedCourse } from '~/domain/timber/drying-course.ts';

describe('the expected band of a drying curve', () => {
  it('begins at the reading, meets 20 % after the shortest and the longest published days, and ends in the air', () => {
    const course = expectedCourse(60, 12, { from: 50, to: 200 }, 200, 4) ?? [];
    expect(course.map(({ days }) => days)).toEqual([0, 50, 100, 150, 200]);
    expect([course[0]?.fastPct, course[0]?.slowPct]).toEqual([60, 60]);
    expect(course[1]?.fastPct).toBeCloseTo(20, 9);
    expect(course[4]?.slowPct).toBeCloseTo(20, 9);
    // 60 − 12 = 48 over 20 − 12 = 8 is a sixth in 50 days; a sixth of 8 is left after 100: 12 + 8 / 6.
    expect(course[2]?.fastPct).toBeCloseTo(12 + 8 / 6, 9);
    // Half of the 200 days takes the root of that sixth: 12 + 48 / √6.
    expect(course[2]?.slowPct).toBeCloseTo(12 + 48 / Math.sqrt(6), 9);
  });
  it('is not drawn for boards that are air-dried, or in air that never dries them so far', () => {
    expect(expectedCourse(19, 12, { from: 50, to: 200 }, 100)).toBeNull();
    expect(expectedCourse(60, 21, { from: 50, to: 200 }, 100)).toBeNull();
  });
  it('says which end of the days to expect', () => expect([1, 3, 4, 6, 7, 9, 12].map(endOfRange)).toEqual(['long', 'middle', 'short', 'short', 'middle', 'long', 'long']));
});
