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
