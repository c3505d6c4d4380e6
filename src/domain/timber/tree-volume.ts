import { good, refused, type Result } from '../result.ts';
import { doyleTrees, internationalQuarterTrees, type TreeVolumeTable } from './data/tree-volume-table.ts';

export type TreeVolumeRule = 'internationalQuarter' | 'doyle';

const tables: Readonly<Record<TreeVolumeRule, TreeVolumeTable>> = { internationalQuarter: internationalQuarterTrees, doyle: doyleTrees };

export interface TreeVolumeInput {
  readonly rule: TreeVolumeRule;
  /** Diameter at breast height (4½ ft above ground, uphill side), outside bark, whole inches. */
  readonly dbhIn: number;
  /** Usable 16-ft logs, in halves. */
  readonly logs16ft: number;
}

/** Number of 16-ft logs the table holds for a diameter, or an empty list. */
export const logsInTable = (rule: TreeVolumeRule, dbhIn: number): readonly number[] => (tables[rule][dbhIn] ?? []).map((_, index) => 1 + index / 2);

/** Whole inches the table holds. */
export const diametersInTable = (rule: TreeVolumeRule): readonly number[] => Object.keys(tables[rule]).map(Number);

/** Board feet in a standing tree of form class 78: the table's own cells, nothing between or beyond them. The answer of `POST /api/tree-volume`. */
export function treeVolume({ rule, dbhIn, logs16ft }: TreeVolumeInput): Result<{ readonly boardFeet: number }> {
  const row = tables[rule][dbhIn];
  if (!row) {
    const diameters = diametersInTable(rule);
    return refused('dbhIn', `The table has whole inches from ${Math.min(...diameters)} to ${Math.max(...diameters)}; ${dbhIn} in is not in it.`);
  }
  const boardFeet = row[(logs16ft - 1) * 2];
  if (boardFeet === undefined) return refused('logs16ft', `For ${dbhIn} in the table has 1 to ${(row.length + 1) / 2} logs by halves; ${logs16ft} is not in it.`);
  return good({ boardFeet });
}
