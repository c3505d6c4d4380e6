import type { ReactElement, ReactNode } from 'react';
import { field, fieldWidth, type FieldWidth } from '~/components/classes.ts';
import { errorId, fieldId, hintId } from '~/components/field-ids.ts';

/** What every form part of an island takes; the same words and ids as the .astro components. */
export interface PartProps {
  readonly name: string;
  readonly label: string;
  readonly hint?: string | undefined;
  readonly error?: string | undefined;
  readonly optional?: boolean | undefined;
  readonly width?: FieldWidth | undefined;
}

/** Label, hint and error round one control, tied by ids. */
export function Frame({ name, label, hint, error, optional = false, width = 'full', children }: PartProps & { readonly children: ReactNode }): ReactElement {
  return (
    <div className={field.group}>
      <label className={field.label} htmlFor={fieldId(name)}>{label}{optional && <span className="font-normal text-ink-soft"> (if you like)</span>}</label>
      {hint && <p className={field.hint} id={hintId(name)}>{hint}</p>}
      <div className={fieldWidth[width]}>{children}</div>
      {error && <p className={field.error} id={errorId(name)}>{error}</p>}
    </div>
  );
}
