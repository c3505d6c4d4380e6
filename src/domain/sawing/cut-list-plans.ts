import { totalBoardFeet } from './board.ts';
import { BOUND_COVERS } from './bound.ts';
import type { CutListRequest } from './cut-list.ts';
import type { Choice } from './cut-list-choice.ts';
import type { Made, Pool } from './cut-list-patterns.ts';
import { cutsOf } from './cuts.ts';
import type { Demand } from './demand.ts';
import type { SawPlan } from './saw-plan.ts';

/** One log's plan; its value is its board feet. */
export interface LogPlan extends SawPlan {
  readonly logId: string;
}

/** Gives every log its plan, in the order asked. Boards beyond what is wanted are left out, from the last logs first. */
export function assembled({ logs, mill, pattern = 'best' }: CutListRequest, pool: Pool, choice: Choice, demand: readonly Demand[]): LogPlan[] {
  const taken = new Map<string, Made>();
  const free = pool.shapes.map(({ ids }) => [...ids]);
  choice.times.forEach((times, index) => {
    const plan = pool.made[index];
    for (let turn = 0; plan && turn < times; turn++) {
      const id = free[plan.shape]?.shift();
      if (id !== undefined) taken.set(id, plan);
    }
  });
  const left = demand.map(({ count }) => count);
  const most = new Map(pool.shapes.flatMap(({ ids }, shape) => ids.map((id) => [id, pool.worths[0]?.most[shape] ?? 0] as const)));
  return logs.map((log): LogPlan => {
    const made = taken.get(log.id);
    const boards = (made?.boards ?? []).filter((board) => {
      const rest = left[board.piece] ?? 0;
      left[board.piece] = rest - 1;
      return rest > 0;
    });
    const boardFeet = totalBoardFeet(boards);
    const shared = { logId: log.id, pattern: made?.pattern ?? (pattern === 'best' ? 'live' : pattern), boards, boardFeet, value: boardFeet, upperBoundValue: Math.max(boardFeet, most.get(log.id) ?? 0), boundCovers: BOUND_COVERS[pattern] };
    if (boards.length > 0) return { ...shared, cuts: cutsOf(log, mill.kerfIn, boards, made?.pattern === 'quartersawn') };
    return { ...shared, cuts: [], reason: whyNone(log.lengthFt, mill.longestFt, demand, pool.mostOf[pool.shapes.findIndex(({ ids }) => ids.includes(log.id))]) };
  });
}

function whyNone(lengthFt: number, longestFt: number | undefined, demand: readonly Demand[], mostOf: readonly number[] | undefined): string {
  if (longestFt !== undefined && lengthFt > longestFt + 1e-9) return `This log is ${lengthFt} ft long and the mill takes logs up to ${longestFt} ft.`;
  if (demand.every((size) => size.lengthFt > lengthFt + 1e-9)) return `Every piece is longer than this log (${lengthFt} ft).`;
  return mostOf?.every((count) => count === 0) ? 'None of the pieces fits in this log on this mill.' : 'Not needed: the pieces come from the other logs, or none fits in this one.';
}

