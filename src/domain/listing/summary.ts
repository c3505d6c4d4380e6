import { estimateLogs, type LogInput } from '../timber/estimate.ts';
import { speciesOf } from '../timber/species.ts';
import { largestEndOutsideBark } from '../timber/taper-and-bark.ts';

interface MeasuredLog {
  readonly species: string;
  readonly smallEndIn: number;
  readonly largeEndIn: number | null;
  readonly lengthFt: number;
  readonly defects: LogInput['defects'];
}

/** A log as the timber library takes it: what was not measured is left out. */
export const logInput = (log: MeasuredLog): LogInput => ({
  species: log.species, smallEndIn: log.smallEndIn, lengthFt: log.lengthFt, defects: log.defects,
  ...(log.largeEndIn === null ? {} : { largeEndIn: log.largeEndIn }),
});

const lower = (name: string): string => name.charAt(0).toLowerCase() + name.slice(1);

/** `White oak, 5 logs`, `White oak and red pine, 7 logs`, `White oak and 3 other species, 9 logs`; the species with most logs first. */
export function listingTitle(logs: readonly { readonly species: string }[]): string {
  const counts = new Map<string, number>();
  for (const { species } of logs) counts.set(species, (counts.get(species) ?? 0) + 1);
  const names = [...counts].sort(([, a], [, b]) => b - a).map(([code]) => speciesOf(code).name);
  const [first = '', second] = names;
  const which = second === undefined ? first : names.length === 2 ? `${first} and ${lower(second)}` : `${first} and ${names.length - 1} other species`;
  return `${which}, ${logs.length} ${logs.length === 1 ? 'log' : 'logs'}`;
}

export interface ListingSummary {
  readonly title: string;
  readonly species: string[];
  readonly logCount: number;
  /** Net scale by International ¼. */
  readonly boardFeet: number;
  readonly largestEndObIn: number;
}

/** What lists and searches keep of a listing's logs. */
export function summarise(logs: readonly MeasuredLog[]): ListingSummary {
  const inputs = logs.map(logInput);
  return {
    title: listingTitle(logs),
    species: [...new Set(logs.map(({ species }) => species))].sort(),
    logCount: logs.length,
    boardFeet: estimateLogs({ logs: inputs }).totals.netBoardFeet.internationalQuarter,
    largestEndObIn: Math.max(0, ...inputs.map((log) => largestEndOutsideBark(log, speciesOf(log.species)))),
  };
}
