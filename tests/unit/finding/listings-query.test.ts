import { describe, expect, it } from 'vitest';
import { readCursor, writeCursor } from '~/domain/finding/cursor.ts';
import { listingsQuery } from '~/schemas/listings.ts';

const paths = (asked: Record<string, string>): string[] => {
  const read = listingsQuery.safeParse(asked);
  return read.success ? [] : read.error.issues.flatMap((issue) => (issue.code === 'unrecognized_keys' ? issue.keys : [issue.path.join('.')]));
};

const id = '0f9a1c4e-3b52-4e57-9f3c-0a6d7e8f9a10';

describe('what a list of listings may be asked for', () => {
  it('takes a ZIP or a point, and every filter', () => {
    expect(paths({})).toEqual([]);
    expect(paths({ zip: '54665', radiusMi: '40', species: 'white-oak', minBoardFeet: '200', maxLargestEndIn: '30', sort: 'closing', limit: '100' })).toEqual([]);
    expect(paths({ lat: '43.53', lng: '-90.93', radiusMi: '500' })).toEqual([]);
  });

  it.each([
    [{ zip: '5466' }, 'zip'],
    [{ zip: '54665', lat: '43', lng: '-90' }, 'zip'],
    [{ lat: '43' }, 'lng'],
    [{ lat: '91', lng: '0' }, 'lat'],
    [{ lat: 'NaN', lng: '0' }, 'lat'],
    [{ lat: '1e1', lng: '0' }, 'lat'],
    [{ zip: '54665', radiusMi: '0' }, 'radiusMi'],
    [{ zip: '54665', radiusMi: '501' }, 'radiusMi'],
    [{ radiusMi: '40' }, 'radiusMi'],
    [{ zip: '54665', species: 'purple-oak' }, 'species'],
    [{ zip: '54665', minBoardFeet: '-1' }, 'minBoardFeet'],
    [{ zip: '54665', maxLargestEndIn: 'big' }, 'maxLargestEndIn'],
    [{ zip: '54665', sort: 'cheapest' }, 'sort'],
    [{ sort: 'distance' }, 'sort'],
    [{ zip: '54665', limit: '0' }, 'limit'],
    [{ zip: '54665', limit: '101' }, 'limit'],
    [{ zip: '54665', limit: '1.5' }, 'limit'],
    [{ zip: '54665', cursor: 'nonsense' }, 'cursor'],
    [{ zip: '54665', radius: '40' }, 'radius'],
  ])('refuses %o at %s', (asked, path) => {
    expect(paths(asked as Record<string, string>)).toContain(path);
  });
});

describe('cursor', () => {
  it('comes back as it went, for the sort it was written for only', () => {
    const cursor = writeCursor('distance', { key: '12345.678901234567', id });
    expect(readCursor(cursor, 'distance')).toEqual({ key: '12345.678901234567', id });
    expect(readCursor(cursor, 'closing')).toBeNull();
    expect(readCursor(writeCursor('sawBy', { key: null, id }), 'sawBy')).toEqual({ key: null, id });
  });

  it('refuses keys that the database would choke on', () => {
    for (const key of ['1; DROP', 'Infinity', '1e999', '']) expect(readCursor(writeCursor('distance', { key, id }), 'distance')).toBeNull();
    expect(readCursor(writeCursor('sawBy', { key: '2026-13-45', id }), 'sawBy')).toBeNull();
    expect(readCursor(writeCursor('closing', { key: '2026-02-30', id }), 'closing')).toBeNull();
    expect(readCursor(writeCursor('newest', { key: '2026-08-01 10:00:00.123456+00', id: 'not-an-id' }), 'newest')).toBeNull();
  });
});
