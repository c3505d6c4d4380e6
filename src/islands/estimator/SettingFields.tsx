import type { ReactElement } from 'react';
import { Radios } from '~/islands/form/choices.tsx';
import { Select } from '~/islands/form/fields.tsx';
import type { Units } from '~/islands/logs/words.ts';
import type { Settings } from './use-estimator.ts';

interface SettingFieldsProps {
  readonly settings: Settings;
  readonly units: Units;
  readonly onChange: (part: { readonly settings?: Settings; readonly units?: Units }) => void;
}

const longest = [16, 20, 32, 40] as const;

/** How scaling is done in this region, and the units of bare numbers. */
export function SettingFields({ settings, units, onChange }: SettingFieldsProps): ReactElement {
  return (
    <div className="grid gap-6 sm:grid-cols-3">
      <Radios name="units" legend="Units" value={units} onChoose={(value) => onChange({ units: value === 'metric' ? 'metric' : 'us' })} options={[{ value: 'us', label: 'Inches and feet' }, { value: 'metric', label: 'Centimetres and metres' }]} />
      <Radios name="half" legend="An exact half inch" value={settings.halfInchRounding} onChoose={(value) => onChange({ settings: { ...settings, halfInchRounding: value === 'down' ? 'down' : 'up' } })} options={[{ value: 'up', label: 'goes up' }, { value: 'down', label: 'goes down' }]} />
      <Select name="longest" label="Longest log scaled in one piece" hint="Longer logs are scaled in pieces." value={settings.longestScalingLengthFt} onChange={(event) => onChange({ settings: { ...settings, longestScalingLengthFt: longest.find((feet) => feet === Number(event.target.value)) ?? 20 } })} options={longest.map((feet) => ({ value: String(feet), label: `${feet} ft` }))} />
    </div>
  );
}
