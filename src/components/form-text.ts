import type { Problem } from '~/domain/result.ts';
import { problemAt } from './field-ids.ts';

/** What stands in a form's fields and what is wrong with them, as the parts of a long form ask for it. */
export interface FormText {
  /** The text in a field; empty when there is none. */
  readonly said: (name: string) => string;
  /** Every value posted under one name. */
  readonly listed: (name: string) => readonly string[];
  readonly wrong: (name: string) => string | undefined;
}

/**
 * @param typed the fields as posted; none on a page that was only asked for
 * @param kept what was kept before, shown while nothing was posted
 */
export function formText(typed: Readonly<Record<string, string | readonly string[]>>, problems: readonly Problem[], kept: Readonly<Record<string, string | readonly string[]>>): FormText {
  const from = Object.keys(typed).length > 0 ? typed : kept;
  return {
    said: (name) => {
      const value = from[name];
      return typeof value === 'string' ? value : (value?.[0] ?? '');
    },
    listed: (name) => {
      const value = from[name];
      return typeof value === 'string' ? [value] : (value ?? []);
    },
    wrong: (name) => problemAt(problems, name),
  };
}
