import { told, type CautionText } from '../cautions.ts';
import { speciesOf, type Species } from './species.ts';

/** How fast logs of a species lose value on the landing. */
export type KeepingGroup = 'stains fast' | 'stains' | 'keeps' | 'keeps long';

/** Summer days that logs keep, from the day the tree came down: ends left open, and ends sealed the same day. */
const keepingDays: Readonly<Record<KeepingGroup, { readonly open: number; readonly sealed: number; readonly reason: string }>> = {
  'stains fast': { open: 21, sealed: 42, reason: 'blue or grey stain runs into this wood within weeks in warm weather' },
  stains: { open: 42, sealed: 70, reason: 'stain and end checks reach into this wood after some weeks of warm weather' },
  keeps: { open: 70, sealed: 120, reason: 'its heartwood keeps for months, but the sapwood stains and the ends check' },
  'keeps long': { open: 120, sealed: 240, reason: 'its heartwood resists decay; the ends check and insects take the sapwood' },
};

const groups: Readonly<Record<Exclude<KeepingGroup, 'stains'>, readonly string[]>> = {
  'stains fast': [
    'eastern-white-pine', 'red-pine', 'jack-pine', 'loblolly-pine', 'lodgepole-pine', 'longleaf-pine', 'shortleaf-pine', 'slash-pine', 'ponderosa-pine',
    'sugar-pine', 'virginia-pine', 'sugar-maple', 'red-maple', 'silver-maple', 'bigleaf-maple', 'american-basswood', 'bigtooth-aspen', 'quaking-aspen',
    'hackberry', 'paper-birch', 'sweetgum', 'red-alder', 'american-beech',
  ],
  keeps: ['white-oak', 'bur-oak', 'chestnut-oak', 'post-oak', 'live-oak', 'black-walnut', 'butternut', 'black-cherry', 'sassafras', 'western-larch', 'tamarack', 'douglas-fir', 'honeylocust'],
  'keeps long': ['black-locust', 'eastern-redcedar', 'northern-white-cedar', 'western-redcedar', 'atlantic-white-cedar', 'incense-cedar', 'redwood', 'baldcypress'],
};

const groupByCode: ReadonlyMap<string, KeepingGroup> = new Map(
  Object.entries(groups).flatMap(([group, codes]) => codes.map((code) => [code, group as KeepingGroup] as const)),
);

/** The keeping group of a species. */
export const keepingGroup = (species: Species): KeepingGroup => groupByCode.get(species.code) ?? 'stains';

/** How much of a summer day each month counts, January first: fungi and insects rest in the cold. */
const monthWeight: readonly number[] = [0.1, 0.1, 0.25, 0.5, 0.75, 1, 1, 1, 0.75, 0.5, 0.25, 0.1];

const source = 'common practice, no source';

export interface SawByInput {
  readonly speciesCode: string;
  /** The day the tree came down, `2026-07-14`. */
  readonly cameDownOn: string;
  /** The log ends were painted or waxed the same day. */
  readonly endsSealed: boolean;
}

export interface SawBy {
  /** `2026-08-25` */
  readonly date: string;
  readonly reason: string;
  readonly source: string;
}

const dayMs = 86_400_000;

const parseDay = (day: string): number => {
  const time = /^\d{4}-\d{2}-\d{2}$/.test(day) ? Date.parse(`${day}T00:00:00Z`) : Number.NaN;
  if (Number.isNaN(time) || new Date(time).toISOString().slice(0, 10) !== day) throw new RangeError(`"${day}" is not a day of the calendar.`);
  return time;
};

/**
 * The day by which logs should be sawn, before stain and decay take their value. Counts summer days from the day the tree
 * came down, a cold month's day for a tenth of one. Common practice, no source: a guide for closing dates and warnings.
 * @throws RangeError for an unknown species or a day that is not `YYYY-MM-DD`.
 */
export function sawBy({ speciesCode, cameDownOn, endsSealed }: SawByInput): SawBy {
  const species = speciesOf(speciesCode);
  const keeping = keepingDays[keepingGroup(species)];
  let left = endsSealed ? keeping.sealed : keeping.open;
  let time = parseDay(cameDownOn);
  while (left > 0) {
    time += dayMs;
    left -= monthWeight[new Date(time).getUTCMonth()] ?? 1;
  }
  const ends = endsSealed ? 'The ends are sealed.' : 'The ends are not sealed: sealing them the same day buys weeks.';
  return { date: new Date(time).toISOString().slice(0, 10), reason: `${species.name}: ${keeping.reason}. ${ends}`, source };
}

/** The earliest saw-by date of several logs that came down together, or undefined for none. */
export function earliestSawBy(speciesCodesOfLogs: readonly string[], cameDownOn: string, endsSealed: boolean): SawBy | undefined {
  return speciesCodesOfLogs
    .map((speciesCode) => sawBy({ speciesCode, cameDownOn, endsSealed }))
    .reduce<SawBy | undefined>((first, next) => (first === undefined || next.date < first.date ? next : first), undefined);
}

/** What the season asks of these logs: oak wilt from April to July, quarantines always (ash has its own), frozen logs from December to March. */
export function seasonCautions(speciesCode: string, onDay: string): readonly CautionText[] {
  const month = new Date(parseDay(onDay)).getUTCMonth();
  const { name } = speciesOf(speciesCode);
  return [
    ...(/\boak$/.test(name) && month >= 3 && month <= 6 ? told('oakWilt') : []),
    ...(month <= 2 || month === 11 ? told('frozen') : []),
    ...(/\bash$/.test(name) ? told('ash') : []),
    ...told('quarantine'),
  ];
}
