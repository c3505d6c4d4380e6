import type { ReactElement } from 'react';
import { buttonKinds, gloveSize, join } from '~/components/classes.ts';
import { formatFeet, formatFraction } from '~/domain/measure.ts';
import { cutKindWords, heightWords, turnWords, quarterWords } from '~/domain/sawing/cut-words.ts';
import { leftAfter } from '~/domain/sawing/cut-lines.ts';
import { measuresSaid, type Measures } from '~/domain/trade/day-logs.ts';
import type { KeptSheet } from '~/islands/day/store.ts';
import { LogEnd } from '~/islands/drawing/LogEnd.tsx';
import type { CutOfSheet, LogOfSheet } from '~/schemas/cut-sheet.ts';
import type { TallyLog } from '~/schemas/tally-log.ts';
import { summaryClass } from './Beside.tsx';

const same = (one: Measures, other: Measures): boolean => one.smallEndIn === other.smallEndIn && one.largeEndIn === other.largeEndIn && one.lengthFt === other.lengthFt;

interface CutSheetProps {
  readonly sheet: KeptSheet | null;
  readonly log: TallyLog;
  readonly goTo: (logId: string, cut: number) => void;
}

/** The cut sheet of one log beside the mill: the drawing, the pith, and one cut at a time. Kept on the phone. */
export function CutSheet({ sheet, log, goTo }: CutSheetProps): ReactElement {
  const planned = sheet?.logs.find(({ logId }) => logId === log.id);
  const boards = planned?.boards.length ?? 0;
  return (
    <details className="mt-3">
      <summary className={summaryClass}>Cut sheet · {planned ? `${boards} ${boards === 1 ? 'board' : 'boards'}, ${planned.cuts.length} cuts` : 'none for this log'}</summary>
      {!sheet && <p className="pb-3">It is kept here once this page has been open with signal.</p>}
      {sheet && !planned && <p className="pb-3">{log.label} is not on the sheet that this phone keeps; it is planned by itself when signal returns. Until then saw it as it shows.</p>}
      {planned && <Planned {...{ planned, log, goTo }} millName={sheet?.millName ?? ''} at={Math.min(sheet?.cutAt[log.id] ?? 0, Math.max(0, planned.cuts.length - 1))} />}
    </details>
  );
}

function Planned({ planned, log, millName, at, goTo }: { readonly planned: LogOfSheet; readonly log: TallyLog; readonly millName: string; readonly at: number; readonly goTo: CutSheetProps['goTo'] }): ReactElement {
  const { core, cuts } = planned;
  const cut = cuts[at];
  return (
    <div className="pb-4">
      {!same(planned.plannedAs, log.measured ?? log.listed) && <p className="mb-2 border-l-4 border-amber bg-sheet px-3 py-2 font-semibold" role="note">Planned for {measuresSaid(planned.plannedAs)}. {log.label} was measured again since: it is planned anew when signal returns. Until then keep the order, and set the heights by the log.</p>}
      <p>{planned.use}. On {millName}. What the saw opens counts more than this sheet.</p>
      {core && cut && (
        <>
          <dl className="mt-2 border-t border-rule">
            <div className="flex justify-between gap-3 border-b border-rule py-1"><dt>Toe board under the small end</dt><dd className="figure font-bold">{heightWords(planned.raiseSmallEndIn)}</dd></div>
            <div className="flex justify-between gap-3 border-b border-rule py-1"><dt>Pith over the bed, both ends</dt><dd className="figure font-bold">{heightWords(planned.pithHeightIn)}</dd></div>
          </dl>
          {quarterWords(cuts, core.largeEndIn) && <p className="mt-2">{quarterWords(cuts, core.largeEndIn)}</p>}
          <OneCut {...{ planned, cut, at }} name={log.label} onGo={(to) => goTo(planned.logId, to)} />
          <AllCuts cuts={cuts} at={at} name={log.label} />
        </>
      )}
      {planned.sizes.length > 0 && (
        <table className="ruled mt-3 w-full">
          <caption className="sr-only">Boards planned in {log.label}, green sizes</caption>
          <thead><tr><th scope="col">Green size</th><th scope="col" className="num">Boards</th></tr></thead>
          <tbody>{planned.sizes.map((size) => <tr key={`${size.thicknessIn} ${size.widthIn} ${size.lengthFt}`}><th scope="row" className="figure font-normal">{formatFraction(size.thicknessIn)} × {formatFraction(size.widthIn)} in × {formatFeet(size.lengthFt)}</th><td className="num">{size.count}</td></tr>)}</tbody>
        </table>
      )}
    </div>
  );
}

/** One cut: the log as it lies for it, where the saw goes, and the way to the next. */
function OneCut({ planned, cut, at, name, onGo }: { readonly planned: LogOfSheet; readonly cut: CutOfSheet; readonly at: number; readonly name: string; readonly onGo: (to: number) => void }): ReactElement {
  const { core, boards, cuts } = planned;
  const made = cuts.slice(0, at).flatMap(({ line }) => line ?? []);
  const shown = cut.line ? { line: cut.line, left: leftAfter(made) } : undefined;
  return (
    <div className="mt-3">
      {core && <div className="mx-auto max-w-[20rem]"><LogEnd smallEndIn={core.largeEndIn} ringIn={shown ? undefined : core.smallEndIn} heartDefectIn={core.heartDefectIn ?? undefined} seed={planned.logId} boards={boards} cut={shown} sizePx={320} label={`${name} at its large end${shown ? `, as it lies for cut ${cut.order}; the thick line is the saw` : ''}, ${boards.length} boards`} /></div>}
      <div className="mt-2 border-2 border-ink bg-sheet px-3 py-2" role="status" data-testid="this-cut">
        <p className="flex flex-wrap justify-between gap-x-3"><span className="font-bold">Cut {cut.order} of {cuts.length}</span><span className={cut.turnByDeg === 0 ? '' : 'bg-ink px-2 font-bold text-paper'}>{turnWords(cut.turnByDeg)}</span></p>
        <p className="flex flex-wrap items-baseline justify-between gap-x-3"><span>Saw at</span><span className="figure text-3xl font-bold">{heightWords(cut.heightIn)}</span></p>
        <p>{cutKindWords[cut.kind]}{cut.onBark ? ', over the bark' : cuts.some(({ kind }) => kind === 'quarter') ? ', the quarter on its blocks' : ', from the flat on the bed'}</p>
      </div>
      <div className="mt-2 flex gap-2">
        <button type="button" className={join(buttonKinds.outlined, gloveSize, 'flex-1')} disabled={at === 0} onClick={() => onGo(at - 1)}>Back</button>
        <button type="button" className={join(buttonKinds.primary, gloveSize, 'flex-[2]')} disabled={at === cuts.length - 1} onClick={() => onGo(at + 1)}>Cut done · next</button>
      </div>
    </div>
  );
}

function AllCuts({ cuts, at, name }: { readonly cuts: readonly CutOfSheet[]; readonly at: number; readonly name: string }): ReactElement {
  return (
    <details>
      <summary className={summaryClass}>All cuts in order</summary>
      <table className="ruled w-full">
        <caption className="sr-only">Cuts of {name} in order</caption>
        <thead><tr><th scope="col" className="num">Cut</th><th scope="col">Turn, and what</th><th scope="col" className="num">Saw at</th></tr></thead>
        <tbody>
          {cuts.map((cut, index) => (
            <tr key={cut.order} aria-current={index === at ? 'step' : undefined} className={index === at ? 'font-bold' : ''}>
              <th scope="row" className="num">{cut.order}</th>
              <td>{turnWords(cut.turnByDeg)}; {cutKindWords[cut.kind]}</td>
              <td className="num">{heightWords(cut.heightIn)}</td>
            </tr>
          ))}
        </tbody>
      </table>
    </details>
  );
}
