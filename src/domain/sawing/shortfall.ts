import { formatFeet, formatInches } from '../measure.ts';
import { greedyLayers } from './greedy.ts';
import type { CutListRequest, WantedPiece } from './cut-list.ts';
import { stockOf } from './pieces.ts';

/** Why a piece stays short, and what would mend it. */
export interface Shortfall {
  readonly id: string;
  readonly short: number;
  readonly mend: readonly string[];
}

const LARGEST_LOG_IN = 60;

/** The smallest whole-inch log of a length, at the small end, that gives some pieces sawn through and through; null when none up to 60 in does. */
export function leastLogFor(piece: Pick<WantedPiece, 'thicknessIn' | 'widthIn' | 'lengthFt'>, count: number, lengthFt: number, { mill, waneAllowanceIn = 0 }: Pick<CutListRequest, 'mill' | 'waneAllowanceIn'>): number | null {
  const { thicknessIn, widthIn } = piece;
  const gives = (smallEndIn: number): boolean => greedyLayers(stockOf({ smallEndIn, lengthFt }, mill, [{ thicknessIn, widthIn, lengthFt: piece.lengthFt, count }], waneAllowanceIn)).length >= count;
  for (let inches = Math.max(4, Math.ceil(Math.min(thicknessIn, widthIn))); inches <= LARGEST_LOG_IN; inches++) if (gives(inches)) return inches;
  return null;
}

/** Where no log that the mill takes is as long as the piece. */
function tooLong({ logs, mill }: CutListRequest, lengthFt: number, longestFt: number): string[] {
  if (lengthFt <= longestFt) return [];
  const beyond = mill.longestFt !== undefined && logs.some((log) => log.lengthFt > Math.max(lengthFt, mill.longestFt ?? 0)) ? [`A log here is long enough but longer than the mill takes (${formatFeet(mill.longestFt)}): cut it to length first.`] : [];
  return [...beyond, ...(longestFt > 0 ? [`The longest log here${beyond.length > 0 ? ' that the mill takes' : ''} is ${formatFeet(longestFt)}: pieces of that length or shorter fit.`] : [])];
}

/** For every piece that is short: the limits it meets, and the smallest change that would mend it. */
export function shortfalls(request: CutListRequest, short: readonly { readonly id: string; readonly short: number }[]): Shortfall[] {
  const { logs, mill, pieces } = request;
  const longestFt = logs.reduce((most, log) => (mill.longestFt !== undefined && log.lengthFt > mill.longestFt ? most : Math.max(most, log.lengthFt)), 0);
  return short.flatMap(({ id, short: missing }) => {
    const piece = pieces.find((each) => each.id === id);
    if (!piece || missing <= 0) return [];
    const { lengthFt, widthIn, thicknessIn } = piece;
    if (mill.longestFt !== undefined && lengthFt > mill.longestFt) {
      const long = logs.some((log) => log.lengthFt >= lengthFt - 1e-9);
      return [{ id, short: missing, mend: [long ? `A mill that takes logs of ${formatFeet(lengthFt)} or longer.` : `A log of ${formatFeet(lengthFt)} and a mill that takes it; this one takes logs up to ${formatFeet(mill.longestFt)}.`] }];
    }
    if (mill.widestBoardIn !== undefined && Math.max(widthIn, 0) > mill.widestBoardIn) return [{ id, short: missing, mend: [`A mill that cuts boards ${formatInches(widthIn)} wide, or two narrower boards joined.`] }];
    const length = Math.max(lengthFt, 4);
    const one = leastLogFor(piece, 1, length, request);
    if (one === null) return [{ id, short: missing, mend: ['A smaller section: no log up to 60 in gives this one on this mill.'] }];
    const all = leastLogFor(piece, missing, length, request);
    const log = (inches: number): string => `at least ${formatInches(inches)} at the small end and ${formatFeet(length)} long`;
    const fits = logs.some((each) => each.lengthFt >= lengthFt && each.smallEndIn >= one);
    return [{
      id,
      short: missing,
      mend: [
        all !== null ? `One more log, ${log(all)}, gives ${missing === 1 ? 'the one' : `all ${missing}`} that ${missing === 1 ? 'is' : 'are'} missing.` : `More logs, each ${log(one)}.`,
        ...tooLong(request, lengthFt, longestFt),
        ...(!fits && lengthFt <= longestFt ? [`A smaller section: ${formatInches(thicknessIn)} × ${formatInches(widthIn)} needs a log of ${formatInches(one)}.`] : []),
      ],
    }];
  });
}
