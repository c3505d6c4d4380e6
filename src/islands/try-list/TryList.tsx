import { useId, useState, type SubmitEvent, type ReactElement } from 'react';
import { pieceKinds, sizings } from '~/domain/listing/answers.ts';
import { blankPiece, isBlankPiece, MOST_PIECES, type PieceTyped } from '~/domain/listing/draft.ts';
import { readPieceRow } from '~/domain/listing/rows.ts';
import type { MillAtWork } from '~/domain/sawing/expected.ts';
import type { Pattern } from '~/domain/sawing/saw-plan.ts';
import { type SawnPiece, sawnPieces } from '~/domain/sawing/sawn-piece.ts';
import type { FlawedLog } from '~/domain/sawing/sound-core.ts';
import { Button } from '~/islands/form/choices.tsx';
import { Field, Select } from '~/islands/form/fields.tsx';
import { countOf } from '~/islands/logs/words.ts';
import { TriedList } from './TriedList.tsx';
import { usePlanner } from './use-planner.ts';

export interface TryListProps {
  readonly logs: readonly (FlawedLog & { readonly id: string; readonly position: number })[];
  readonly mill: MillAtWork;
  readonly millName: string;
  readonly pattern: Pattern | 'best';
  /** The list to begin with, as its owner wrote it. */
  readonly pieces: readonly PieceTyped[];
}

type Row = { readonly key: number; readonly typed: PieceTyped };

/** A cut list of the reader's own on the same logs and mill, worked out on the reader's device; nothing of it is kept. */
export default function TryList({ logs, mill, millName, pattern, pieces }: TryListProps): ReactElement {
  const [rows, setRows] = useState<readonly Row[]>((pieces.length > 0 ? pieces : [blankPiece()]).map((typed, key) => ({ key, typed })));
  const [next, setNext] = useState(pieces.length + 1);
  const [tried, setTried] = useState(false);
  const { state, ask, cancel } = usePlanner();
  const [asked, setAsked] = useState<readonly SawnPiece[]>([]);
  const titleId = useId();
  const read = rows.filter(({ typed }) => !isBlankPiece(typed)).map(({ key, typed }) => ({ key, read: readPieceRow(typed) }));
  const wrong = (key: number, field: keyof PieceTyped): string | undefined => {
    const found = tried ? read.find((row) => row.key === key)?.read : undefined;
    return found && !found.ok ? found.problems.find(({ path }) => path === field)?.message : undefined;
  };
  const change = (key: number, part: Partial<PieceTyped>): void => setRows(rows.map((row) => (row.key === key ? { ...row, typed: { ...row.typed, ...part } } : row)));

  const submit = (event: SubmitEvent): void => {
    event.preventDefault();
    setTried(true);
    const sound = read.flatMap((row) => (row.read.ok ? [row.read.value] : []));
    if (read.length === 0 || sound.length < read.length) return;
    const sawn = sawnPieces(sound);
    setAsked(sawn);
    const { kerfIn, widestCutIn, widestBoardIn, longestFt } = mill;
    ask({ logs, mill: { kerfIn, widestCutIn, widestBoardIn, longestFt }, pattern, pieces: sawn.map(({ id, green, lengthFt, count, kind }) => ({ id, ...green, lengthFt, count, kind })) });
  };

  const field = (row: Row, name: 'label' | 'thickness' | 'width' | 'length' | 'count', label: string, placeholder: string): ReactElement => (
    <Field name={`try-${row.key}-${name}`} label={label} figure={name !== 'label'} autoComplete="off" inputMode={name === 'count' ? 'numeric' : 'text'} placeholder={placeholder} value={row.typed[name]} error={wrong(row.key, name)} onChange={(event) => change(row.key, { [name]: event.target.value })} />
  );
  const choice = (row: Row, name: 'sizing' | 'kind', label: string, options: typeof sizings | typeof pieceKinds): ReactElement => (
    <Select name={`try-${row.key}-${name}`} label={label} options={options} value={row.typed[name]} onChange={(event) => change(row.key, { [name]: event.target.value })} />
  );

  return (
    <section aria-labelledby={titleId} className="no-print">
      <h2 id={titleId}>Try a list of your own</h2>
      <p className="mt-1 max-w-prose text-ink-soft">On these {countOf(logs.length, 'log')}. Mill: {millName}. It is worked out on your device and changes nothing here.</p>
      <form onSubmit={submit} noValidate className="mt-3">
        {rows.map((row, index) => (
          <fieldset key={row.key} className="min-w-0 border-b border-rule py-3">
            <legend className="sr-only">Size {index + 1}</legend>
            <div className="grid grid-cols-2 items-end gap-3 sm:grid-cols-4 lg:grid-cols-[1.6fr_1fr_1fr_1fr_0.8fr_1.2fr_1.4fr_auto]">
              {field(row, 'label', 'For', 'Shelves')}
              {field(row, 'thickness', 'Thickness', '4/4')}
              {field(row, 'width', 'Width', '8 in')}
              {field(row, 'length', 'Length', '8 ft')}
              {field(row, 'count', 'How many', '6')}
              {choice(row, 'sizing', 'Sizing', sizings)}
              {choice(row, 'kind', 'Kind', pieceKinds)}
              <Button kind="quiet" aria-label={`Remove size ${index + 1}`} onClick={() => setRows(rows.filter(({ key }) => key !== row.key))}>Remove</Button>
            </div>
          </fieldset>
        ))}
        {tried && read.length === 0 && <p className="mt-3 border-l-4 border-heartwood pl-2 font-semibold text-heartwood" role="alert">Write at least one size.</p>}
        <div className="mt-4 flex flex-wrap items-center gap-4">
          <Button type="submit" disabled={state.at === 'working'}>Work it out</Button>
          {state.at === 'working' && <Button kind="outlined" onClick={cancel}>Cancel</Button>}
          {rows.length < MOST_PIECES && <Button kind="quiet" onClick={() => { setRows([...rows, { key: next, typed: blankPiece() }]); setNext(next + 1); }}>Add a size</Button>}
        </div>
      </form>
      <div className="mt-4" aria-live="polite">
        {state.at === 'working' && (
          <div className="max-w-form">
            <label htmlFor={`${titleId}-progress`}>{state.share === null ? 'Choosing a plan for each log' : 'Planning the logs'}</label>
            <progress id={`${titleId}-progress`} className="mt-1 block h-3 w-full accent-crayon" max={1} {...(state.share === null ? {} : { value: state.share })} />
          </div>
        )}
        {state.at === 'cancelled' && <p>Stopped. What you wrote is still here.</p>}
        {state.at === 'failed' && <p className="border-l-4 border-heartwood pl-3">This browser could not work it out. The listing’s own list above is worked out by us and does not need your browser.</p>}
        {state.at === 'done' && <TriedList plan={state.plan} pieces={asked} positions={new Map(logs.map(({ id, position }) => [id, position]))} />}
      </div>
    </section>
  );
}
