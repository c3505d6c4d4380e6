import type { Point } from '~/domain/geo.ts';

/** An address of the list measured from a point of the map. */
export const aroundHere = (here: string, { lat, lng }: Point, radiusMi?: number): string =>
  `${here}${here.includes('?') ? '&' : '?'}lat=${lat.toFixed(3)}&lng=${lng.toFixed(3)}${radiusMi === undefined ? '' : `&radiusMi=${radiusMi}`}`;
