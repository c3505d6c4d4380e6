import { formatFeet, formatFraction } from '~/domain/measure.ts';
import type { Defect } from '~/domain/timber/defects.ts';
import { estimateLog, type LogInput } from '~/domain/timber/estimate.ts';
import { speciesOf } from '~/domain/timber/species.ts';
import { fitLog, type MillLimits } from './mill-fit.ts';
import { largerLogs } from './on-the-day.ts';

/** A log's measures, inside bark; `largeEndIn` null when only the taper is assumed. */
export interface Measures {
  readonly smallEndIn: number;
  readonly largeEndIn: number | null;
  readonly lengthFt: number;
}

/** A log on the milling day: as listed, as measured again, and whether the landowner has agreed to what is more than listed. */
export interface DayLog {
  readonly id: string;
  readonly species: string;
  readonly defects: readonly Defect[];
  readonly listed: Measures;
  /** Measured on the day; null when it lies as listed. */
  readonly measured: Measures | null;
  /** Added on the day: `listed` is then what the sawyer measured. */
  readonly added: boolean;
  /** The landowner's word for these very measures; for an added log, that it is to be sawn at all. */
  readonly agreed: boolean;
}

/** The log as the timber library takes it. */
export const asLogInput = ({ species, defects }: Pick<DayLog, 'species' | 'defects'>, { smallEndIn, largeEndIn, lengthFt }: Measures): LogInput => ({
  species, smallEndIn, lengthFt, defects: [...defects], ...(largeEndIn === null ? {} : { largeEndIn }),
});

const scaleOf = (log: DayLog, measures: Measures): number => estimateLog(asLogInput(log, measures)).netBoardFeet.internationalQuarter;

/** Why a log is more than the landowner knows of: over 15 % more by International ¼, over the mill's limits, or added. Empty: nothing to ask. */
export function moreThanListed(log: DayLog, mill: MillLimits | null): readonly string[] {
  if (log.added) return ['It is not on the listing.'];
  if (log.measured === null) return [];
  const fit = mill ? fitLog(mill, { ...asLogInput(log, log.measured), barkPct: speciesOf(log.species).barkPct }) : null;
  const listedFit = mill ? fitLog(mill, { ...asLogInput(log, log.listed), barkPct: speciesOf(log.species).barkPct }) : null;
  const over = fit?.reasons.filter((reason) => !listedFit?.reasons.includes(reason)) ?? [];
  return largerLogs([{ id: 'It', listedBf: scaleOf(log, log.listed), measuredBf: scaleOf(log, log.measured), overLimits: over }]).reasons.filter((reason) => !reason.startsWith('The job'));
}

/** Why this log waits for the landowner's word before it is sawn; empty when it may be sawn. */
export const waitsForWord = (log: DayLog, mill: MillLimits | null): readonly string[] => (log.agreed ? [] : moreThanListed(log, mill));

/**
 * The measures a log is charged by: measured again when that is no more than listed, or agreed; otherwise as listed.
 * Less than listed simply costs less.
 */
export const chargedMeasures = (log: DayLog, mill: MillLimits | null): Measures => (log.measured !== null && waitsForWord(log, mill).length === 0 ? log.measured : log.listed);

/** Whether what was sawn from a log counts: of a log added on the day only once the landowner has accepted it. */
export const counts = (log: Pick<DayLog, 'added' | 'agreed'>): boolean => !log.added || log.agreed;

/** `18 in × 12 ft`, `18 to 20 in × 12 ft 4 in`. */
export const measuresSaid = ({ smallEndIn, largeEndIn, lengthFt }: Measures): string => `${formatFraction(smallEndIn)}${largeEndIn === null ? '' : ` to ${formatFraction(largeEndIn)}`} in × ${formatFeet(lengthFt)}`;
