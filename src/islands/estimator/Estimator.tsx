import { useState, type ReactElement } from 'react';
import { estimateRange } from '~/domain/timber/estimate.ts';
import { eachLog, mostLogs, type LogGroup } from '~/domain/timber/logs-in-url.ts';
import { speciesOf } from '~/domain/timber/species.ts';
import { Button } from '~/islands/form/choices.tsx';
import { LogTable } from '~/islands/logs/LogTable.tsx';
import { countOf, sayFeet, sayInches, wholeNumber } from '~/islands/logs/words.ts';
import { Actions } from './Actions.tsx';
import { draftOf, emptyDraft, readDraft } from './draft.ts';
import { Loads } from './Loads.tsx';
import { LogFigures } from './LogFigures.tsx';
import { LogForm } from './LogForm.tsx';
import { LogPicture } from './LogPicture.tsx';
import { NearbyRules, useNearbyRules } from './NearbyRules.tsx';
import { PasteTable } from './PasteTable.tsx';
import { SettingFields } from './SettingFields.tsx';
import { StandingTree } from './StandingTree.tsx';
import { useEstimator, type Settings } from './use-estimator.ts';

const disclosure = 'min-h-target py-2.5 font-semibold text-crayon';

const many = (logs: readonly LogGroup[]): number => logs.reduce((sum, log) => sum + log.count, 0);

/** The log estimator. Every figure is worked out here, on the device: the page needs no network once it is loaded. */
export default function Estimator(): ReactElement {
  const { logs, draft, settings, units, trouble, ready, change } = useEstimator();
  const [tree, setTree] = useState(false);
  const [changing, setChanging] = useState<number | null>(null);
  const [removed, setRemoved] = useState<{ readonly log: LogGroup; readonly at: number } | null>(null);
  const [said, setSaid] = useState('');
  const nearby = useNearbyRules();
  const { log } = readDraft(draft, units);

  const add = (more: readonly LogGroup[]): void => {
    if (many(logs) + many(more) > mostLogs) return setSaid(`A list holds ${wholeNumber(mostLogs)} logs. Start another for the rest.`);
    change({ logs: [...logs, ...more] });
    setSaid(`Added ${countOf(many(more), 'log')}. ${countOf(many(logs) + many(more), 'log')} in the list.`);
    setRemoved(null);
  };
  const save = (one: LogGroup): void => {
    const next = { ...emptyDraft, species: draft.species, length: draft.length, overBark: draft.overBark };
    if (changing === null) add([one]);
    else change({ logs: logs.map((other, index) => (index === changing ? one : other)) });
    setChanging(null);
    change({ draft: next });
  };
  const remove = (index: number): void => {
    const gone = logs[index];
    if (!gone) return;
    change({ logs: logs.filter((_, at) => at !== index) });
    setChanging(null);
    setRemoved({ log: gone, at: index });
    setSaid('Removed one line.');
  };
  const restore = (): void => {
    if (removed) change({ logs: logs.toSpliced(removed.at, 0, removed.log) });
    setRemoved(null);
    setSaid('It is back.');
  };
  const edit = (index: number): void => {
    const chosen = logs[index];
    if (!chosen) return;
    setChanging(index);
    change({ draft: draftOf(chosen, units) });
    document.getElementById('one-log')?.scrollIntoView({ block: 'start' });
  };

  return (
    <div data-ready={ready} inert={!ready}>
      <div className="no-print mb-6 flex flex-wrap gap-x-6 border-b border-rule" role="group" aria-label="What to estimate">
        {[{ label: 'Logs on the ground', on: false }, { label: 'A standing tree', on: true }].map((tab) => (
          <button key={tab.label} type="button" aria-pressed={tree === tab.on} onClick={() => setTree(tab.on)} className={tree === tab.on ? 'min-h-target border-b-4 border-heartwood font-bold' : 'min-h-target border-b-4 border-transparent font-semibold text-crayon'}>{tab.label}</button>
        ))}
      </div>
      {trouble !== '' && <p role="alert" className="mb-6 border-l-4 border-heartwood pl-3">{trouble}</p>}
      {/* Both stay, so that looking at the other loses nothing typed. */}
      <div hidden={!tree}><StandingTree units={units} /></div>
      <div hidden={tree}>
        <section id="one-log" aria-labelledby="one-log-title" className="no-print grid gap-8 lg:grid-cols-[minmax(0,26rem)_minmax(0,1fr)]">
          <div>
            <h2 id="one-log-title" className="mb-4">{changing === null ? 'Measure a log' : `Change line ${changing + 1}`}</h2>
            <LogForm draft={draft} settings={settings} units={units} changing={changing !== null} onChange={(next) => change({ draft: next })} onAdd={save} onCancel={() => { setChanging(null); change({ draft: emptyDraft }); }} />
          </div>
          <div className="sheet self-start p-5 sm:p-7">
            <h2 className="mb-4">What is in this log</h2>
            {log ? (
              <div className="grid gap-6 md:grid-cols-[15rem_minmax(0,1fr)]">
                <LogPicture log={log} settings={settings} units={units} onDrawRot={(widthIn, heightIn) => change({ draft: { ...draft, defects: [...draft.defects, { kind: 'interiorRot', values: { widthIn: sayInches(widthIn, units), heightIn: sayInches(heightIn, units), lengthFt: sayFeet(log.lengthFt, units) } }] } })} onDrawWedge={(angleDeg) => change({ draft: { ...draft, defects: [...draft.defects, { kind: 'wedge', values: { angleDeg: String(angleDeg), lengthFt: sayFeet(log.lengthFt, units) } }] } })} />
                <LogFigures log={log} settings={settings} units={units} practice={nearby.practice} />
              </div>
            ) : (
              <p className="max-w-prose text-ink-soft">Choose a species and write the small end and the length: the log appears here, drawn to scale, with its board feet by three rules and its weight.</p>
            )}
            <NearbyRules {...nearby} />
          </div>
        </section>

        <p className="no-print mt-6" role="status">{said} {removed && <Button kind="quiet" onClick={restore}>Put {speciesOf(removed.log.species).name.toLowerCase()} back</Button>}</p>

        <section aria-labelledby="list-title" className="mt-8">
          <h2 id="list-title" className="mb-3">Your logs</h2>
          {logs.length === 0 ? <p className="max-w-prose text-ink-soft">No logs yet. Add the first one above, or paste a table.</p> : (
            <>
              <LogTable
                logs={logs} settings={settings} units={units} caption="Board feet are net of defects. Weights are green, with bark."
                action={(index) => (
                  <span className="flex gap-4">
                    <Button kind="quiet" aria-label={`Change line ${index + 1}`} onClick={() => edit(index)}>Change</Button>
                    <Button kind="quiet" aria-label={`Remove line ${index + 1}`} onClick={() => remove(index)}>Remove</Button>
                  </span>
                )}
              />
              <RangeOfList logs={logs} settings={settings} />
              <div className="mt-5"><Actions logs={logs} settings={settings} units={units} /></div>
              <details className="no-print mt-4 border-t border-rule"><summary className={disclosure}>Trips and lifting</summary><Loads logs={logs} units={units} /></details>
            </>
          )}
          <details className="no-print border-t border-rule"><summary className={disclosure}>Paste or open a table of logs</summary><PasteTable onAdd={add} /></details>
          <details className="no-print border-y border-rule"><summary className={disclosure}>Units and scaling practice</summary><div className="py-3"><SettingFields settings={settings} units={units} onChange={change} /></div></details>
        </section>
      </div>
    </div>
  );
}

function RangeOfList({ logs, settings }: { readonly logs: readonly LogGroup[]; readonly settings: Settings }): ReactElement {
  const { low, high } = estimateRange({ ...settings, logs: eachLog(logs) }, 'landowner');
  return (
    <p className="mt-3 max-w-prose text-sm text-ink-soft">
      Measured by a landowner the whole is between <span className="figure">{wholeNumber(low.netBoardFeet.internationalQuarter)}</span> and <span className="figure">{wholeNumber(high.netBoardFeet.internationalQuarter)}</span> bf International ¼
      (<span className="figure">{wholeNumber(low.netBoardFeet.doyle)}</span>–<span className="figure">{wholeNumber(high.netBoardFeet.doyle)}</span> Doyle): every diameter an inch less to half an inch more. Sawyers name the rule they quote by; ask before you compare.
    </p>
  );
}
