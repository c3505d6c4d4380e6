import { describe, expect, it } from 'vitest';
import { fitLog, fitLogs, fitPiece, largestOutsideBarkIn } from '~/domain/trade/mill-fit.ts';
import { roadMiles } from '~/domain/trade/road-miles.ts';

const MILL = { largestLogIn: 28, widestCutIn: 24, widestBoardIn: 20, longestFt: 16, shortestFt: 4 };

describe('fit', () => {
  it('compares the butt with its bark on, not the small end', () => {
    // 20 in small end, 16 ft: 20 + 16 × 0.5 / 4 = 22 in inside bark; bark 15 % of the volume: 22 × √1.15 = 23.6
    expect(largestOutsideBarkIn({ smallEndIn: 20, lengthFt: 16, barkPct: 15 })).toBeCloseTo(23.592, 3);
    expect(fitLog(MILL, { smallEndIn: 24, largeEndIn: 28, lengthFt: 12, barkPct: 15 }).reasons).toEqual(['the butt is 2 in too wide (30 in over bark, the mill takes 28)']);
    expect(fitLog(MILL, { smallEndIn: 24, largeEndIn: 26, lengthFt: 12, barkPct: 15 }).fits).toBe(true);
  });

  it('names what is too long, too short, and what cannot be split in one pass', () => {
    expect(fitLogs(MILL, [{ smallEndIn: 12, lengthFt: 18, barkPct: 10 }, { smallEndIn: 12, lengthFt: 3.5, barkPct: 10 }])).toMatchObject({
      fits: false,
      reasons: ['Log 1: 18 ft is over the longest, 16 ft.', 'Log 2: 3 ft 6 in is under the shortest, 4 ft.'],
    });
    const wide = fitLog(MILL, { smallEndIn: 24, largeEndIn: 25.5, lengthFt: 10, barkPct: 5 });
    expect(wide).toMatchObject({ fits: true, notes: ['the widest cut is 24 in, so this log cannot be split through its heart in one pass'] });
  });

  it('holds a wanted piece against the widest board', () => {
    expect(fitPiece(MILL, { widthIn: 24, lengthFt: 8 }).reasons).toEqual(['24 in wide is over the widest board, 20 in']);
    expect(fitPiece(MILL, { widthIn: 20, lengthFt: 16 }).fits).toBe(true);
  });
});

describe('road miles', () => {
  it('are a quarter more than the great circle between the coarse points, in whole miles', () => {
    // One degree of latitude is 69.09 mi on the sphere; 86.4 by road. The grid moves it by less than a mile.
    expect(Math.abs(roadMiles({ lat: 43, lng: -90 }, { lat: 44, lng: -90 }) - 86)).toBeLessThanOrEqual(1);
    expect(roadMiles({ lat: 43, lng: -90 }, { lat: 43, lng: -90 })).toBe(0);
  });
});
