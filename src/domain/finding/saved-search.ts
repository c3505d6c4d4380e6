import { type Cents, formatDollars } from '~/domain/money.ts';
import type { Point } from '~/domain/geo.ts';
import { speciesOf } from '~/domain/timber/species.ts';

/** When a saved search writes: as a listing appears, once a day, or not at all. */
export const searchTells = ['at-once', 'daily', 'stopped'] as const;
export type SearchTells = (typeof searchTells)[number];

export const searchTellsWords: Readonly<Record<SearchTells, string>> = {
  'at-once': 'As soon as they are on show',
  daily: 'Once a day, in the morning',
  stopped: 'No letters',
};

/** The sawyer's own hour from which a daily letter goes out. */
export const DAILY_HOUR = 6;

/** How many searches one sawyer may keep. */
export const MOST_SEARCHES = 20;

/** What a saved search asks for; null for what it does not ask. */
export interface SearchFilters {
  /** Where distances are measured from; `zip` when it was said so. */
  readonly from: { readonly point: Point; readonly zip: string | null; readonly radiusMi: number } | null;
  readonly species: string | null;
  /** International ¼. */
  readonly minBoardFeet: number | null;
  /** Over the bark. */
  readonly maxLargestEndIn: number | null;
  /** Only what closes to bids within a week. */
  readonly closing: boolean;
  /** Only what one of the sawyer's mills takes whole. */
  readonly fits: boolean;
  /** For each hour on the road and at work. */
  readonly minPerHourCents: Cents | null;
}

/** `White oak within 40 miles of ZIP 54665, 200 bf or more, that fits your mill`. */
export function searchWords(search: SearchFilters): string {
  const { from, species, minBoardFeet, maxLargestEndIn, closing, fits, minPerHourCents } = search;
  const what = species === null ? 'Logs of any species' : speciesOf(species).name;
  const where = from === null ? 'anywhere' : `within ${from.radiusMi} miles of ${from.zip === null ? 'a point of the map' : `ZIP ${from.zip}`}`;
  return [
    `${what} ${where}`,
    ...(minBoardFeet === null ? [] : [`${minBoardFeet.toLocaleString('en-US')} bf or more`]),
    ...(maxLargestEndIn === null ? [] : [`butt at most ${maxLargestEndIn} in`]),
    ...(minPerHourCents === null ? [] : [`${formatDollars(minPerHourCents)} an hour or more`]),
    ...(fits ? ['fits your mill'] : []),
    ...(closing ? ['closing within a week'] : []),
  ].join(', ');
}

/** A short name to begin with: `White oak near 54665`. */
export const searchName = ({ species, from }: SearchFilters): string =>
  `${species === null ? 'Logs' : speciesOf(species).name}${from === null ? '' : from.zip === null ? ' near a point of the map' : ` near ${from.zip}`}`;

/** The fields of the page of logs that show what the search asks for. */
export function searchFields({ from, species, minBoardFeet, maxLargestEndIn, closing, fits, minPerHourCents }: SearchFilters): Record<string, string> {
  const written = (value: number | null): string => (value === null ? '' : String(value));
  return {
    ...(from === null ? {} : { radiusMi: String(from.radiusMi), ...(from.zip === null ? { lat: String(from.point.lat), lng: String(from.point.lng) } : { zip: from.zip }) }),
    species: species ?? '',
    minBoardFeet: written(minBoardFeet),
    maxLargestEndIn: written(maxLargestEndIn),
    minPerHour: minPerHourCents === null ? '' : String(minPerHourCents / 100),
    closing: closing ? '1' : '',
    fits: fits ? '1' : '',
  };
}
