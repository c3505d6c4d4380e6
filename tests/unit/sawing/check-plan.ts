import { largeEnd, type LogShape, radiusAt } from '~/domain/sawing/log-shape.ts';
import type { SawPlan, SawPlanRequest } from '~/domain/sawing/saw-plan.ts';

/** What is wrong with a plan, checked from the boards' own figures and nothing of the planner's: an empty list when all is well. */
export function faults(request: SawPlanRequest, plan: SawPlan): string[] {
  const { log, mill, pieces, waneAllowanceIn = 0 } = request;
  const found: string[] = [];
  const wrong = (ok: boolean, words: string): void => void (ok || found.push(words));
  const boxes = plan.boards.map((board) => {
    const [wide, high] = board.turned ? [board.thicknessIn, board.widthIn] : [board.widthIn, board.thicknessIn];
    return { board, left: board.xIn, right: board.xIn + wide, bottom: board.yIn, top: board.yIn + high };
  });
  for (const { board, left, right, bottom, top } of boxes) {
    const radius = radiusAt(log, board.startFt) + waneAllowanceIn;
    const corner = Math.hypot(Math.max(Math.abs(left), Math.abs(right)), Math.max(Math.abs(bottom), Math.abs(top)));
    wrong(corner <= radius + 1e-6, `corner ${corner} outside ${radius}`);
    wrong(board.startFt >= 0 && board.startFt + board.lengthFt <= log.lengthFt + 1e-9, 'runs past the log');
    const near = Math.hypot(left > 0 ? left : Math.min(0, right), bottom > 0 ? bottom : Math.min(0, top));
    wrong(near >= (log.heartDefectIn ?? 0) / 2 - 1e-6, `meets the heart: ${near}`);
    const piece = pieces[board.piece];
    wrong(piece !== undefined && piece.thicknessIn === board.thicknessIn, 'a thickness nobody asked for');
    wrong(piece?.widthIn === undefined ? Number.isInteger(board.widthIn) && board.widthIn >= 3 : piece.widthIn === board.widthIn, 'a width nobody asked for');
    wrong(piece?.lengthFt === undefined ? Number.isInteger(board.lengthFt) && board.lengthFt >= 4 : piece.lengthFt === board.lengthFt, 'a length nobody asked for');
    wrong(board.widthIn <= (mill.widestBoardIn ?? Infinity) + 1e-9, 'wider than the widest board');
    wrong(Math.abs(board.boardFeet - (board.thicknessIn * board.widthIn * board.lengthFt) / 12) < 1e-9, 'board feet do not add up');
    if (plan.pattern === 'live') {
      wrong(!board.turned, 'a turned board in a live plan');
      wrong(chord(log, bottom) <= (mill.widestCutIn ?? Infinity) + 1e-6 && chord(log, top) <= (mill.widestCutIn ?? Infinity) + 1e-6, 'a cut wider than the mill cuts');
    }
    if (plan.pattern === 'quartersawn') {
      const [inner, outer] = board.turned ? [Math.min(Math.abs(bottom), Math.abs(top)), Math.max(Math.abs(left), Math.abs(right))] : [Math.min(Math.abs(left), Math.abs(right)), Math.max(Math.abs(bottom), Math.abs(top))];
      wrong(inner >= outer - 1e-6, 'out of its quarter');
    }
  }
  boxes.forEach((a, index) => {
    for (const b of boxes.slice(index + 1)) {
      const apart = Math.max(b.left - a.right, a.left - b.right, b.bottom - a.top, a.bottom - b.top);
      wrong(apart >= mill.kerfIn - 1e-6, `boards ${apart} apart`);
    }
  });
  pieces.forEach((piece, index) => wrong(plan.boards.filter((board) => board.piece === index).length <= (piece.count ?? Infinity), 'more than the count'));
  const total = plan.boards.reduce((sum, board) => sum + board.boardFeet, 0);
  const value = plan.boards.reduce((sum, board) => sum + board.boardFeet * (pieces[board.piece]?.value ?? 1), 0);
  wrong(Math.abs(total - plan.boardFeet) < 1e-6 && Math.abs(value - plan.value) < 1e-6, 'totals do not add up');
  wrong(plan.value <= plan.upperBoundValue + 1e-6, `value ${plan.value} over its bound ${plan.upperBoundValue}`);
  wrong(plan.boards.length > 0 || (plan.reason ?? '').endsWith('.'), 'nothing cut and no reason');
  plan.cuts.forEach((cut, index) => wrong(cut.order === index + 1 && cut.heightIn >= 0 && cut.heightIn <= largeEnd(log) + 2 * waneAllowanceIn + 1e-6, 'a cut out of order or off the log'));
  return found;
}

const chord = (log: LogShape, from: number): number => 2 * Math.sqrt(Math.max(0, (largeEnd(log) / 2) ** 2 - from ** 2));
