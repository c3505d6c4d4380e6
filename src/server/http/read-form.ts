import type { z } from 'zod';
import type { Problem } from '~/domain/result.ts';
import { Refusal } from '../errors.ts';
import { problemsOf } from './endpoint.ts';

/** What a form post said: the understood value, or the problems with everything that was typed, to render the page again. */
export type FormRead<T> =
  | { readonly ok: true; readonly value: T; readonly typed: Typed }
  | { readonly ok: false; readonly typed: Typed; readonly problems: readonly Problem[] };

/** Form fields as they were typed; a name that was sent more than once is a list. */
export type Typed = Readonly<Record<string, string | readonly string[]>>;

/**
 * Reads a posted form by a schema. Names ending in `[]` are always lists (without the brackets in the schema).
 * The page answers 422 and renders itself again with `typed` and `problems` when `ok` is false.
 * @throws Refusal `invalid` when the body is not a form at all.
 */
export async function readForm<T>(request: Request, schema: z.ZodType<T>): Promise<FormRead<T>> {
  const data = await request.formData().catch(() => {
    throw new Refusal('invalid', 'What was sent is not a form.');
  });
  const typed: Record<string, string | string[]> = {};
  for (const [name, value] of data.entries()) {
    if (typeof value !== 'string') continue;
    const key = name.replace(/\[\]$/, '');
    const before = typed[key];
    if (name.endsWith('[]') || before !== undefined) typed[key] = [...(Array.isArray(before) ? before : before === undefined ? [] : [before]), value];
    else typed[key] = value;
  }
  const read = schema.safeParse(typed);
  return read.success ? { ok: true, value: read.data, typed } : { ok: false, typed, problems: problemsOf(read.error) };
}

/** A file's name may be anything the sender likes: so much of it is kept, on one line. */
const LONGEST_NAME = 80;

/**
 * The text and the name of a file posted by a form, read beside the form's other fields; null when none was chosen.
 * @throws Refusal `invalid` when the body is not a form at all.
 */
export async function uploadedFile(request: Request, name: string): Promise<{ readonly text: string; readonly name: string } | null> {
  const data = await request.clone().formData().catch(() => {
    throw new Refusal('invalid', 'What was sent is not a form.');
  });
  const file = data.get(name);
  if (!(file instanceof File) || file.size === 0) return null;
  const kept = file.name.replaceAll(/[\p{Cc}\p{Cf}]+/gu, ' ').trim().slice(0, LONGEST_NAME);
  return { text: await file.text(), name: kept === '' ? 'a file' : kept };
}
