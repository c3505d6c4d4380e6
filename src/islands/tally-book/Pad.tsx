import { useId, useState, type ReactElement } from 'react';
import { join } from '~/components/classes.ts';
import { parseLengthIn } from '~/domain/measure.ts';

interface PadProps {
  readonly label: string;
  readonly values: readonly number[];
  readonly chosen: number;
  readonly name: (value: number) => string;
  readonly onChoose: (value: number) => void;
  /** Reads a typed value; null when it cannot be used. Left out, only the buttons are offered. */
  readonly read?: (text: string) => number | null;
}

const key = 'min-h-glove min-w-[56px] rounded border-2 border-ink px-1 font-mono text-xl font-bold';

/** One row of big keys: reached with a glove on, and a last key for any other value. */
export function Pad({ label, values, chosen, name, onChoose, read }: PadProps): ReactElement {
  const [other, setOther] = useState(false);
  const [text, setText] = useState('');
  const id = useId();
  const shown = values.includes(chosen) ? values : [...values, chosen].sort((a, b) => a - b);
  const take = (): void => {
    const value = read?.(text) ?? null;
    if (value === null) return;
    onChoose(value);
    setOther(false);
    setText('');
  };
  return (
    <fieldset className="mt-3">
      <legend className="text-sm">{label}</legend>
      <div className="mt-1 grid grid-cols-[repeat(auto-fill,minmax(60px,1fr))] gap-2">
        {shown.map((value) => (
          <button key={value} type="button" className={join(key, value === chosen ? 'bg-ink text-paper' : 'bg-sheet text-ink')} aria-pressed={value === chosen} onClick={() => onChoose(value)}>
            {name(value)}
          </button>
        ))}
        {read && <button type="button" className={join(key, 'bg-sheet')} aria-expanded={other} onClick={() => setOther(!other)} aria-label={`Another ${label.toLowerCase()}`}>…</button>}
      </div>
      {other && (
        <form className="mt-2 flex gap-2" onSubmit={(event) => (event.preventDefault(), take())}>
          <label className="sr-only" htmlFor={id}>{label}</label>
          <input id={id} className="min-h-glove w-full min-w-0 border-2 border-ink bg-sheet px-3 font-mono text-xl" value={text} inputMode="text" autoComplete="off" onChange={(event) => setText(event.target.value)} />
          <button type="submit" className="min-h-glove rounded border-2 border-crayon px-4 font-bold text-crayon">Take it</button>
        </form>
      )}
    </fieldset>
  );
}

/** Reads inches as a person types them, within a limit. */
export const readInches = (most: number) => (text: string): number | null => {
  const read = parseLengthIn(text);
  return read.ok && read.value > 0 && read.value <= most ? read.value : null;
};
