import { formatFraction } from '~/domain/measure.ts';
import { correctionWords } from '~/domain/trade/clock.ts';
import { tallyRuleOf } from '~/domain/trade/tally-count.ts';
import { thicknessName } from '~/domain/timber/tally.ts';
import type { TallyQueryView, TallyView } from '~/schemas/tally-view.ts';
import { dayAt } from '~/domain/time.ts';
import { dayAndTime, timeOfDay } from '~/islands/clock.ts';

/** One entry of a tally as a line that can be read, queried and decided. `ref` is how forms name it. */
export interface TallyLine {
  readonly ref: string;
  readonly log: string;
  readonly text: string;
  readonly count: number | null;
}

const activityWords = { preparing: 'Arriving and setting up', sawing: 'Sawing', waiting: 'Waiting for the landowner', breakdown: 'Breakdown, off the clock', sharpening: 'Sharpening, off the clock' } as const;

/** Why a line is queried: what the landowner says of it, or that it was entered later. */
export const querySays = ({ says }: TallyQueryView, landownerName: string): string => (says === '' ? 'Entered after the tally was queried.' : `${landownerName}: ${says}`);

/** Every entry of the tally in the order it was made, boards first. */
export function tallyLines(view: TallyView, zone: string): TallyLine[] {
  const logName = (id: string | null): string => view.logs.find((log) => log.id === id)?.label ?? '';
  const rule = tallyRuleOf(view.terms) === 'hardwood' ? 'hardwood' : 'softwood';
  const clockTime = (iso: string): string => dayAndTime(iso, zone);
  /** The end of a span names its day only when it is another one. */
  const endTime = (from: string, to: string): string => (dayAt(new Date(from), zone) === dayAt(new Date(to), zone) ? timeOfDay(to, zone) : clockTime(to));
  return [
    ...view.boards.map((board) => ({
      ref: `board:${board.id}`, log: logName(board.logId), count: board.count,
      text: `${board.count} of ${thicknessName(board.thicknessIn, rule).replace(' in', '')} × ${formatFraction(board.widthIn)}${board.secondWidthIn === null ? '' : ` and ${formatFraction(board.secondWidthIn)}`} in × ${formatFraction(board.lengthFt)} ft${board.kind === 'slab' ? ', slab' : board.kind === 'out-of-size' ? ', out of size (not charged)' : ''}`,
    })),
    ...view.hits.map((hit) => ({ ref: `hit:${hit.id}`, log: logName(hit.logId), count: null, text: `Metal hit: blade ${hit.outcome}${hit.note ? `, ${hit.note}` : ''}` })),
    ...view.culls.map((cull) => ({ ref: `cull:${cull.id}`, log: logName(cull.logId), count: null, text: `Cull log: ${cull.reason}${cull.openingMinutes ? `, ${cull.openingMinutes} min to open` : ''}` })),
    ...view.clock.map((entry) => ({ ref: `clock:${entry.id}`, log: '', count: null, text: `${activityWords[entry.activity]}, ${clockTime(entry.startsAt)} to ${endTime(entry.startsAt, entry.endsAt)}${correctionWords(entry, clockTime)}` })),
  ];
}
