import { createContext, useContext, type ReactElement, type ReactNode } from 'react';
import { field } from '~/components/classes.ts';
import { describedBy, errorId, fieldId, hintId } from '~/components/field-ids.ts';
import { cautionSource } from '~/domain/cautions.ts';
import type { Danger } from '~/domain/listing/cautions.ts';
import type { Option } from '~/domain/listing/answers.ts';
import type { Answer, ListingTyped } from '~/domain/listing/draft.ts';
import { Field, TextArea, type FieldProps } from '../form/fields.tsx';

export interface FormState {
  /** What the form was opened with: the fields keep themselves from there on. */
  readonly opened: ListingTyped;
  /** What stands in the form now. */
  readonly typed: ListingTyped;
  /** The problem of an answer, from the last time the form was sent, until the answer changes. */
  readonly problem: (name: Answer) => string | undefined;
}

export const FormContext = createContext<FormState | null>(null);

/** The form's state, for its parts. */
export function useForm(): FormState {
  const state = useContext(FormContext);
  if (!state) throw new Error('A part of the listing form stands outside of it.');
  return state;
}

/** One question with its answers in sight. The browser keeps what is chosen, with or without script. */
export function Choose({ name, legend, options, hint, inline = false }: { readonly name: Answer; readonly legend: string; readonly options: readonly Option[]; readonly hint?: string; readonly inline?: boolean }): ReactElement {
  const { opened, problem } = useForm();
  const error = problem(name);
  return (
    <fieldset className={field.group} role="radiogroup" aria-describedby={describedBy(name, hint, error)} aria-invalid={error ? true : undefined}>
      <legend className={field.legend}>{legend}</legend>
      {hint && <p className={field.hint} id={hintId(name)}>{hint}</p>}
      {error && <p className={field.error} id={errorId(name)}>{error}</p>}
      <div className={inline ? 'flex flex-wrap gap-x-6' : ''}>
        {options.map((option, index) => {
          const id = index === 0 ? fieldId(name) : `${fieldId(name)}-${index + 1}`;
          return (
            <label className={field.choice} htmlFor={id} key={option.value}>
              <input className={field.choiceBox} type="radio" id={id} name={name} value={option.value} defaultChecked={opened[name] === option.value} />
              <span>{option.label}{option.hint && <span className="block text-sm text-ink-soft">{option.hint}</span>}</span>
            </label>
          );
        })}
      </div>
    </fieldset>
  );
}

/** A yes-or-no box. */
export function Tick({ name, label, hint }: { readonly name: Answer; readonly label: string; readonly hint?: string | undefined }): ReactElement {
  const { opened, problem } = useForm();
  const error = problem(name);
  return (
    <div className={field.group}>
      {error && <p className={field.error} id={errorId(name)}>{error}</p>}
      <label className={field.choice} htmlFor={fieldId(name)}>
        <input className={field.choiceBox} type="checkbox" id={fieldId(name)} name={name} defaultChecked={opened[name] !== ''} aria-describedby={describedBy(name, undefined, error)} aria-invalid={error ? true : undefined} />
        <span>{label}{hint && <span className="block text-sm text-ink-soft">{hint}</span>}</span>
      </label>
    </div>
  );
}

/** One line of text for a single answer. */
export function Line({ name, ...rest }: Omit<FieldProps, 'name' | 'error' | 'defaultValue'> & { readonly name: Answer }): ReactElement {
  const { opened, problem } = useForm();
  return <Field autoComplete="off" {...rest} name={name} defaultValue={opened[name]} error={problem(name)} />;
}

/** Several lines of text for a single answer. */
export function Lines({ name, label, hint, optional, rows = 3 }: { readonly name: Answer; readonly label: string; readonly hint?: string; readonly optional?: boolean; readonly rows?: number }): ReactElement {
  const { opened, problem } = useForm();
  return <TextArea name={name} label={label} hint={hint} optional={optional} rows={rows} defaultValue={opened[name]} error={problem(name)} />;
}

/** A numbered part of the form. */
export function Part({ id, number, title, lead, children }: { readonly id: string; readonly number: number; readonly title: string; readonly lead?: string; readonly children: ReactNode }): ReactElement {
  return (
    <section className="border-t-2 border-ink pb-12 pt-5" id={id} aria-labelledby={`${id}-title`}>
      <h2 id={`${id}-title`}><span className="figure mr-2 text-heartwood">{number}</span>{title}</h2>
      {lead && <p className="mt-1 max-w-prose text-ink-soft">{lead}</p>}
      <div className="mt-5 grid gap-6">{children}</div>
    </section>
  );
}

/** A caution beside the answer that calls for it; the same words and look as on the pages. */
export function Care({ danger }: { readonly danger: Danger | null }): ReactElement | null {
  if (!danger) return null;
  return (
    <aside className="border-l-4 border-amber bg-sheet px-4 py-3" aria-label={`Take care: ${danger.title}`}>
      <p className="font-bold"><span className="text-amber">Take care.</span> {danger.title}</p>
      {danger.cautions.map((caution) => (
        <p className="mt-1 max-w-prose" key={caution.title}>{caution.text} <span className="text-sm text-ink-soft">{cautionSource(caution)}</span></p>
      ))}
      <p className="mt-2 text-sm text-ink-soft">Follow local codes, the equipment’s manual and a licensed or trained professional.</p>
    </aside>
  );
}
