import type { CutKind } from '~/domain/sawing/cuts.ts';
import type { CutLine } from '~/domain/sawing/cut-lines.ts';
import type { SheetCut } from '~/domain/sawing/cut-sheet.ts';
import type { DrawnBoard } from '~/domain/drawing.ts';
import type { Measures } from '~/domain/trade/day-logs.ts';

/** One cut as it is made, with its line in the drawing; a quarter lying by itself has none. */
export interface CutOfSheet extends SheetCut {
  readonly kind: CutKind;
  readonly line: CutLine | null;
}

/** One log of a cut sheet: what is drawn, how the pith is levelled, and the cuts in order. */
export interface LogOfSheet {
  readonly logId: string;
  /** The measures that it was planned by. */
  readonly plannedAs: Measures;
  /** What its boards are for, or why there are none. */
  readonly use: string;
  /** The straight, sound wood at the large end, which is drawn; null when there is none. */
  readonly core: { readonly smallEndIn: number; readonly largeEndIn: number; readonly heartDefectIn: number | null } | null;
  readonly boards: readonly DrawnBoard[];
  readonly sizes: readonly { readonly thicknessIn: number; readonly widthIn: number; readonly lengthFt: number; readonly count: number }[];
  readonly raiseSmallEndIn: number;
  readonly pithHeightIn: number;
  readonly cuts: readonly CutOfSheet[];
}

/** `GET /api/bookings/{number}/cut-sheet`: the sheet as a phone keeps it beside the mill. `key` changes with whatever the plan follows from. */
export interface CutSheetView {
  readonly booking: number;
  readonly key: string;
  readonly millName: string;
  readonly kerfIn: number;
  readonly logs: readonly LogOfSheet[];
}
