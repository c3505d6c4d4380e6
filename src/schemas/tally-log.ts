import { speciesOf } from '~/domain/timber/species.ts';
import { logToCharge } from '~/domain/trade/bid-estimate.ts';
import { asLogInput, chargedMeasures, measuresSaid, waitsForWord, type DayLog } from '~/domain/trade/day-logs.ts';
import type { LogToCharge } from '~/domain/trade/log-charge.ts';
import type { MillLimits } from '~/domain/trade/mill-fit.ts';

/** A log as the tally book lists it; the charge figures let the book count by itself, with or without signal. */
export interface TallyLog extends LogToCharge, DayLog {
  readonly label: string;
  readonly speciesName: string;
  readonly size: string;
  readonly wholeFt: number;
  /** Why the landowner is asked before it is sawn; empty when it may be sawn. */
  readonly waits: readonly string[];
}

/** A log of the day with everything that follows from its measures. */
export function tallyLog(log: DayLog, label: string, mill: MillLimits | null): TallyLog {
  const charged = chargedMeasures(log, mill);
  return {
    ...log,
    ...logToCharge({ id: log.id, ...asLogInput(log, charged) }),
    lengthFt: charged.lengthFt,
    label,
    speciesName: speciesOf(log.species).name,
    size: measuresSaid(log.measured ?? log.listed),
    wholeFt: Math.floor(charged.lengthFt + 1e-9),
    waits: waitsForWord(log, mill),
  };
}
