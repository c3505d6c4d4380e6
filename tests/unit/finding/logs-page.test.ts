import { describe, expect, it } from 'vitest';
import { greatCircleMiles } from '~/domain/geo.ts';
import { bounds, pointAt, ringMiles } from '~/islands/logs-map/shapes.ts';
import { logsAddress, readLogsPage } from '~/schemas/logs-page.ts';

const read = (query: string) => readLogsPage(new URLSearchParams(query));

describe('the address of the page of logs', () => {
  it('takes empty fields of the form as left out', () => {
    const { asked, problems } = read('zip=54665&radiusMi=40&species=&minBoardFeet=&maxLargestEndIn=&sort=distance');
    expect(problems).toEqual([]);
    expect(asked).toMatchObject({ zip: '54665', radiusMi: 40, sort: 'distance', limit: 20 });
    expect(asked.species).toBeUndefined();
  });

  it('names what cannot be used, keeps what was typed, and still asks for a list', () => {
    const { asked, problems, typed } = read('zip=5466&minBoardFeet=lots&species=white-oak&radiusMi=40&sort=distance');
    expect(problems.map(({ path }) => path).sort()).toEqual(['minBoardFeet', 'zip']);
    expect(asked.species).toBe('white-oak');
    expect(asked.zip).toBeUndefined();
    expect(typed).toMatchObject({ zip: '5466', minBoardFeet: 'lots' });
  });

  it('lets a ZIP go before a point, and ignores what it does not know', () => {
    const { asked, problems } = read('zip=54665&lat=40&lng=-90&utm_source=letter');
    expect(problems).toEqual([]);
    expect([asked.zip, asked.lat]).toEqual(['54665', undefined]);
  });

  it('begins again when a cursor belongs to another order', () => {
    const { asked, problems } = read('zip=54665&cursor=WyJjbG9zaW5nIl0');
    expect([asked.cursor, problems]).toEqual([undefined, []]);
  });

  it('writes addresses without the empty fields and without an old cursor', () => {
    expect(logsAddress('/logs', { zip: '54665', species: '', cursor: 'abc' }, { radiusMi: '80' })).toBe('/logs?zip=54665&radiusMi=80');
    expect(logsAddress('/logs', { cursor: 'abc' })).toBe('/logs');
  });
});

describe('rings of distance', () => {
  const from = { lat: 43.53, lng: -90.93 };
  it('lie as far away as they say, all round (haversine against the direct formula)', () => {
    for (const bearing of [0, 45, 90, 200, 359]) for (const miles of [1, 40, 500]) expect(greatCircleMiles(from, pointAt(from, miles, bearing))).toBeCloseTo(miles, 6);
  });
  it('divide a radius into at most five even steps', () => {
    expect(ringMiles(40)).toEqual([10, 20, 30, 40]);
    expect(ringMiles(50)).toEqual([10, 20, 30, 40, 50]);
    expect(ringMiles(500)).toEqual([100, 200, 300, 400, 500]);
    expect(ringMiles(1)).toEqual([1]);
  });
  it('fit in the first view', () => {
    const [west, south, east, north] = bounds(from, 40, []);
    expect(greatCircleMiles(from, { lat: north, lng: from.lng })).toBeCloseTo(40, 6);
    expect(west).toBeLessThan(from.lng);
    expect(south).toBeLessThan(from.lat);
    expect(east).toBeGreaterThan(from.lng);
  });
});
