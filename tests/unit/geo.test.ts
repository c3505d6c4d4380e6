import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { checkPoint, coarsePoint, EARTH_RADIUS_MI, greatCircleMiles } from '~/domain/geo.ts';

const point = fc.record({ lat: fc.double({ min: -85, max: 85, noNaN: true }), lng: fc.double({ min: -180, max: 180, noNaN: true }) });

describe('great circle', () => {
  it('agrees with the spherical law of cosines, an independent formula', () => {
    fc.assert(
      fc.property(point, point, (a, b) => {
        const rad = Math.PI / 180;
        const cosine = Math.sin(a.lat * rad) * Math.sin(b.lat * rad) + Math.cos(a.lat * rad) * Math.cos(b.lat * rad) * Math.cos((b.lng - a.lng) * rad);
        // The law of cosines itself loses precision under a mile and near the far side of the earth.
        fc.pre(Math.abs(cosine) < 0.9999999);
        expect(greatCircleMiles(a, b)).toBeCloseTo(EARTH_RADIUS_MI * Math.acos(cosine), 2);
      }),
    );
  });
  it('is nothing to the same point and the same both ways', () => {
    const [a, b] = [{ lat: 43.6, lng: -90.6 }, { lat: 44.1, lng: -91.2 }];
    expect(greatCircleMiles(a, a)).toBe(0);
    expect(greatCircleMiles(a, b)).toBe(greatCircleMiles(b, a));
  });
});

describe('the coarse grid', () => {
  it('moves a point by less than a cell’s half diagonal and snaps to itself', () => {
    fc.assert(
      fc.property(point, (p) => {
        const coarse = coarsePoint(p);
        expect(greatCircleMiles(p, coarse)).toBeLessThan(0.74); // ½ √(1² + 1²) = 0.707, and the columns are not exactly a mile
        expect(coarsePoint(coarse)).toEqual(coarse);
      }),
    );
  });
  it('gives every point of a cell the same answer', () => {
    const home = { lat: 43.61, lng: -90.64 };
    const coarse = coarsePoint(home);
    for (const [dLat, dLng] of [[0.006, 0], [-0.006, 0], [0, 0.008], [0, -0.008]] as const) {
      expect(coarsePoint({ lat: coarse.lat + dLat, lng: coarse.lng + dLng })).toEqual(coarse);
    }
  });
});

describe('a typed point', () => {
  it('is checked, and the two swapped is named', () => {
    expect(checkPoint(43.6, -90.6)).toEqual({ ok: true, value: { lat: 43.6, lng: -90.6 } });
    expect(checkPoint(-90.6, 43.6)).toMatchObject({ ok: false, problems: [{ path: 'lat', message: expect.stringContaining('swapped') as string }] });
    expect(checkPoint(Number.NaN, 200)).toMatchObject({ ok: false, problems: [{ path: 'lat' }, { path: 'lng' }] });
  });
});
