import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { cellsNear, leastProduct, unitVector } from '~/domain/finding/nearby.ts';
import { cellOf, cellsOf, DEEPEST_TILE, FINEST, mapPlace, markLevel, TILE_EXTENT, unitsPerStep } from '~/domain/finding/tiles.ts';
import { greatCircleMiles, type Point } from '~/domain/geo.ts';
import { pointAt } from '~/islands/logs-map/shapes.ts';

const anywhere = fc.record({ lat: fc.double({ min: -89, max: 89, noNaN: true }), lng: fc.double({ min: -180, max: 180, noNaN: true }) });
const miles = fc.double({ min: 1, max: 500, noNaN: true });
const product = (a: Point, b: Point): number => unitVector(a).reduce((sum, part, axis) => sum + part * (unitVector(b)[axis] ?? 0), 0);
const turned = (lng: number): number => ((((lng + 180) % 360) + 360) % 360) - 180;

describe('what lies within a distance', () => {
  it('is told by the product of two vectors as by the haversine', () => {
    fc.assert(fc.property(anywhere, anywhere, miles, (from, to, radius) => {
      const away = greatCircleMiles(from, to);
      if (Math.abs(away - radius) > 1e-4) expect(product(from, to) >= leastProduct(radius)).toBe(away < radius);
    }), { numRuns: 500, seed: 1 });
  });

  it('is in one of the stretches of cells, on every side, over the 180th meridian too', () => {
    fc.assert(fc.property(anywhere, miles, fc.double({ min: 0, max: 1, noNaN: true }), fc.double({ min: 0, max: 360, noNaN: true }), (from, radius, share, bearing) => {
      const there = pointAt(from, radius * share, bearing);
      const cell = cellOf({ lat: there.lat, lng: turned(there.lng) }, FINEST);
      expect(cellsNear(from, radius).some(({ first, end }) => cell >= first && cell < end)).toBe(true);
    }), { numRuns: 2000, seed: 2 });
  });

  it('is asked of few stretches that reach little beyond it', () => {
    fc.assert(fc.property(fc.record({ lat: fc.double({ min: 19, max: 65, noNaN: true }), lng: fc.double({ min: -165, max: -66, noNaN: true }) }), miles, (from, radius) => {
      const ranges = cellsNear(from, radius);
      expect(ranges.length).toBeLessThanOrEqual(40);
      for (const [index, { first, end }] of ranges.entries()) expect(first).toBeLessThan(Math.min(end, ranges[index + 1]?.first ?? Infinity));
      const { x, y } = mapPlace(from);
      const across = 2 * Math.abs(mapPlace(pointAt(from, radius, 90)).x - x) * 2 * Math.abs(mapPlace(pointAt(from, radius, 0)).y - y);
      expect(ranges.reduce((sum, { first, end }) => sum + end - first, 0)).toBeLessThan(across * 4);
    }), { numRuns: 300, seed: 3 });
  });
});

describe('tiles', () => {
  it('divide the map: a point’s cell is in the tile that holds it, at the position within', () => {
    fc.assert(fc.property(fc.record({ lat: fc.double({ min: -85, max: 85, noNaN: true }), lng: fc.double({ min: -180, max: 179.99, noNaN: true }) }), fc.integer({ min: 0, max: DEEPEST_TILE }), (point, z) => {
      const { x, y } = mapPlace(point);
      const tile = { z, x: Math.floor(((point.lng + 180) / 360) * 2 ** z), y: Math.floor(y / 2 ** (FINEST - z)) };
      const { first, end } = cellsOf(tile);
      const cell = cellOf(point, FINEST);
      expect(cell >= first && cell < end).toBe(true);
      const [east, south] = [x * unitsPerStep(z) - tile.x * TILE_EXTENT, y * unitsPerStep(z) - tile.y * TILE_EXTENT];
      expect(Math.min(east, south)).toBeGreaterThanOrEqual(0);
      expect(Math.max(east, south)).toBeLessThan(TILE_EXTENT);
      expect(Math.floor(cell / 4 ** (FINEST - markLevel(z)))).toBe(cellOf(point, markLevel(z)));
    }), { numRuns: 500, seed: 4 });
  });
});
