import { useState, type ReactElement } from 'react';
import { buttonKinds, gloveSize, join } from '~/components/classes.ts';
import { levelPith } from '~/domain/sawing/level-pith.ts';
import { formatInches, parseLengthFt, parseLengthIn } from '~/domain/measure.ts';
import { speciesList } from '~/domain/timber/species.ts';
import { Field, Select } from '~/islands/form/fields.tsx';
import type { TallyEntry } from '~/schemas/tally-entries.ts';
import type { TallyLog } from '~/schemas/tally-log.ts';
import { summaryClass } from './Beside.tsx';

type Add = (...entries: TallyEntry[]) => void;
interface Typed {
  readonly small: string;
  readonly large: string;
  readonly length: string;
}

/** Reads the measures of a log, or says what is wrong with them. */
function readMeasures({ small, large, length }: Typed): { readonly smallEndIn: number; readonly largeEndIn: number | null; readonly lengthFt: number } | string {
  const smallEnd = parseLengthIn(small);
  const largeEnd = large.trim() === '' ? null : parseLengthIn(large);
  const long = parseLengthFt(length);
  if (!smallEnd.ok || smallEnd.value < 4 || smallEnd.value > 60) return 'The small end lies between 4 and 60 in, inside bark.';
  if (largeEnd !== null && (!largeEnd.ok || largeEnd.value < smallEnd.value || largeEnd.value > 60)) return 'The large end is at least the small end and at most 60 in.';
  if (!long.ok || long.value < 4 || long.value > 40) return 'The length lies between 4 and 40 ft.';
  return { smallEndIn: smallEnd.value, largeEndIn: largeEnd?.ok ? largeEnd.value : null, lengthFt: long.value };
}

function MeasureFields({ id, typed, problem, onType }: { readonly id: string; readonly typed: Typed; readonly problem: string | undefined; readonly onType: (typed: Typed) => void }): ReactElement {
  return (
    <>
      <Field name={`${id}-small`} label="Small end, inside bark" suffix="in" figure width="short" value={typed.small} error={problem} onChange={(event) => onType({ ...typed, small: event.target.value })} />
      <Field name={`${id}-large`} label="Large end, inside bark" suffix="in" optional figure width="short" value={typed.large} onChange={(event) => onType({ ...typed, large: event.target.value })} />
      <Field name={`${id}-length`} label="Length, with trim" suffix="ft" figure width="short" value={typed.length} onChange={(event) => onType({ ...typed, length: event.target.value })} />
    </>
  );
}

/** Measuring a log again: both see the changed figure, and the landowner is asked when it is over 15 % more. */
export function MeasureAgain({ log, add }: { readonly log: TallyLog; readonly add: Add }): ReactElement {
  const now = log.measured ?? log.listed;
  const [typed, setTyped] = useState<Typed>({ small: String(now.smallEndIn), large: now.largeEndIn === null ? '' : String(now.largeEndIn), length: String(now.lengthFt) });
  const [problem, setProblem] = useState<string>();
  const take = (): void => {
    const read = readMeasures(typed);
    if (typeof read === 'string') return setProblem(read);
    setProblem(undefined);
    add({ kind: 'measure', id: crypto.randomUUID(), logId: log.id, ...read });
  };
  return (
    <details>
      <summary className={summaryClass}>Measure {log.label} again</summary>
      <div className="grid gap-3 pb-3">
        <p>Now {log.size}: {log.netBoardFeet.internationalQuarter} bf by International ¼{log.waits.length > 0 ? ' as listed' : ''}.</p>
        <MeasureFields id="again" {...{ typed, problem }} onType={setTyped} />
        <p><button type="button" className={join(buttonKinds.outlined, gloveSize)} onClick={take}>Take these measures</button></p>
      </div>
    </details>
  );
}

/** A log that is not on the listing. The sawyer may decline it by not entering it; the landowner accepts it before it is sawn. */
export function AddLog({ species, add }: { readonly species: string; readonly add: Add }): ReactElement {
  const [typed, setTyped] = useState<Typed>({ small: '', large: '', length: '' });
  const [kind, setKind] = useState(species);
  const [problem, setProblem] = useState<string>();
  const take = (): void => {
    const read = readMeasures(typed);
    if (typeof read === 'string') return setProblem(read);
    setProblem(undefined);
    setTyped({ small: '', large: '', length: '' });
    add({ kind: 'addLog', id: crypto.randomUUID(), label: '', species: kind, ...read });
  };
  return (
    <details>
      <summary className={summaryClass}>A log that is not listed</summary>
      <div className="grid gap-3 pb-3">
        <p className="text-ink-soft">Only if you take it on. The landowner accepts it before it is sawn; its boards stand on a line of their own.</p>
        <Select name="added-species" label="Species" value={kind} options={speciesList.map(({ code, name }) => ({ value: code, label: name }))} onChange={(event) => setKind(event.target.value)} />
        <MeasureFields id="added" {...{ typed, problem }} onType={setTyped} />
        <p><button type="button" className={join(buttonKinds.outlined, gloveSize)} onClick={take}>Add the log</button></p>
      </div>
    </details>
  );
}

/** From the bed to the pith at both ends: which end to raise, and by how much. */
export function LevelThePith(): ReactElement {
  const [small, setSmall] = useState('');
  const [large, setLarge] = useState('');
  const [smallIn, largeIn] = [parseLengthIn(small), parseLengthIn(large)];
  const level = smallIn.ok && largeIn.ok && smallIn.value > 0 && largeIn.value > 0 ? levelPith(smallIn.value, largeIn.value) : null;
  return (
    <details>
      <summary className={summaryClass}>Level the pith</summary>
      <div className="grid gap-3 pb-3">
        <p className="text-ink-soft">Measure from the bed to the pith at both ends, for the first two faces. After that the flats lie on the bed.</p>
        <Field name="pith-small" label="Pith above the bed, small end" suffix="in" figure width="short" value={small} onChange={(event) => setSmall(event.target.value)} />
        <Field name="pith-large" label="Pith above the bed, large end" suffix="in" figure width="short" value={large} onChange={(event) => setLarge(event.target.value)} />
        <output className="figure block text-2xl font-bold">{level === null ? '' : level.raise === 'neither' ? 'Level: saw' : `Raise the ${level.raise} ${formatInches(level.byIn)}`}</output>
      </div>
    </details>
  );
}
