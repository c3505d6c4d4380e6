import type { ComponentProps, ReactElement } from 'react';
import { buttonKinds, field, gloveSize, join, type ButtonKind } from '~/components/classes.ts';
import { describedBy, errorId, fieldId, hintId } from '~/components/field-ids.ts';

interface CheckboxProps extends Omit<ComponentProps<'input'>, 'id' | 'name' | 'type' | 'className'> {
  readonly name: string;
  readonly label: string;
  readonly hint?: string | undefined;
  readonly error?: string | undefined;
}

/** One yes-or-no box with its own label. */
export function Checkbox({ name, label, hint, error, ...input }: CheckboxProps): ReactElement {
  return (
    <div className={field.group}>
      {error && <p className={field.error} id={errorId(name)}>{error}</p>}
      <label className={field.choice} htmlFor={fieldId(name)}>
        <input {...input} className={field.choiceBox} type="checkbox" id={fieldId(name)} name={name} aria-describedby={describedBy(name, hint, error)} aria-invalid={error ? true : undefined} />
        <span>{label}</span>
      </label>
      {hint && <p className={join(field.hint, 'pl-9')} id={hintId(name)}>{hint}</p>}
    </div>
  );
}

interface RadiosProps {
  readonly name: string;
  readonly legend: string;
  readonly options: readonly { readonly value: string; readonly label: string; readonly hint?: string | undefined }[];
  readonly value: string;
  readonly onChoose: (value: string) => void;
  readonly hint?: string | undefined;
  readonly error?: string | undefined;
  readonly inline?: boolean | undefined;
}

/** One of a few choices, all in sight. */
export function Radios({ name, legend, options, value, onChoose, hint, error, inline = false }: RadiosProps): ReactElement {
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
              <input className={field.choiceBox} type="radio" id={id} name={name} value={option.value} checked={option.value === value} onChange={() => onChoose(option.value)} />
              <span>{option.label}{option.hint && <span className="block text-sm text-ink-soft">{option.hint}</span>}</span>
            </label>
          );
        })}
      </div>
    </fieldset>
  );
}

/** A button of an island; `type="button"` unless told. */
export function Button({ kind = 'primary', glove = false, wide = false, ...button }: Omit<ComponentProps<'button'>, 'className'> & { readonly kind?: ButtonKind; readonly glove?: boolean; readonly wide?: boolean }): ReactElement {
  return <button type="button" {...button} className={join(buttonKinds[kind], glove && gloveSize, wide && 'w-full')} />;
}
