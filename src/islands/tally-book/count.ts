import { priceWork, type PricedJob } from '~/domain/trade/price.ts';
import { holdWarning, mayGoOnAfterMetal, type HoldWarning } from '~/domain/trade/on-the-day.ts';
import { jobOf, limitOf } from '~/domain/trade/day-job.ts';
import { leftOf } from '~/domain/trade/still-wanted.ts';
import { countBoards, countTally, tallyRuleOf } from '~/domain/trade/tally-count.ts';
import { tallyBoards } from '~/domain/timber/tally.ts';
import type { TallyEntry } from '~/schemas/tally-entries.ts';
import type { TallyBoardView, TallyView } from '~/schemas/tally-view.ts';

/** The tally so far, counted on the phone by the same rules that settle it. */
export interface Counted {
  readonly boardFeet: number;
  readonly job: PricedJob;
  /** What is held, or what the landowner has signed for when that is more. */
  readonly limitCents: number;
  readonly warning: HoldWarning;
  readonly metalStops: boolean;
}

export function countView(view: TallyView): Counted {
  const work = countTally(view.terms, jobOf(view), view.logs);
  const job = priceWork(view.terms, work);
  return {
    boardFeet: countBoards(tallyRuleOf(view.terms), view.boards),
    job,
    limitCents: limitOf(view.heldCents, view.allowances),
    warning: holdWarning(job.costCents, limitOf(view.heldCents, view.allowances)),
    metalStops: !mayGoOnAfterMetal(view.hits.length, view.metalAllowed),
  };
}

/** One size with how many boards of it there are. */
export interface SizeRow {
  readonly key: string;
  readonly kind: TallyBoardView['kind'];
  readonly thicknessIn: number;
  readonly widthIn: number;
  readonly lengthFt: number;
  readonly count: number;
  readonly boardFeet: number;
}

/** Boards gathered by size, in the order each size was first met, counted by the bid's rule. */
export function bySize(view: TallyView, boards: readonly TallyBoardView[]): SizeRow[] {
  const rule = tallyRuleOf(view.terms) === 'hardwood' ? 'hardwood' : 'softwood';
  const counted = tallyBoards(rule, boards).pieces;
  const rows = new Map<string, SizeRow>();
  boards.forEach((board, index) => {
    const key = [board.kind, board.thicknessIn, board.widthIn, board.lengthFt].join(' ');
    const before = rows.get(key);
    const boardFeet = board.kind === 'board' ? (counted[index]?.boardFeet ?? 0) : 0;
    rows.set(key, before ? { ...before, count: before.count + board.count, boardFeet: before.boardFeet + boardFeet } : { key, kind: board.kind, thicknessIn: board.thicknessIn, widthIn: board.widthIn, lengthFt: board.lengthFt, count: board.count, boardFeet });
  });
  return [...rows.values()];
}

/** What one more board of this size would add: its surface measure and board feet, as the button says them. */
export function oneBoard(view: TallyView, thicknessIn: number, widthIn: number, lengthFt: number): { readonly surfaceMeasure: number | null; readonly boardFeet: number } {
  const hardwood = tallyRuleOf(view.terms) === 'hardwood';
  const [row] = tallyBoards(hardwood ? 'hardwood' : 'softwood', [{ thicknessIn, widthIn, lengthFt, count: 1 }]).pieces;
  return { surfaceMeasure: row?.surfaceMeasureSqFt ?? null, boardFeet: row?.boardFeet ?? 0 };
}

/** How many of each wanted piece are still to be sawn. */
export function stillWanted(view: TallyView): { readonly label: string; readonly thicknessIn: number; readonly widthIn: number; readonly lengthFt: number; readonly left: number }[] {
  return view.cutList.map((piece) => ({ label: piece.label, thicknessIn: piece.thicknessIn, widthIn: piece.widthIn, lengthFt: piece.lengthFt, left: leftOf(piece, view.boards) }));
}

/** A size to be entered: inches and feet. What else comes with it (a wanted piece has a label and how many are left) is no part of an entry. */
interface EnteredSize {
  readonly thicknessIn: number;
  readonly widthIn: number;
  readonly lengthFt: number;
}

/** The entry of boards of one size, with an id of its own. Only a slab has a second width, in inches. */
export function boardEntry({ thicknessIn, widthIn, lengthFt }: EnteredSize, of: { readonly logId: string | null; readonly kind: TallyBoardView['kind']; readonly secondWidthIn: number; readonly count: number }): TallyEntry {
  return { kind: 'board', id: crypto.randomUUID(), logId: of.logId, boardKind: of.kind, thicknessIn, widthIn, lengthFt, secondWidthIn: of.kind === 'slab' ? of.secondWidthIn : null, count: of.count };
}
