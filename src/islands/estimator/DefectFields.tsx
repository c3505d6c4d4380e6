import type { ReactElement } from 'react';
import { field } from '~/components/classes.ts';
import { defectRules, type DefectKind } from '~/domain/timber/defects.ts';
import { Button } from '~/islands/form/choices.tsx';
import { Field, Select } from '~/islands/form/fields.tsx';
import type { Units } from '~/islands/logs/words.ts';
import { defectForms, type DraftDefect } from './draft.ts';

interface DefectFieldsProps {
  readonly defects: readonly DraftDefect[];
  readonly errors: Readonly<Record<string, string>>;
  readonly units: Units;
  readonly onChange: (defects: readonly DraftDefect[]) => void;
}

const kinds: readonly DefectKind[] = ['interiorRot', 'section', 'wedge', 'sweep', 'crook', 'squared'];
const options = kinds.map((kind) => ({ value: kind, label: defectRules[kind].name }));

/** Defects by figures: a kind, and the measures that kind asks for. */
export function DefectFields({ defects, errors, units, onChange }: DefectFieldsProps): ReactElement {
  const put = (index: number, defect: DraftDefect): void => onChange(defects.map((other, at) => (at === index ? defect : other)));
  const suffix = (unit: 'in' | 'ft' | 'deg'): string => (unit === 'deg' ? '°' : units === 'us' ? unit : unit === 'ft' ? 'm' : 'cm');
  return (
    <div>
      {defects.map((defect, index) => (
        <fieldset key={index} className="mt-3 border-l-4 border-rule pl-3">
          <legend className="font-semibold">Defect {index + 1}</legend>
          <Select name={`defect-${index}-kind`} label="Kind" hint={defectForms[defect.kind].hint} options={options} value={defect.kind} onChange={(event) => put(index, { kind: event.target.value as DefectKind, values: defect.values })} />
          <div className="mt-2 grid grid-cols-2 gap-3">
            {defectForms[defect.kind].fields.map((part) => (
              <Field key={part.field} name={`defect-${index}-${part.field}`} label={part.label} suffix={suffix(part.unit)} figure inputMode="text" autoComplete="off" value={defect.values[part.field] ?? ''} onChange={(event) => put(index, { ...defect, values: { ...defect.values, [part.field]: event.target.value } })} />
            ))}
          </div>
          {errors[`defect-${index}`] && <p className={field.error}>{errors[`defect-${index}`]}</p>}
          <Button kind="quiet" onClick={() => onChange(defects.filter((_, at) => at !== index))}>Remove defect {index + 1}</Button>
        </fieldset>
      ))}
      <Button kind="quiet" onClick={() => onChange([...defects, { kind: 'interiorRot', values: {} }])}>Add a defect</Button>
    </div>
  );
}
