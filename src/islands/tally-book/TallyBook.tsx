import { useState, type ReactElement } from 'react';
import { buttonKinds, gloveSize, join } from '~/components/classes.ts';
import { formatFraction } from '~/domain/measure.ts';
import { formatCents } from '~/domain/money.ts';
import { tallyRuleOf } from '~/domain/trade/tally-count.ts';
import { minutesOf, minutesOnClock } from '~/domain/trade/clock.ts';
import { minutesSaid } from '~/domain/trade/running-clock.ts';
import { thicknessName } from '~/domain/timber/tally.ts';
import type { TallyEntry } from '~/schemas/tally-entries.ts';
import type { TallyView } from '~/schemas/tally-view.ts';
import { useCutSheet } from '~/islands/day/cut-sheets.ts';
import { SavedBadge, SendingTrouble } from '~/islands/day/SavedLine.tsx';
import { CullLogs, Extras, Hours, MetalHits } from './Beside.tsx';
import { CutSheet } from './CutSheet.tsx';
import { boardEntry, bySize, countView, oneBoard, stillWanted } from './count.ts';
import { Pad, readInches } from './Pad.tsx';
import { BoardPhotographs, usePhotographs } from './Photographs.tsx';
import { RainStop } from './RainStop.tsx';
import { sizeName } from './size-name.ts';
import { ChangedEstimate, Stops } from './Stops.tsx';
import { AddLog, LevelThePith, MeasureAgain } from './ThisLog.tsx';
import { Voice } from './Voice.tsx';
import { useClock } from './use-clock.ts';
import { useTallyQueue, type TallyQueue } from './use-tally-queue.ts';

interface Props {
  readonly view: TallyView;
  readonly accountId: string;
  /** Whether `view` has just come from the server; otherwise it is the phone's own copy. */
  readonly fresh: boolean;
}

const quarters = [1, 1.25, 1.5, 2];
const dimension = [1, 2, 4, 6];
const readFeet = (text: string): number | null => {
  const feet = Number(text);
  return feet >= 1 && feet <= 40 ? feet : null;
};
/** The tally book with a queue of its own. */
export function TallyBook({ view, accountId, fresh }: Props): ReactElement {
  return <TallyPad queue={useTallyQueue(view, accountId, fresh)} />;
}

/** The tally book: big keys for the next board, the sizes so far, and the money against the hold. Counts with or without signal. */
export function TallyPad({ queue }: { readonly queue: TallyQueue }): ReactElement {
  const { view, add } = queue;
  const photographs = usePhotographs(queue.accountId, view.booking);
  const { sheet, goTo: goToCut } = useCutSheet(queue.accountId, view.booking);
  const hardwood = tallyRuleOf(view.terms) === 'hardwood';
  const [logAt, setLogAt] = useState(0);
  const log = view.logs[logAt] ?? view.logs[0];
  const [kind, setKind] = useState<'board' | 'slab' | 'out-of-size'>('board');
  const [thicknessIn, setThickness] = useState(hardwood ? 1 : 2);
  const [widthIn, setWidth] = useState(8);
  const [secondWidthIn, setSecondWidth] = useState(8);
  const [lengthFt, setLength] = useState(log?.wholeFt ?? 8);
  const [several, setSeveral] = useState('1');
  const clock = useClock(queue);
  const { running, soFar } = clock;
  // The clock that runs counts against the hold too, before it is entered.
  const counted = countView(running && soFar ? { ...view, clock: [...view.clock, { id: 'running', activity: running.activity, ...soFar }] } : view);
  const spent = [...view.clock, ...(running && soFar ? [{ activity: running.activity, ...soFar }] : [])].map((one) => ({ ...one, startsAt: new Date(one.startsAt), endsAt: new Date(one.endsAt) }));
  const { basis } = view.terms.card;
  const onClock = basis.kind === 'hourly' ? minutesOnClock(spent, basis.from) : minutesOf(spent, 'sawing');
  const next = oneBoard(view, thicknessIn, widthIn, lengthFt);
  const lengths = [...new Set([log?.wholeFt ?? 8, 8, 10, 12, 16])].sort((a, b) => a - b);
  const lastBoard = view.boards.at(-1);
  const wanted = stillWanted(view).filter(({ left }) => left > 0);
  const count = Math.max(1, Math.min(500, Math.floor(Number(several) || 1)));

  const addBoards = (size: { thicknessIn: number; widthIn: number; lengthFt: number }, howMany: number): void => {
    add(boardEntry(size, { logId: log?.id ?? null, kind, secondWidthIn, count: howMany }));
    setSeveral('1');
  };
  const goTo = (index: number): void => {
    setLogAt(index);
    const to = view.logs[index];
    if (to) setLength(to.wholeFt);
  };

  return (
    <div className="mx-auto max-w-[34rem]" data-outdoors>
      <div className="sticky top-0 z-10 flex flex-wrap items-center justify-between gap-x-3 gap-y-1 bg-ink px-4 py-3 text-paper">
        <p className="font-slab text-lg font-bold">Tally · {log?.label ?? 'log'} of {view.logs.length}</p>
        <SavedBadge queue={queue} />
      </div>
      <SendingTrouble queue={queue} />

      <div className="flex flex-wrap items-end justify-between gap-x-4 px-4 pt-4">
        <div className="text-sm"><p>Sawn so far</p><p className="figure text-base">{formatCents(counted.job.costCents)} <span className="text-ink-soft">of {formatCents(counted.limitCents)} {counted.limitCents > view.heldCents ? 'allowed' : 'held'}</span></p><p>{basis.kind === 'hourly' ? 'On the clock' : 'Time sawing'} <span className="figure text-base">{minutesSaid(onClock)}</span>{running && <span className="text-ink-soft"> · clock running</span>}</p></div>
        <p className="figure text-4xl font-bold" data-testid="sawn-so-far">{Number(counted.boardFeet.toFixed(2)).toLocaleString('en-US')} bf</p>
      </div>
      <div className="px-4"><Stops {...{ view, counted, add }} logs={log ? [log] : []} /><ChangedEstimate view={view} /></div>

      <div className="px-4">
        <fieldset className="mt-4">
          <legend className="text-sm">Log</legend>
          <select className="mt-1 min-h-glove w-full border-2 border-ink bg-sheet px-3 text-lg" aria-label="Log" value={logAt} onChange={(event) => goTo(Number(event.target.value))}>
            {view.logs.map((one, index) => <option key={one.id} value={index}>{one.label}: {one.speciesName}, {one.size}</option>)}
          </select>
        </fieldset>
        {log && <CutSheet sheet={sheet} log={log} goTo={goToCut} />}
        {wanted.length > 0 && (
          <fieldset className="mt-3">
            <legend className="text-sm">Still wanted for the cut list</legend>
            <div className="mt-1 flex flex-wrap gap-2">
              {wanted.map((piece) => (
                <button key={`${piece.label} ${sizeName(view, piece)}`} type="button" className="min-h-glove rounded border-2 border-moss bg-sheet px-3 font-mono font-bold" onClick={() => addBoards(piece, 1)}>
                  {sizeName(view, piece)} <span className="font-normal">· {piece.left} left</span>
                </button>
              ))}
            </div>
          </fieldset>
        )}
        <fieldset className="mt-3">
          <legend className="text-sm">What it is</legend>
          <div className="mt-1 flex flex-wrap gap-2">
            {([['board', 'Board'], ['slab', 'Slab'], ['out-of-size', 'Out of size']] as const).map(([value, name]) => (
              <button key={value} type="button" aria-pressed={kind === value} className={join('min-h-glove flex-1 rounded border-2 border-ink px-2 font-bold', kind === value ? 'bg-ink text-paper' : 'bg-sheet')} onClick={() => setKind(value)}>{name}</button>
            ))}
          </div>
        </fieldset>
        <Pad label={hardwood ? 'Thickness, quarters' : 'Thickness, in'} values={hardwood ? quarters : dimension} chosen={thicknessIn} name={(value) => thicknessName(value, hardwood ? 'hardwood' : 'softwood').replace(' in', '')} onChoose={setThickness} read={readInches(24)} />
        <Pad label={kind === 'slab' ? 'One face at mid-length, in' : 'Width, in'} values={hardwood ? [4, 5, 6, 7, 8, 9, 10, 11, 12] : [3, 4, 6, 8, 10, 12]} chosen={widthIn} name={formatFraction} onChoose={setWidth} read={readInches(60)} />
        {kind === 'slab' && <Pad label="The other face at mid-length, in" values={[6, 8, 10, 12, 16]} chosen={secondWidthIn} name={formatFraction} onChoose={setSecondWidth} read={readInches(60)} />}
        <Pad label="Length, ft" values={lengths} chosen={lengthFt} name={formatFraction} onChoose={setLength} read={readFeet} />

        <button type="button" className="mt-4 flex min-h-[72px] w-full flex-wrap items-center justify-center gap-x-3 rounded bg-crayon px-4 py-2 text-xl font-bold leading-tight text-paper hover:bg-ink" onClick={() => addBoards({ thicknessIn, widthIn, lengthFt }, count)}>
          <span>Add {count > 1 ? `${count} ` : ''}{kind === 'board' ? (count > 1 ? 'boards' : 'board') : kind === 'slab' ? 'slab' : 'out of size'}</span>
          {kind === 'board' && <span className="figure">{next.surfaceMeasure !== null && `SM ${next.surfaceMeasure} · `}{Number(next.boardFeet.toFixed(2))} bf</span>}
        </button>
        <div className="mt-2 flex flex-wrap items-center justify-between gap-x-4">
          <button type="button" className={join(buttonKinds.quiet, 'min-h-glove')} disabled={!lastBoard} onClick={() => lastBoard && add({ kind: 'remove', id: lastBoard.id })}>Undo last</button>
          <label className="flex items-center gap-2">How many<input className="min-h-glove w-20 border-2 border-ink bg-sheet px-2 font-mono text-xl" type="number" min={1} max={500} value={several} onChange={(event) => setSeveral(event.target.value)} /></label>
        </div>

        <Voice name={(boards) => sizeName(view, boards)} onAdd={({ count: howMany, ...size }) => addBoards(size, howMany)} />

        <SizeTable view={view} add={add} />
        {logAt < view.logs.length - 1 && <button type="button" className={join(buttonKinds.outlined, gloveSize, 'mt-4 w-full')} onClick={() => goTo(logAt + 1)}>{log?.label} done · next log</button>}

        <div className="mt-6">
          {log && <MeasureAgain key={`${log.id} ${log.size}`} {...{ log, add }} />}
          <LevelThePith />
          <MetalHits {...{ view, add, photographs }} logId={log?.id ?? null} />
          <BoardPhotographs {...{ view, photographs }} />
          <CullLogs {...{ view, add }} logId={log?.id ?? null} />
          <Hours {...{ view, add, clock }} logId={null} />
          <Extras {...{ view, add }} logId={null} />
          <AddLog species={view.logs[0]?.species ?? 'white-oak'} add={add} />
          <RainStop {...{ view, add }} costCents={counted.job.costCents} />
        </div>
      </div>
    </div>
  );
}

function SizeTable({ view, add }: { readonly view: TallyView; readonly add: (...entries: TallyEntry[]) => void }): ReactElement {
  const rows = bySize(view, view.boards);
  const takeOne = (key: string): void => {
    const last = view.boards.findLast((board) => [board.kind, board.thicknessIn, board.widthIn, board.lengthFt].join(' ') === key);
    if (last) add({ kind: 'remove', id: last.id });
  };
  if (rows.length === 0) return <p className="mt-4 text-ink-soft">No boards yet. Choose a size and add the first.</p>;
  return (
    <div className="sizes mt-4"><table className="ruled w-full">
      <caption className="sr-only">Boards so far by size</caption>
      <thead><tr><th scope="col">Size</th><th scope="col" className="num">Boards</th><th scope="col" className="num">bf</th><th scope="col"><span className="sr-only">Correct</span></th></tr></thead>
      <tbody>
        {rows.map((row) => (
          <tr key={row.key} className="[&>*]:!align-middle">
            <th scope="row" className="figure font-normal">{sizeName(view, row)}{row.kind === 'board' ? '' : ` (${row.kind === 'slab' ? 'slab' : 'out of size'})`}</th>
            <td className="num">{row.count}</td>
            <td className="num">{row.kind === 'board' ? Number(row.boardFeet.toFixed(2)) : '·'}</td>
            <td className="text-right"><button type="button" className="px-2 font-semibold text-crayon underline" onClick={() => takeOne(row.key)}>Take back<span className="sr-only"> the last {sizeName(view, row)}</span></button></td>
          </tr>
        ))}
      </tbody>
    </table></div>
  );
}
