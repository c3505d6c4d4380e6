import { largeEndOrTaper } from '~/domain/timber/taper-and-bark.ts';

/** A mill's kind, in the order sawyers name them. */
export type MillKind = 'band' | 'swing-blade' | 'chainsaw' | 'circular';

export const MILL_KIND_NAMES: Readonly<Record<MillKind, string>> = {
  band: 'band',
  'swing-blade': 'swing blade',
  chainsaw: 'chainsaw',
  circular: 'circular',
};

/** The five limits of a mill. Inches and feet; a log's diameter is outside bark at its largest end. */
export interface MillLimits {
  readonly largestLogIn: number;
  readonly widestCutIn: number;
  readonly widestBoardIn: number;
  readonly longestFt: number;
  readonly shortestFt: number;
}

/** A measured log: diameters inside bark in inches, `barkPct` bark volume as a percentage of wood volume. */
export interface LogForFit {
  readonly smallEndIn: number;
  readonly largeEndIn?: number | undefined;
  readonly lengthFt: number;
  readonly barkPct: number;
}

const TOLERANCE_IN = 0.005;

/** Largest diameter outside bark: the large end (measured, or small end + taper) with its bark on. */
export const largestOutsideBarkIn = (log: LogForFit): number => largeEndOrTaper(log) * Math.sqrt(1 + log.barkPct / 100);

export interface Fit {
  readonly fits: boolean;
  /** Why it does not fit, each a phrase that stands alone. */
  readonly reasons: readonly string[];
  /** What to expect though it fits. */
  readonly notes: readonly string[];
}

/** Holds one log against the mill's largest log, longest, shortest and widest cut. */
export function fitLog(mill: MillLimits, log: LogForFit): Fit {
  const largest = largestOutsideBarkIn(log);
  const insideBark = largeEndOrTaper(log);
  const reasons = [
    ...(largest > mill.largestLogIn + TOLERANCE_IN ? [`the butt is ${inches(largest - mill.largestLogIn)} in too wide (${inches(largest)} in over bark, the mill takes ${inches(mill.largestLogIn)})`] : []),
    ...(log.lengthFt > mill.longestFt ? [`${feet(log.lengthFt)} is over the longest, ${feet(mill.longestFt)}`] : []),
    ...(log.lengthFt < mill.shortestFt ? [`${feet(log.lengthFt)} is under the shortest, ${feet(mill.shortestFt)}`] : []),
  ];
  // A cut below the heart's width still opens the log from its sides, so this is a thing to know, not a refusal.
  const notes = insideBark > mill.widestCutIn + TOLERANCE_IN ? [`the widest cut is ${inches(mill.widestCutIn)} in, so this log cannot be split through its heart in one pass`] : [];
  return { fits: reasons.length === 0, reasons, notes };
}

/** Holds a wanted piece against the mill's widest board and longest length. */
export function fitPiece(mill: MillLimits, piece: { readonly widthIn: number; readonly lengthFt: number }): Fit {
  const reasons = [
    ...(piece.widthIn > mill.widestBoardIn + TOLERANCE_IN ? [`${inches(piece.widthIn)} in wide is over the widest board, ${inches(mill.widestBoardIn)} in`] : []),
    ...(piece.lengthFt > mill.longestFt ? [`${feet(piece.lengthFt)} is over the longest, ${feet(mill.longestFt)}`] : []),
  ];
  return { fits: reasons.length === 0, reasons, notes: [] };
}

/** Holds every log against the mill and names them by number, the first being 1. */
export function fitLogs(mill: MillLimits, logs: readonly LogForFit[]): Fit {
  const each = logs.map((log) => fitLog(mill, log));
  const numbered = (pick: 'reasons' | 'notes'): string[] => each.flatMap((fit, i) => fit[pick].map((text) => `Log ${i + 1}: ${text}.`));
  return { fits: each.every(({ fits }) => fits), reasons: numbered('reasons'), notes: numbered('notes') };
}

const inches = (value: number): string => String(Math.round(value * 10) / 10);

/** `18 ft`, `11 ft 8 in`. */
function feet(value: number): string {
  const wholeIn = Math.round(value * 12);
  const rest = wholeIn % 12;
  return rest === 0 ? `${wholeIn / 12} ft` : `${Math.floor(wholeIn / 12)} ft ${rest} in`;
}
