import { coarsePoint, greatCircleMiles, type Point } from '~/domain/geo.ts';
import { summarise } from '~/domain/listing/summary.ts';
import type { ListingTyped } from '~/domain/listing/draft.ts';
import { dayAt, dayEnd } from '~/domain/time.ts';
import { earliestSawBy } from '~/domain/timber/saw-by.ts';
import { readListing, type ListingForm } from '~/schemas/listing-form.ts';
import { invalid } from '../errors.ts';
import type { GeoPoint } from '../models/table.ts';
import { placeOfZip } from '../services/places.ts';
import { timeZoneAt } from '../services/time-zones.ts';

/** A pin further than this from its ZIP code's middle is a slip of one of the two. */
const FURTHEST_PIN_MI = 60;

/** A listing understood, with its place found. */
export interface UnderstoodListing {
  readonly form: ListingForm;
  readonly point: Point;
  readonly town: string;
  readonly state: string;
  readonly timeZone: string;
}

const asGeo = (point: Point): GeoPoint => ({ type: 'Point', coordinates: [point.lng, point.lat] });

/**
 * Understands what was typed and finds its place. Reads large tables: call it before the transaction.
 * @throws Refusal `invalid` with every problem at its field.
 */
export function understand(typed: ListingTyped, at: Date): UnderstoodListing {
  const place = placeOfZip(typed.zip.trim());
  // Until the ZIP is known the day is taken in the middle of the country; the problem with the ZIP is named anyway.
  const guess = place ? timeZoneAt(place.point) : 'America/Chicago';
  const read = readListing(typed, dayAt(at, guess));
  const unknownZip = { path: 'zip', message: 'We do not know this ZIP code. Codes for post-office boxes have no area: use the one of the place itself.' };
  if (!read.ok) throw invalid(place || read.problems.some(({ path }) => path === 'zip') ? read.problems : [...read.problems, unknownZip]);
  if (!place) throw invalid([unknownZip]);
  const { pin } = read.value;
  const away = pin ? greatCircleMiles(pin, place.point) : 0;
  if (away > FURTHEST_PIN_MI) throw invalid([{ path: 'lat', message: `This pin lies ${Math.round(away).toLocaleString('en-US')} miles from ZIP ${place.zip}. Check which of the two is right.` }]);
  const point = pin ?? place.point;
  return { form: read.value, point, town: place.town, state: place.state, timeZone: timeZoneAt(point) };
}

/** The columns of a listing that follow from what was understood. */
export function columnsOf({ form, point, town, state, timeZone }: UnderstoodListing) {
  const saw = earliestSawBy(form.logs.map(({ species }) => species), form.cameDownOn, form.endsSealed);
  return {
    ...summarise(form.logs),
    treeOwner: form.treeOwner,
    howDown: form.howDown,
    cameDownOn: form.cameDownOn,
    endsSealed: form.endsSealed,
    zip: form.zip,
    town,
    state,
    timeZone,
    place: asGeo(point),
    coarse: asGeo(coarsePoint(point)),
    access: { ...form.access },
    landing: { ...form.landing },
    waste: { ...form.waste },
    metalRisk: form.metalRisk,
    metalNote: form.metalNote,
    note: form.note,
    closesAt: dayEnd(form.closesOn, timeZone),
    sawBy: saw?.date ?? null,
    sawByReason: saw ? `${saw.reason} (${saw.source})` : null,
  };
}
