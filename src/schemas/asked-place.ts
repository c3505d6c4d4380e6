import { checkPoint, type Point } from '~/domain/geo.ts';

/** From where a page about sawyers measures, as its address says: a ZIP code as typed, or a point that a device told. */
export interface AskedPlace {
  readonly zip: string;
  readonly point: Point | null;
}

const degrees = /^-?\d{1,3}(\.\d{1,8})?$/;

/** A ZIP code takes the place of a point. What is no point on the globe is none: the page asks anew. */
export function readAskedPlace(asked: URLSearchParams): AskedPlace {
  const zip = (asked.get('zip') ?? '').trim().slice(0, 12);
  const [lat, lng] = [asked.get('lat') ?? '', asked.get('lng') ?? ''];
  if (zip !== '' || !degrees.test(lat) || !degrees.test(lng)) return { zip, point: null };
  const point = checkPoint(Number(lat), Number(lng));
  return { zip, point: point.ok ? point.value : null };
}

/** The same place as fields of an address. */
export const askedPlaceFields = ({ zip, point }: AskedPlace): Record<string, string> => (point ? { lat: String(point.lat), lng: String(point.lng) } : zip === '' ? {} : { zip });
