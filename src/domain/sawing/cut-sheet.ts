import type { Cut, CutKind } from './cuts.ts';
import { largeEnd, type LogShape, toeBoards } from './log-shape.ts';
import type { SawPlan } from './saw-plan.ts';

export interface SheetCut {
  readonly order: number;
  /** How to turn the log before this cut, degrees the same way round; 0 when it stays as it lies. */
  readonly turnByDeg: number;
  /** From the bed to the saw, in; over the bark while the log lies on it. */
  readonly heightIn: number;
  readonly onBark: boolean;
  readonly kind: CutKind;
}

export interface CutSheet {
  /** Blocks under the small end that level the pith while the log lies on its bark, in. */
  readonly raiseSmallEndIn: number;
  /** From the bed to the pith at both ends once it is level, in. */
  readonly pithHeightIn: number;
  readonly cuts: readonly SheetCut[];
}

/** Whether the log lies on its bark: as long as the side opposite was not cut. A quartered log does so until it lies in quarters. */
const liesOnBark = (cut: Cut, index: number, cuts: readonly Cut[]): boolean =>
  cuts.some(({ kind }) => kind === 'quarter') ? cut.kind === 'quarter' : cuts.slice(0, index).every(({ turnDeg }) => turnDeg !== (cut.turnDeg + 180) % 360);

/**
 * A plan as the sawyer cuts it: toe boards, turns, and each height as it is measured from the bed.
 * @param log the log as measured, inside bark. @param core the straight, sound wood that was planned in.
 * @param barkRatio outside over inside bark.
 */
export function cutSheet(log: LogShape, core: LogShape, plan: SawPlan, barkRatio: number): CutSheet {
  const pith = (largeEnd(log) / 2) * barkRatio;
  const raised = pith - largeEnd(core) / 2;
  let turned = 0;
  const cuts = plan.cuts.map((cut, index): SheetCut => {
    const onBark = liesOnBark(cut, index, plan.cuts);
    const turnByDeg = (cut.turnDeg - turned + 360) % 360;
    turned = cut.turnDeg;
    return { order: cut.order, turnByDeg, heightIn: cut.heightIn + (onBark ? raised : 0), onBark, kind: cut.kind };
  });
  return { raiseSmallEndIn: toeBoards(log).raiseSmallEndIn * barkRatio, pithHeightIn: pith, cuts };
}
