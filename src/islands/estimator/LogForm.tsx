import { useEffect, useRef, useState, type SubmitEvent, type ReactElement } from 'react';
import { scaleLog, type ScaleSettings } from '~/domain/timber/log-scale.ts';
import type { LogGroup } from '~/domain/timber/logs-in-url.ts';
import { speciesOf } from '~/domain/timber/species.ts';
import { greenWeightWithBark } from '~/domain/timber/weight.ts';
import { fieldId } from '~/components/field-ids.ts';
import { Button, Checkbox } from '~/islands/form/choices.tsx';
import { Field } from '~/islands/form/fields.tsx';
import { sayWeight, wholeNumber, type Units } from '~/islands/logs/words.ts';
import { DefectFields } from './DefectFields.tsx';
import { readDraft, type Draft } from './draft.ts';
import { SpeciesPicker } from './SpeciesPicker.tsx';

/** The two figures asked for first, in sight of the form on a phone. */
const shortly = (log: LogGroup, settings: ScaleSettings, units: Units): string =>
  `${wholeNumber(scaleLog(log, settings).netBoardFeet.internationalQuarter)} bf International ¼ · ${sayWeight(greenWeightWithBark(log, speciesOf(log.species)), units)}`;

interface LogFormProps {
  readonly draft: Draft;
  readonly settings: ScaleSettings;
  readonly units: Units;
  /** A log of the list is being changed. */
  readonly changing: boolean;
  readonly onChange: (draft: Draft) => void;
  readonly onAdd: (log: LogGroup) => void;
  readonly onCancel: () => void;
}

/** The measures of one log as they are read off the tape. Nothing is scolded before "Add this log" but what cannot be right. */
export function LogForm({ draft, settings, units, changing, onChange, onAdd, onCancel }: LogFormProps): ReactElement {
  const [tried, setTried] = useState(false);
  const form = useRef<HTMLFormElement>(null);
  const { log, problems, missing } = readDraft(draft, units);
  const errors: Readonly<Record<string, string>> = tried ? { ...missing, ...problems } : problems;
  const blocked = Object.keys(missing).length > 0 || Object.keys(problems).length > 0;
  const set = (part: Partial<Draft>): void => onChange({ ...draft, ...part });
  const tape = (field: 'small' | 'smallAcross' | 'large' | 'length' | 'count') => ({
    name: field, figure: true, autoComplete: 'off', inputMode: 'text' as const, value: draft[field], error: errors[field], onChange: (event: { target: { value: string } }) => set({ [field]: event.target.value }),
  });
  const diameter = units === 'us' ? 'in' : 'cm';

  // The first field that is wrong takes the focus, once the error stands beside it.
  const [seek, setSeek] = useState(0);
  useEffect(() => {
    if (seek > 0) form.current?.querySelector<HTMLElement>('[aria-invalid="true"]')?.focus();
  }, [seek]);

  const submit = (event: SubmitEvent): void => {
    event.preventDefault();
    if (log === null || blocked) {
      setTried(true);
      setSeek(seek + 1);
      return;
    }
    setTried(false);
    onAdd(log);
    document.getElementById(fieldId('small'))?.focus();
  };

  return (
    <form ref={form} onSubmit={submit} noValidate className="grid gap-4">
      <SpeciesPicker name="species" value={draft.species} onChoose={(species) => set({ species })} error={errors['species']} />
      <div className="grid grid-cols-2 gap-3">
        <Field {...tape('small')} label={draft.overBark ? 'Small end, over bark' : 'Small end, inside bark'} suffix={diameter} />
        <Field {...tape('length')} label="Length, with trim" suffix={units === 'us' ? 'ft' : 'm'} />
      </div>
      <Checkbox name="over-bark" label="I measured over the bark" hint="The bark of this species is taken off." checked={draft.overBark} onChange={(event) => set({ overBark: event.target.checked })} />
      <div className="grid grid-cols-2 items-end gap-3 sm:grid-cols-3">
        <Field {...tape('smallAcross')} label="Small end, other way" optional suffix={diameter} />
        <Field {...tape('large')} label="Large end" optional suffix={diameter} />
        <Field {...tape('count')} label="How many alike" />
      </div>
      <details open={draft.defects.length > 0}>
        <summary className="min-h-target py-2.5 font-semibold text-crayon">Rot, sweep and other defects{draft.defects.length > 0 && ` (${draft.defects.length})`}</summary>
        <DefectFields defects={draft.defects} errors={errors} units={units} onChange={(defects) => set({ defects })} />
      </details>
      {log && <p className="figure lg:hidden" aria-live="polite">{shortly(log, settings, units)}</p>}
      <div className="flex flex-wrap items-center gap-4">
        <Button type="submit">{changing ? 'Save this log' : 'Add this log'}</Button>
        {changing && <Button kind="quiet" onClick={onCancel}>Leave it as it was</Button>}
      </div>
    </form>
  );
}
