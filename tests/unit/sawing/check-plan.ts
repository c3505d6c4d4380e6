import { section } from '~/domain/sawing/board.ts';
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
  if (plan.pattern !== 'quartersawn') found.push(...replayed(request, plan));
  return found;
}

/** Less wood than this is left on a board rather than sawn off it. */
const SLIVER_IN = 1 / 16;

/**
 * Saws the log by its list of cuts, on paper: what lies on the bed is whatever was cut or barked before, each pass takes off what is
 * over it. No pass may go through a board, what comes off as a board is one layer of them, and all boards have come off at the end.
 */
export function replayed({ log, mill, waneAllowanceIn = 0 }: Pick<SawPlanRequest, 'log' | 'mill' | 'waneAllowanceIn'>, { boards, cuts }: SawPlan): string[] {
  const found: string[] = [];
  const boxes = boards.map(section);
  const extent = new Map([[0, largeEnd(log) / 2], [90, largeEnd(log) / 2], [180, largeEnd(log) / 2], [270, largeEnd(log) / 2]]);
  let left = boxes.map((box) => new Map([[0, [box.bottom, box.top]], [90, [box.left, box.right]], [180, [-box.top, -box.bottom]], [270, [-box.right, -box.left]]] as const));
  const along = (box: (typeof left)[number], turn: number): readonly [number, number] => (box.get(turn as 0) ?? [NaN, NaN]) as readonly [number, number];
  for (const { turnDeg, heightIn, kind, order } of cuts) {
    const plane = heightIn - (extent.get((turnDeg + 180) % 360) ?? NaN);
    const off = left.filter((box) => along(box, turnDeg)[0] >= plane + mill.kerfIn - 1e-6);
    const kept = left.filter((box) => !off.includes(box));
    if (kept.some((box) => along(box, turnDeg)[1] > plane + 1e-6)) found.push(`cut ${order} goes through a board`);
    if (kind !== 'board' && off.length > 0) found.push(`cut ${order} takes a board off as waste`);
    if (kind === 'board' && off.length === 0) found.push(`cut ${order} takes no board off`);
    const surface = Math.max(extent.get(turnDeg) ?? NaN, ...off.map((box) => along(box, turnDeg)[1]));
    if (off.some((box) => along(box, turnDeg)[0] - plane - mill.kerfIn > 1e-6)) found.push(`cut ${order} is below its boards`);
    if (kind === 'board' && off.some((box) => surface - along(box, turnDeg)[1] > SLIVER_IN + waneAllowanceIn + 1e-6)) found.push(`cut ${order} leaves waste on its boards`);
    extent.set(turnDeg, plane);
    left = kept;
  }
  // What lies on the bed at last is one layer, split where it is edged.
  if ([0, 90].every((turn) => new Set(left.map((box) => along(box, turn).map((at) => at.toFixed(5)).join())).size > 1)) found.push('boards are left in the log');
  cuts.forEach(({ turnDeg, heightIn, order }, index) => {
    const before = cuts[index - 1];
    if (before?.turnDeg === turnDeg && before.heightIn - heightIn <= SLIVER_IN) found.push(`cut ${order} is a hair under the one before`);
  });
  return found;
}

const chord = (log: LogShape, from: number): number => 2 * Math.sqrt(Math.max(0, (largeEnd(log) / 2) ** 2 - from ** 2));
