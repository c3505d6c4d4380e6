import type { ComponentProps, ReactElement } from 'react';
import { field, join } from '~/components/classes.ts';
import { describedBy, fieldId } from '~/components/field-ids.ts';
import { Frame, type PartProps } from './frame.tsx';

type InputProps = Omit<ComponentProps<'input'>, 'id' | 'name' | 'width' | 'prefix' | 'className'>;

export interface FieldProps extends PartProps, InputProps {
  /** Sets the text in the mono face. */
  readonly figure?: boolean | undefined;
  readonly prefix?: string | undefined;
  readonly suffix?: string | undefined;
}

/** One line of text; takes every property of an input, `ref` included, so that a form library can register it. */
export function Field({ name, label, hint, error, optional, width, figure, prefix, suffix, ...input }: FieldProps): ReactElement {
  return (
    <Frame {...{ name, label, hint, error, optional, width }}>
      <div className={join(field.box, error && field.boxWrong)}>
        {prefix && <span className={field.affix} aria-hidden="true">{prefix}</span>}
        <input {...input} className={join(field.input, figure && field.figure)} id={fieldId(name)} name={name} aria-describedby={describedBy(name, hint, error)} aria-invalid={error ? true : undefined} />
        {suffix && <span className={field.affix}>{suffix}</span>}
      </div>
    </Frame>
  );
}

/** An amount in dollars as a person types it. */
export function MoneyField(props: Omit<FieldProps, 'prefix' | 'figure'>): ReactElement {
  return <Field inputMode="decimal" autoComplete="off" {...props} prefix="$" figure width={props.width ?? 'medium'} />;
}

/** Several lines of text. */
export function TextArea({ name, label, hint, error, optional, width, ...area }: PartProps & Omit<ComponentProps<'textarea'>, 'id' | 'name' | 'className'>): ReactElement {
  return (
    <Frame {...{ name, label, hint, error, optional, width }}>
      <div className={join(field.box, error && field.boxWrong)}>
        <textarea rows={5} {...area} className={field.input} id={fieldId(name)} name={name} aria-describedby={describedBy(name, hint, error)} aria-invalid={error ? true : undefined} />
      </div>
    </Frame>
  );
}

export interface Option {
  readonly value: string;
  readonly label: string;
}

/** A choice from a list. */
export function Select({ name, label, hint, error, optional, width, options, ...select }: PartProps & { readonly options: readonly Option[] } & Omit<ComponentProps<'select'>, 'id' | 'name' | 'className'>): ReactElement {
  return (
    <Frame {...{ name, label, hint, error, optional, width }}>
      <div className={join(field.box, error && field.boxWrong)}>
        <select {...select} className={field.input} id={fieldId(name)} name={name} aria-describedby={describedBy(name, hint, error)} aria-invalid={error ? true : undefined}>
          {options.map((option) => <option key={option.value} value={option.value}>{option.label}</option>)}
        </select>
      </div>
    </Frame>
  );
}
