import { useState, type ReactElement } from 'react';
import { told } from '~/domain/cautions.ts';
import { parseLengthFt, parseLengthIn, parseNumber } from '~/domain/measure.ts';
import { heightByAngleFt, heightByStickFt, reachOf, usableLogs16ft } from '~/domain/timber/standing-tree.ts';
import { roundHalfUp } from '~/domain/timber/rounding.ts';
import { treeVolume, type TreeVolumeRule } from '~/domain/timber/tree-volume.ts';
import { Field } from '~/islands/form/fields.tsx';
import { Radios } from '~/islands/form/choices.tsx';
import { sayFeet, wholeNumber, type Units } from '~/islands/logs/words.ts';
import { Cautions } from './Cautions.tsx';

const rules: readonly { readonly rule: TreeVolumeRule; readonly name: string }[] = [
  { rule: 'internationalQuarter', name: 'International ¼' },
  { rule: 'doyle', name: 'Doyle' },
];

type Method = 'stick' | 'angle';

interface Typed {
  readonly dbh: string;
  readonly logs: string;
  readonly distance: string;
  readonly stick: string;
  readonly arm: string;
  readonly top: string;
  readonly foot: string;
}

const blank: Typed = { dbh: '', logs: '', distance: '', stick: '', arm: '25', top: '', foot: '0' };

/** Before the tree is down: what it could hold, how high it is, and how far it reaches; never without the cautions. */
export function StandingTree({ units }: { readonly units: Units }): ReactElement {
  const [typed, setTyped] = useState(blank);
  const [method, setMethod] = useState<Method>('stick');
  const tape = (name: keyof Typed) => ({ name: `tree-${name}`, figure: true, autoComplete: 'off', inputMode: 'text' as const, value: typed[name], onChange: (event: { target: { value: string } }) => setTyped({ ...typed, [name]: event.target.value }) });
  const inches = (text: string): number | null => { const read = parseLengthIn(text, units === 'us' ? 'in' : 'cm'); return read.ok ? read.value : null; };
  const feet = (text: string): number | null => { const read = parseLengthFt(text, units === 'us' ? 'ft' : 'm'); return read.ok ? read.value : null; };
  const degrees = (text: string): number | null => {
    const plain = text.trim().replace(/[−–]/g, '-').replace(/\s*(°|deg|degrees)$/, '');
    const value = parseNumber(plain.replace(/^-/, ''));
    return value === null || value > 80 ? null : plain.startsWith('-') ? -value : value;
  };
  const height = (): number | null => {
    const distance = feet(typed.distance);
    const [stick, arm, top, foot] = [inches(typed.stick), inches(typed.arm), degrees(typed.top), degrees(typed.foot)];
    if (distance === null || distance > 500) return null;
    if (method === 'stick') return stick !== null && arm !== null && arm > 0 ? heightByStickFt(distance, stick, arm) : null;
    return top !== null && foot !== null && top > foot ? heightByAngleFt(distance, top, foot) : null;
  };
  const heightFt = height();
  const dbh = inches(typed.dbh);
  const logs = parseNumber(typed.logs);
  const volumes = dbh !== null && logs !== null ? rules.map(({ rule, name }) => ({ name, volume: treeVolume({ rule, dbhIn: roundHalfUp(dbh), logs16ft: logs }) })) : [];
  const reach = heightFt === null ? null : reachOf(heightFt);

  return (
    <div className="grid gap-10 lg:grid-cols-2">
      <div className="grid content-start gap-4">
        <h2>What it could hold</h2>
        <div className="grid grid-cols-2 items-end gap-3">
          <Field {...tape('dbh')} label="Diameter at breast height" hint="4½ ft up, over the bark. Tape round ÷ 3.14." suffix={units === 'us' ? 'in' : 'cm'} />
          <Field {...tape('logs')} label="Usable 16-ft logs" hint="Up to where it forks or gets too thin, in halves." />
        </div>
        {volumes.length > 0 && (
          <table className="ruled">
            <caption>At {roundHalfUp(dbh ?? 0)} in and {logs} logs, form class 78. Mesavage and Girard, USDA Forest Service (1946, revised 1956).</caption>
            <thead><tr><th scope="col">Rule</th><th scope="col" className="num">bf</th></tr></thead>
            <tbody>
              {volumes.map(({ name, volume }) => (
                <tr key={name}><th scope="row">{name}</th><td className={volume.ok ? 'num font-bold' : ''}>{volume.ok ? wholeNumber(volume.value.boardFeet) : volume.problems[0]?.message}</td></tr>
              ))}
            </tbody>
          </table>
        )}
        <p className="text-sm text-ink-soft">A standing tree hides rot, metal and forks. The table is for a tree whose first log tapers to 78 % of its breast-height diameter: yard trees with low branches hold less.</p>
      </div>
      <div className="grid content-start gap-4">
        <h2>How high it is, how far it reaches</h2>
        <Radios name="tree-method" legend="Measure with" inline value={method} onChoose={(value) => setMethod(value === 'angle' ? 'angle' : 'stick')} options={[{ value: 'stick', label: 'A stick at arm’s length' }, { value: 'angle', label: 'An angle (a phone’s level)' }]} />
        <div className="grid grid-cols-2 items-end gap-3 sm:grid-cols-3">
          <Field {...tape('distance')} label="You to the tree, level" suffix={units === 'us' ? 'ft' : 'm'} />
          {method === 'stick' ? (
            <>
              <Field {...tape('stick')} label="Stick that covers the tree" suffix={units === 'us' ? 'in' : 'cm'} />
              <Field {...tape('arm')} label="Eye to stick" suffix={units === 'us' ? 'in' : 'cm'} />
            </>
          ) : (
            <>
              <Field {...tape('top')} label="Angle up to the top" suffix="°" />
              <Field {...tape('foot')} label="Angle to the foot" hint="Below level: −5" suffix="°" />
            </>
          )}
        </div>
        <dl aria-live="polite">
          {reach && heightFt !== null && (
            <>
              <TreeLine term="Height" value={sayFeet(Math.round(heightFt), units)} note={method === 'stick' ? 'distance × stick ÷ arm' : 'distance × (tan top − tan foot)'} />
              <TreeLine term="Usable 16-ft logs, at most" value={String(usableLogs16ft(heightFt))} note="if it were clear to the top; count only to the first fork" />
              <TreeLine term="Could reach from the stump" value={sayFeet(Math.ceil(reach.reachFt), units)} note="height and a tenth (common practice, no source)" />
              <TreeLine term="Keep everybody this far away" value={sayFeet(Math.ceil(reach.clearZoneFt), units)} note="two tree lengths (29 CFR 1910.266)" />
            </>
          )}
        </dl>
        <Cautions cautions={told('felling', 'storm', 'distance', 'height', 'lines')} />
      </div>
    </div>
  );
}

function TreeLine({ term, value, note }: { readonly term: string; readonly value: string; readonly note: string }): ReactElement {
  return (
    <div className="flex flex-wrap items-baseline justify-between gap-x-4 border-b border-rule py-2">
      <dt>{term}<span className="block text-sm text-ink-soft">{note}</span></dt>
      <dd className="figure font-bold">{value}</dd>
    </div>
  );
}
