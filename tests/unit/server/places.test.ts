import { describe, expect, it } from 'vitest';
import { greatCircleMiles } from '~/domain/geo.ts';
import { countyOf, placeOf, placeOfZip, pointOfZip, townsNear, zipOf } from '~/server/services/places.ts';

// Positions: US Census ZIP code tabulation areas and county outlines, GeoNames towns. Which county holds which town is
// common geography, checked against the Census county names.
describe('places', () => {
  it('reads a ZIP as people write it and refuses what is none', () => {
    expect(zipOf(' 54665 ')).toBe('54665');
    expect(zipOf('54665-0123')).toBe('54665');
    for (const wrong of ['5466', '546655', 'abcde', '']) expect(zipOf(wrong)).toBeNull();
  });

  it('finds town, county and state of a ZIP', () => {
    expect(placeOfZip('54665')).toMatchObject({ zip: '54665', town: 'Viroqua', county: 'Vernon', state: 'WI' });
    expect(placeOfZip('00000')).toBeNull();
  });

  it('knows a state across a river by its county, not by its nearest town', () => {
    // La Crescent, Minnesota, lies across the Mississippi from La Crosse, Wisconsin.
    expect(countyOf({ lat: 43.83, lng: -91.31 })).toEqual({ name: 'Houston', state: 'MN' });
    expect(placeOf({ lat: 43.83, lng: -91.31 })).toMatchObject({ state: 'MN' });
  });

  it('has no place at sea or abroad', () => {
    expect(countyOf({ lat: 35, lng: -50 })).toBeNull();
    expect(placeOf({ lat: 48.85, lng: 2.35 })).toBeNull();
  });

  it('lists the largest towns within a distance', () => {
    const middle = pointOfZip('54665');
    if (!middle) throw new Error('54665 has no point');
    const towns = townsNear(middle, 40, 5);
    expect(towns[0]?.name).toBe('La Crosse');
    expect(towns).toHaveLength(5);
    for (const town of towns) expect(greatCircleMiles(middle, town.point)).toBeLessThanOrEqual(40);
    const populations = towns.map((town) => town.population);
    expect(populations).toEqual([...populations].sort((a, b) => b - a));
  });
});
