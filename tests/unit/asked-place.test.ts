import { describe, expect, it } from 'vitest';
import { askedPlaceFields, readAskedPlace } from '~/schemas/asked-place.ts';

const read = (query: string) => readAskedPlace(new URLSearchParams(query));

describe('from where a page about sawyers measures', () => {
  it.each([
    ['zip=54665', { zip: '54665', point: null }],
    ['lat=43.56&lng=-90.89', { zip: '', point: { lat: 43.56, lng: -90.89 } }],
    // A ZIP code that is typed takes the place of the point before.
    ['zip=54665&lat=43.56&lng=-90.89', { zip: '54665', point: null }],
    ['', { zip: '', point: null }],
  ])('?%s', (query, place) => {
    expect(read(query)).toEqual(place);
    expect(read(new URLSearchParams(askedPlaceFields(read(query))).toString())).toEqual(place);
  });

  it.each(['lat=43.56', 'lng=-90.89', 'lat=&lng=', 'lat=91&lng=0', 'lat=1e1&lng=0', 'lat=0x1&lng=0', 'lat=43.56&lng=-181', 'lat=NaN&lng=NaN'])('?%s is no place', (query) => {
    expect(read(query)).toEqual({ zip: '', point: null });
  });
});
