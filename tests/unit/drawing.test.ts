import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { boardRect, closedPath, outline, ringRadii, seedOf, type Point } from '~/domain/drawing.ts';

/** Distance of a side, between its two ends, from the pith. */
function sideDistance(a: Point, b: Point): number {
  const [dx, dy] = [b.x - a.x, b.y - a.y];
  const along = Math.min(1, Math.max(0, -(a.x * dx + a.y * dy) / (dx * dx + dy * dy)));
  return Math.hypot(a.x + along * dx, a.y + along * dy);
}

describe('the drawing of a log end', () => {
  it('never cuts into the measured circle, so that no board is drawn across the bark', () => {
    fc.assert(
      fc.property(fc.double({ min: 2, max: 30, noNaN: true }), fc.nat(), fc.double({ min: 0, max: 0.2, noNaN: true }), (radius, seed, unevenness) => {
        const corners = outline(radius, seed, unevenness);
        corners.forEach((corner, index) => expect(sideDistance(corner, corners[(index + 1) % corners.length] ?? corner)).toBeGreaterThanOrEqual(radius * (1 - 1e-9)));
      }),
    );
  });

  it('stays within its unevenness and is the same for the same seed', () => {
    const corners = outline(10, seedOf('log 7'), 0.06);
    for (const { x, y } of corners) expect(Math.hypot(x, y)).toBeLessThanOrEqual(10 * 1.06 * 1.02);
    expect(outline(10, seedOf('log 7'), 0.06)).toEqual(corners);
    expect(outline(10, seedOf('log 8'), 0.06)).not.toEqual(corners);
    expect(closedPath(corners)).toMatch(/^M[-\d. L]+Z$/);
  });

  it('turns a board of a sawing plan into a rectangle with y downward', () => {
    const board = { xIn: -4, yIn: 1, thicknessIn: 1.25, widthIn: 8, turned: false };
    expect(boardRect(board)).toEqual({ x: -4, y: -2.25, width: 8, height: 1.25 });
    expect(boardRect({ ...board, turned: true })).toEqual({ x: -4, y: -9, width: 1.25, height: 8 });
  });

  it('draws rings closer together toward the bark', () => {
    const radii = [0, ...ringRadii(10, 6)];
    const steps = radii.slice(1).map((radius, index) => radius - (radii[index] ?? 0));
    for (let index = 1; index < steps.length; index += 1) expect(steps[index]).toBeLessThan(steps[index - 1] ?? 0);
    expect(Math.max(...radii)).toBeLessThan(10);
  });
});
