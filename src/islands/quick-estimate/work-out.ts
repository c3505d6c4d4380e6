import { parseLengthFt, parseLengthIn } from '~/domain/measure.ts';
import type { Problem } from '~/domain/result.ts';
import { sawPlan } from '~/domain/sawing/saw-plan.ts';
import type { Board } from '~/domain/sawing/board.ts';
import { estimateLog, type LogEstimate } from '~/domain/timber/estimate.ts';
import type { LogGroup } from '~/domain/timber/logs-in-url.ts';
import { findSpecies } from '~/domain/timber/species.ts';
import { barkRatio } from '~/domain/timber/taper-and-bark.ts';
import { greenWeightWithBark } from '~/domain/timber/weight.ts';

/** The mill and boards of the first page's picture: 5/4 boards, green, on a thin band. */
export const pictureMill = { kerfIn: 3 / 32, thicknessIn: 1.25 } as const;

/** What is typed into the estimator of the first page. */
export interface Typed {
  readonly species: string;
  readonly smallEnd: string;
  readonly length: string;
}

export interface WorkedOut {
  readonly log: LogGroup;
  readonly estimate: LogEstimate;
  /** Bark included. */
  readonly weightLb: number;
  /** Bark on one side at the small end. */
  readonly barkIn: number;
  readonly speciesName: string;
  /** The 5/4 boards of a live-sawn plan on a thin band mill, and their board feet: the best possible. */
  readonly boards: readonly Board[];
  readonly bestBoardFeet: number;
}

export const firstTyped: Typed = { species: 'white-oak', smallEnd: '16', length: '12' };

/** Reads one log as a person types it and scales it; problems name `species`, `smallEnd` or `length`. */
export function workOut(typed: Typed): { readonly worked: WorkedOut | null; readonly problems: readonly Problem[] } {
  const species = findSpecies(typed.species);
  const smallEnd = parseLengthIn(typed.smallEnd, 'in', 'smallEnd');
  const length = parseLengthFt(typed.length, 'ft', 'length');
  const problems: Problem[] = [];
  if (!species) problems.push({ path: 'species', message: 'Choose a species.' });
  if (!smallEnd.ok) problems.push(...smallEnd.problems);
  else if (smallEnd.value < 4 || smallEnd.value > 60) problems.push({ path: 'smallEnd', message: 'The small end is between 4 and 60 in.' });
  if (!length.ok) problems.push(...length.problems);
  else if (length.value < 4 || length.value > 40) problems.push({ path: 'length', message: 'The length is between 4 and 40 ft.' });
  if (problems.length > 0 || !species || !smallEnd.ok || !length.ok) return { worked: null, problems };
  const plan = sawPlan({
    log: { smallEndIn: smallEnd.value, lengthFt: length.value },
    mill: { kerfIn: pictureMill.kerfIn },
    pattern: 'live',
    // Few lengths, so that the largest log is planned between two keystrokes.
    pieces: [{ thicknessIn: pictureMill.thicknessIn, lengthsFt: [0, 4, 8].map((less) => Math.floor(length.value) - less).filter((feet) => feet >= 4) }],
  });
  const log: LogGroup = { species: species.code, smallEndIn: smallEnd.value, lengthFt: length.value, count: 1 };
  return {
    worked: {
      log,
      estimate: estimateLog(log),
      weightLb: greenWeightWithBark(log, species),
      barkIn: (smallEnd.value * (barkRatio(species) - 1)) / 2,
      speciesName: species.name,
      boards: plan.boards,
      bestBoardFeet: plan.boardFeet,
    },
    problems,
  };
}
