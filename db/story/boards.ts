import { randomUUID } from 'node:crypto';
import { logInput } from '../../src/domain/listing/summary.ts';
import { estimateLog } from '../../src/domain/timber/estimate.ts';
import type { Defect } from '../../src/domain/timber/defects.ts';
import type { TallyEntry } from '../../src/schemas/tally-entries.ts';
import type { Log } from '../../src/server/models/listing.ts';

/** A size as it comes off the saw, inches. */
interface Size {
  readonly thicknessIn: number;
  readonly widthIn: number;
}

/** A log's scale by International ¼, net. */
export const scaleOf = (log: Log): number => estimateLog(logInput({ ...log.get(), defects: log.defects as Defect[] })).netBoardFeet.internationalQuarter;

/** Boards of one log: a wider and a narrower size of each thickness asked for, together about as much as its scale times `share`. */
export function boardsOf(log: Log, thicknesses: readonly number[], share: number): TallyEntry[] {
  const scale = scaleOf(log);
  const lengthFt = Math.floor(log.lengthFt);
  const sizes: readonly Size[] = thicknesses.flatMap((thicknessIn) => [0.72, 0.5].map((part) => ({ thicknessIn, widthIn: Math.max(4, Math.floor(log.smallEndIn * part)) })));
  return sizes.flatMap((size): TallyEntry[] => {
    const each = (size.thicknessIn * size.widthIn * lengthFt) / 12;
    const count = Math.round((scale * share) / sizes.length / each);
    return count === 0 ? [] : [{ kind: 'board', id: randomUUID(), logId: log.id, boardKind: 'board', ...size, secondWidthIn: null, lengthFt, count }];
  });
}

/** Live-edge slabs of one log, each with its two faces. */
export const slabsOf = (log: Log, thicknessIn: number, count: number): TallyEntry => ({
  kind: 'board', id: randomUUID(), logId: log.id, boardKind: 'slab', thicknessIn, widthIn: Math.floor(log.smallEndIn * 0.9), secondWidthIn: Math.floor(log.smallEndIn * 0.75), lengthFt: Math.floor(log.lengthFt), count,
});

/** Board feet of the boards and slabs among the entries, by their sizes. */
export const boardFeetOf = (entries: readonly TallyEntry[]): number =>
  entries.reduce((sum, entry) => (entry.kind === 'board' ? sum + (entry.thicknessIn * entry.widthIn * entry.lengthFt * entry.count) / 12 : sum), 0);
