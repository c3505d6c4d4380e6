import { createRequire } from 'node:module';
import type { Point } from '~/domain/geo.ts';

const find = createRequire(import.meta.url)('tz-lookup') as (lat: number, lng: number) => string;

/** The IANA time zone at a point, from boundaries packed with the application (public domain). */
export const timeZoneAt = (point: Point): string => find(point.lat, point.lng);
