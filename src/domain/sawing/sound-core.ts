import type { Defect } from '../timber/defects.ts';
import { largeEnd, type LogShape, straightCore } from './log-shape.ts';

/** A log as it was listed: inside bark, with what is wrong with it. */
export interface FlawedLog extends Omit<LogShape, 'largeEndIn' | 'heartDefectIn'> {
  readonly largeEndIn?: number | null | undefined;
  readonly heartDefectIn?: number | null | undefined;
  readonly defects: readonly Defect[];
}

/**
 * The straight, sound log that a plan may count on: a sweep leaves a smaller core; a rotten heart and rot inside are boxed out over
 * the whole length, which is safe rather than generous. Null when nothing is left.
 */
export function soundCore({ smallEndIn, largeEndIn, lengthFt, heartDefectIn, defects }: FlawedLog): LogShape | null {
  const whole: LogShape = { smallEndIn, lengthFt, ...(largeEndIn ? { largeEndIn } : {}) };
  const bow = defects.reduce((most, defect) => (defect.kind === 'sweep' ? Math.max(most, defect.departureIn) : most), 0);
  const rot = defects.reduce((most, defect) => (defect.kind === 'interiorRot' ? Math.max(most, Math.hypot(defect.widthIn, defect.heightIn)) : most), heartDefectIn ?? 0);
  const core = bow > 0 ? straightCore(whole, bow) : whole;
  if (!core || rot >= largeEnd(core)) return null;
  return rot > 0 ? { ...core, heartDefectIn: rot } : core;
}
