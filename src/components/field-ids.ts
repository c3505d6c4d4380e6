import type { Problem } from '~/domain/result.ts';

/** The id of the control for a field's dotted path, so that an error summary can link to it. */
export const fieldId = (path: string): string => `f-${path.replace(/[^A-Za-z0-9_-]+/g, '-')}`;

export const hintId = (path: string): string => `${fieldId(path)}-hint`;
export const errorId = (path: string): string => `${fieldId(path)}-error`;

/** The ids a control is described by, or undefined when it has neither hint nor error. */
export function describedBy(path: string, hint: string | undefined, error: string | undefined): string | undefined {
  const ids = [hint ? hintId(path) : '', error ? errorId(path) : ''].filter(Boolean);
  return ids.length > 0 ? ids.join(' ') : undefined;
}

/** The first message for a field, to hand to its `error`. */
export const problemAt = (problems: readonly Problem[] | undefined, path: string): string | undefined =>
  problems?.find((problem) => problem.path === path)?.message;
