import type { Problem, Result } from '~/domain/result.ts';

/** The ways a deed is refused. Mapped once to HTTP (`http/problem.ts`) and once to a page (`pages/500.astro`, `404.astro`). */
export type Kind = 'invalid' | 'signedOut' | 'forbidden' | 'notFound' | 'conflict' | 'tooMany' | 'unavailable';

/** A refusal in words a person understands. Anything else that is thrown is our fault and is answered with 500. */
export class Refusal extends Error {
  readonly kind: Kind;
  readonly problems: readonly Problem[];
  /** Seconds to wait, for `tooMany` and `unavailable`. */
  readonly retryAfterS: number | undefined;

  constructor(kind: Kind, message: string, options: { problems?: readonly Problem[]; retryAfterS?: number } = {}) {
    super(message);
    this.name = 'Refusal';
    this.kind = kind;
    this.problems = options.problems ?? [];
    this.retryAfterS = options.retryAfterS;
  }
}

/** The input cannot be used; each problem names its field. */
export const invalid = (problems: readonly Problem[], message = 'Some answers need another look.'): Refusal => new Refusal('invalid', message, { problems });
/** Nobody is signed in. */
export const signedOut = (): Refusal => new Refusal('signedOut', 'Sign in to do this.');
/** The account may not do this. */
export const forbidden = (message = 'This account may not do that.'): Refusal => new Refusal('forbidden', message);
/** There is no such thing, or not for this reader. */
export const notFound = (what = 'page'): Refusal => new Refusal('notFound', `There is no such ${what}, or it is not yours to see.`);
/** Someone else was first, or the thing has moved on. */
export const conflict = (message: string): Refusal => new Refusal('conflict', message);
/** Too many tries. */
export const tooMany = (retryAfterS: number): Refusal =>
  new Refusal('tooMany', `Too many tries. Wait ${retryAfterS < 90 ? `${retryAfterS} seconds` : `${Math.ceil(retryAfterS / 60)} minutes`} and try again.`, { retryAfterS });
/** An outside service does not answer. */
export const unavailable = (message: string, retryAfterS = 30): Refusal => new Refusal('unavailable', message, { retryAfterS });

/** The value of a pure rule's result. @throws the refusal, with the rule's own words and paths. */
export function valueOf<T>(result: Result<T>): T {
  if (result.ok) return result.value;
  throw invalid(result.problems, result.problems[0]?.message);
}
