import type { z } from 'zod';
import type { Problem } from '~/domain/result.ts';
import { Refusal } from '../errors.ts';
import { statusOf } from './problem.ts';
import { readForm, type Typed } from './read-form.ts';

/** What came of a posted form: what the deed answered, or everything typed with what is wrong, to show the page again. */
export interface Taken<R> {
  readonly done?: { readonly answer: R };
  readonly typed: Typed;
  readonly problems: readonly Problem[];
}

/** A page that was only asked for. */
export const nothingTaken: Taken<never> = { typed: {}, problems: [] };

/** The part of Astro that taking a form needs. */
interface Page {
  readonly request: Request;
  readonly response: { status?: number; headers: Headers };
}

/**
 * Reads a posted form and does the deed. A form that cannot be read and a deed that refuses for a reason the person can mend give
 * `problems` and set the page's status (422, 403, 409, 429); a refusal that leaves no page to show is thrown on.
 */
export async function takeForm<T, R>(page: Page, schema: z.ZodType<T>, deed: (value: T) => Promise<R>): Promise<Taken<R>> {
  const form = await readForm(page.request, schema);
  if (!form.ok) {
    page.response.status = 422;
    return { typed: form.typed, problems: form.problems };
  }
  try {
    return { done: { answer: await deed(form.value) }, typed: form.typed, problems: [] };
  } catch (error) {
    if (!(error instanceof Refusal) || error.kind === 'signedOut' || error.kind === 'notFound') throw error;
    page.response.status = statusOf(error);
    if (error.retryAfterS !== undefined) page.response.headers.set('retry-after', String(error.retryAfterS));
    return { typed: form.typed, problems: error.problems.length > 0 ? error.problems : [{ path: '', message: error.message }] };
  }
}

/** What was typed in a field of one value. */
export const typedText = (typed: Typed, name: string): string | undefined => {
  const value = typed[name];
  return typeof value === 'string' ? value : value?.[0];
};

/** What was typed in a field of several values; undefined when the form was not posted with it. */
export const typedList = (typed: Typed, name: string): readonly string[] | undefined => {
  const value = typed[name];
  return typeof value === 'string' ? [value] : value;
};
