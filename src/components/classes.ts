/** The classes of form parts, shared by .astro components and React islands so that both look the same. */
export const field = {
  group: 'min-w-0',
  label: 'block font-semibold',
  hint: 'mt-0.5 text-sm text-ink-soft',
  error: 'mt-1 border-l-4 border-heartwood pl-2 font-semibold text-heartwood',
  box: 'mt-1 flex min-h-target items-stretch rounded-none border-2 border-ink bg-sheet focus-within:outline focus-within:outline-[3px] focus-within:outline-offset-2 focus-within:outline-crayon',
  boxWrong: 'border-heartwood',
  input: 'min-h-[40px] w-full min-w-0 flex-1 border-0 bg-transparent px-2.5 py-1.5 text-ink outline-none focus-visible:outline-none',
  figure: 'font-mono tabular-nums',
  affix: 'flex items-center px-2.5 font-mono text-ink-soft',
  choice: 'flex min-h-target cursor-pointer items-start gap-3 py-2',
  choiceBox: 'mt-0.5 h-6 w-6 shrink-0 accent-crayon',
  legend: 'font-semibold',
} as const;

export const fieldWidth = { short: 'max-w-[8rem]', medium: 'max-w-[16rem]', full: 'w-full' } as const;
export type FieldWidth = keyof typeof fieldWidth;

const button = 'inline-flex min-h-target items-center justify-center gap-2 rounded border-2 px-4 py-2 text-center font-bold leading-tight no-underline disabled:cursor-not-allowed disabled:opacity-60';
export const buttonKinds = {
  primary: `${button} border-crayon bg-crayon text-paper hover:border-ink hover:bg-ink`,
  outlined: `${button} border-crayon bg-transparent text-crayon hover:bg-crayon hover:text-paper`,
  danger: `${button} border-heartwood bg-transparent text-heartwood hover:bg-heartwood hover:text-paper`,
  quiet: 'inline-flex min-h-target items-center gap-2 border-2 border-transparent py-2 font-semibold text-crayon underline underline-offset-4 hover:decoration-2',
} as const;
export type ButtonKind = keyof typeof buttonKinds;

/** The milling-day size: reached with a glove on. */
export const gloveSize = '!min-h-glove px-6 text-lg';

/** Joins class names, leaving out what is absent. */
export const join = (...names: readonly (string | false | null | undefined)[]): string => names.filter(Boolean).join(' ');
