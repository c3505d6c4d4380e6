/** A linear model in whole numbers or fractions, and what a solver makes of it. The solver itself is handed in: see `services/solver.ts`. */
export interface Model {
  readonly columns: readonly { readonly cost: number; readonly most: number; readonly whole: boolean }[];
  /** Σ coefficient × column ≥ (or ≤) `rest`. */
  readonly rows: readonly { readonly terms: readonly (readonly [column: number, coefficient: number])[]; readonly sign: '>=' | '<='; readonly rest: number }[];
}

export interface Solution {
  /** Proven least; otherwise the best found in the time. */
  readonly proven: boolean;
  readonly cost: number;
  readonly columns: readonly number[];
  /** What one more of each row's right-hand side costs; zeros for a model with whole columns. */
  readonly prices: readonly number[];
}

/** Minimises a model within some seconds; null when nothing was found. */
export type Solver = (model: Model, seconds: number) => Solution | null;

/** The model in the text form (CPLEX LP) that solvers read: columns `c0…`, rows `r0…`. */
export function modelText({ columns, rows }: Model): string {
  const sum = (terms: readonly (readonly [number, number])[]): string =>
    terms.length === 0 ? '0 c0' : terms.map(([column, coefficient], index) => `${coefficient < 0 ? '-' : '+'} ${Math.abs(coefficient)} c${column}${index % 12 === 11 ? '\n' : ''}`).join(' ');
  const whole = columns.flatMap(({ whole: is }, index) => (is ? [`c${index}`] : []));
  return [
    'Minimize',
    ` cost: ${sum(columns.map(({ cost }, index) => [index, cost] as const).filter(([, cost]) => cost !== 0))}`,
    'Subject To',
    ...rows.map(({ terms, sign, rest }, index) => ` r${index}: ${sum(terms)} ${sign} ${rest}`),
    'Bounds',
    ...columns.map(({ most }, index) => ` 0 <= c${index}${Number.isFinite(most) ? ` <= ${most}` : ''}`),
    ...(whole.length > 0 ? ['Generals', ...whole.map((name, index) => ` ${name}${index % 20 === 19 ? '\n' : ''}`)] : []),
    'End',
  ].join('\n');
}

/** What a solver's program answers for a model in text: HiGHS's own shape, as far as it is read. */
export interface TextSolution {
  readonly Status: string;
  readonly ObjectiveValue: number;
  readonly Columns: Readonly<Record<string, { readonly Primal?: number }>>;
  readonly Rows: readonly { readonly Name: string; readonly Dual?: number }[];
}

/** A solver out of a program that reads models in text and answers by names, as HiGHS does on a server and in a browser. */
export const solverOf =
  (run: (text: string, seconds: number) => TextSolution): Solver =>
  (model, seconds) => {
    const solution = run(modelText(model), seconds);
    const columns = model.columns.map((_, index) => solution.Columns[`c${index}`]?.Primal ?? Number.NaN);
    if (solution.Status === 'Infeasible' || columns.some((value) => !Number.isFinite(value))) return null;
    const duals = new Map(solution.Rows.flatMap(({ Name, Dual }) => (Dual === undefined ? [] : [[Name, Dual] as const])));
    return { proven: solution.Status === 'Optimal', cost: solution.ObjectiveValue, columns, prices: model.rows.map((_, index) => duals.get(`r${index}`) ?? 0) };
  };

/** How HiGHS is asked: without a gap, within the seconds given. */
export const highsOptions = (seconds: number) => ({ output_flag: false, time_limit: seconds, mip_rel_gap: 0, mip_abs_gap: 1e-6 });
