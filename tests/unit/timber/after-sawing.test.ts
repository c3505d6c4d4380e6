import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { dryBoard, equilibriumMoisturePct, sizeAtMoisture } from '~/domain/timber/drying.ts';
import { earliestSawBy, sawBy, seasonCautions } from '~/domain/timber/saw-by.ts';
import { greenSizeFor, upToFraction } from '~/domain/timber/sizes.ts';
import { speciesCodes } from '~/domain/timber/species.ts';
import { planStack } from '~/domain/timber/stack.ts';
import { heightByAngleFt, heightByStickFt, reachOf, usableLogs16ft } from '~/domain/timber/standing-tree.ts';

describe('drying', () => {
  const board = { species: 'northern-red-oak', temperatureF: 70, relativeHumidityPct: 40, thicknessIn: 1.125, widthIn: 8, grain: 'flat' } as const;

  test('flat-sawn red oak at 70 °F and 40 %: width by the tangential, thickness by the radial shrinkage', () => {
    const result = dryBoard(board);
    if (!result.ok) throw new Error('refused');
    const moisture = equilibriumMoisturePct(70, 40);
    expect(result.value.equilibriumMoisturePct).toBeCloseTo(7.7, 1);
    expect(result.value.widthAtEquilibriumIn).toBeCloseTo(8 * (1 - 0.086 * (1 - moisture / 30)), 12);
    expect(result.value.thicknessAtEquilibriumIn).toBeCloseTo(1.125 * (1 - 0.04 * (1 - moisture / 30)), 12);
    expect(result.value.airDryingDays).toEqual({ from: 70, to: 200 });
    expect(result.value.weightLbPerFt3).toBeCloseTo(((62.4 * 0.56) / (1 - 0.137 * (1 - moisture / 30))) * (1 + moisture / 100), 10);
  });

  test('quartersawn is the other way round', () => {
    const flat = dryBoard(board);
    const quarter = dryBoard({ ...board, grain: 'quarter' });
    expect(flat.ok && quarter.ok && quarter.value.widthAtEquilibriumIn > flat.value.widthAtEquilibriumIn).toBe(true);
  });

  test('white spruce has no published shrinkage: refused, naming it', () => {
    expect(dryBoard({ ...board, species: 'white-spruce' })).toMatchObject({ ok: false, problems: [{ path: 'species', message: expect.stringContaining('radial, tangential, volumetric') as string }] });
  });

  test('a size never grows in drying, moisture rises with humidity, nothing is NaN', () => {
    const temperature = fc.double({ min: -40, max: 270, noNaN: true });
    fc.assert(
      fc.property(temperature, fc.double({ min: 0, max: 95, noNaN: true }), (temperatureF, relativeHumidityPct) => {
        const moisture = equilibriumMoisturePct(temperatureF, relativeHumidityPct);
        expect(Number.isFinite(moisture) && moisture >= 0).toBe(true);
        expect(equilibriumMoisturePct(temperatureF, relativeHumidityPct + 5)).toBeGreaterThan(moisture);
        expect(sizeAtMoisture(10, 8, moisture)).toBeLessThanOrEqual(10);
      }),
    );
  });

  test('the green size for a wanted dry size gives that size back', () => {
    fc.assert(
      fc.property(fc.double({ min: 0.5, max: 12, noNaN: true }), fc.double({ min: 0, max: 12, noNaN: true }), fc.double({ min: 6, max: 30, noNaN: true }), (wantedIn, shrinkagePct, moisturePct) => {
        const green = greenSizeFor(wantedIn, 0.25, shrinkagePct, moisturePct);
        expect(sizeAtMoisture(green, shrinkagePct, moisturePct) - 0.25).toBeCloseTo(wantedIn, 8);
        expect(upToFraction(green, 16)).toBeGreaterThanOrEqual(green);
      }),
    );
  });
});

describe('saw-by (common practice, no source)', () => {
  test('pine down in July stains in three weeks, sealed in six', () => {
    expect(sawBy({ speciesCode: 'eastern-white-pine', cameDownOn: '2026-07-14', endsSealed: false }).date).toBe('2026-08-04');
    expect(sawBy({ speciesCode: 'eastern-white-pine', cameDownOn: '2026-07-14', endsSealed: true }).date).toBe('2026-08-25');
  });

  test('winter hardly counts', () => {
    expect(sawBy({ speciesCode: 'eastern-white-pine', cameDownOn: '2026-12-01', endsSealed: false }).date > '2027-04-01').toBe(true);
  });

  test('sealing never shortens it, and it never lies before the tree came down', () => {
    const day = fc.date({ min: new Date('2024-01-01'), max: new Date('2030-12-31'), noInvalidDate: true }).map((date) => date.toISOString().slice(0, 10));
    fc.assert(
      fc.property(fc.constantFrom(...speciesCodes), day, (speciesCode, cameDownOn) => {
        const open = sawBy({ speciesCode, cameDownOn, endsSealed: false });
        expect(open.date > cameDownOn).toBe(true);
        expect(sawBy({ speciesCode, cameDownOn, endsSealed: true }).date > open.date).toBe(true);
        expect(open.source).not.toBe('');
      }),
    );
  });

  test('the earliest of several logs decides', () => {
    expect(earliestSawBy(['white-oak', 'red-pine'], '2026-07-14', false)?.date).toBe('2026-08-04');
    expect(earliestSawBy([], '2026-07-14', false)).toBeUndefined();
  });

  test('a day that is not on the calendar is refused', () => {
    expect(() => sawBy({ speciesCode: 'white-oak', cameDownOn: '2026-02-30', endsSealed: false })).toThrow(RangeError);
  });

  test('oak in May is warned about wilt, pine is not', () => {
    const texts = (code: string, day: string): string => seasonCautions(code, day).map(({ text }) => text).join(' ');
    expect(texts('white-oak', '2026-05-10')).toContain('spread oak wilt');
    expect(texts('red-pine', '2026-05-10')).not.toContain('spread oak wilt');
    expect(texts('white-oak', '2026-01-10')).toContain('slippery bark');
  });
});

describe('standing tree', () => {
  test('similar triangles and angles agree on level ground', () => {
    expect(heightByStickFt(100, 18, 25)).toBeCloseTo(72, 10);
    expect(heightByAngleFt(100, 45, 0)).toBeCloseTo(100, 10);
    expect(heightByAngleFt(100, 45, -45)).toBeCloseTo(200, 10);
  });

  test('the clear zone is two tree lengths (29 CFR 1910.266), with a professional named first', () => {
    const reach = reachOf(70);
    expect(reach.clearZoneFt).toBe(140);
    expect(reach.reachFt).toBeCloseTo(77, 10);
    expect(reach.cautions[0]?.text).toContain('professional');
  });

  test('usable logs by halves', () => {
    expect([usableLogs16ft(17), usableLogs16ft(24.9), usableLogs16ft(25), usableLogs16ft(0)]).toEqual([1, 1, 1.5, 0]);
  });
});

test('a stack of 40 boards 1 × 8 in × 10 ft, 4 ft wide', () => {
  const stack = planStack({ boards: [{ thicknessIn: 1, widthIn: 8, lengthFt: 10, count: 40 }], stackWidthFt: 4, stickerIn: 0.75, spacingIn: 16, densityLbPerFt3: 60 });
  // 40 × 8.75 in less the last gap is 349.25 in over 48: 8 layers. 120 in / 16 in: 8 spaces, 9 stickers, under every layer and on top.
  expect(stack).toMatchObject({ layers: 8, stickersPerLayer: 9, stickers: 81, footprintSqFt: 40 });
  expect(stack.heightIn).toBeCloseTo(8 + 9 * 0.75, 10);
  expect(stack.weightLb).toBeCloseTo(((40 * 8 * 10) / 144) * 60, 8);
});
