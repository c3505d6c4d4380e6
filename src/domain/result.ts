/**
 * How a pure rule refuses: a value, never an exception, so that a form can put the words beside the field.
 * `path` names the field in dotted form (`logs.2.smallEndIn`); `message` is for a person and ends with a full stop.
 */
export interface Problem {
  readonly path: string;
  readonly message: string;
}

export type Result<T> = { readonly ok: true; readonly value: T } | { readonly ok: false; readonly problems: readonly Problem[] };

/** A successful result. */
export const good = <T>(value: T): Result<T> => ({ ok: true, value });

/** A refusal for one field. */
export const refused = (path: string, message: string): { readonly ok: false; readonly problems: readonly Problem[] } => ({
  ok: false,
  problems: [{ path, message }],
});
