import type { ReactElement } from 'react';
import { estimateLog, measuringErrorIn, withDiametersChanged } from '~/domain/timber/estimate.ts';
import { cubicMetres } from '~/domain/timber/cubic.ts';
import { logRuleNames, whyRulesDiffer, type LogRule } from '~/domain/timber/log-rules.ts';
import type { LogGroup } from '~/domain/timber/logs-in-url.ts';
import type { ScaleSettings } from '~/domain/timber/log-scale.ts';
import { speciesOf } from '~/domain/timber/species.ts';
import { largestEndOutsideBark, trimOf } from '~/domain/timber/taper-and-bark.ts';
import { greenWeightRange, greenWeightWithBark } from '~/domain/timber/weight.ts';
import { workingsOf, type Working } from '~/domain/timber/workings.ts';
import type { QuotingPractice } from '~/schemas/quoting-practice.ts';
import { RuleNote } from './NearbyRules.tsx';
import { sayInches, sayWeight, twoDecimals, wholeNumber, type Units } from '~/islands/logs/words.ts';

interface LogFiguresProps {
  readonly log: LogGroup;
  readonly settings: ScaleSettings;
  readonly units: Units;
  /** What sawyers near the asker charge by, once asked. */
  readonly practice: QuotingPractice | null;
}

const rules: readonly LogRule[] = ['internationalQuarter', 'scribnerDecimalC', 'doyle'];

function trimWords(lengthFt: number): string {
  const trim = trimOf(lengthFt);
  if (trim.enough) return `${twoDecimals(trim.trimIn).replace(/\.?0+$/, '')} in of trim: enough for clean ${trim.nominalFt}-ft boards.`;
  return `${trim.trimIn === 0 ? 'No trim' : `Only ${twoDecimals(trim.trimIn).replace(/\.?0+$/, '')} in of trim`}: ends check and saws wander, so count on clean ${trim.cleanFt}-ft boards, not ${trim.nominalFt}. Leave 4 to 6 in over.`;
}

/** Formula, numbers and source of every figure of a log. */
export function Workings({ workings }: { readonly workings: readonly Working[] }): ReactElement {
  return (
    <dl className="mt-2 text-sm">
      {workings.map((working, index) => (
        <div key={index} className="border-b border-rule py-2">
          <dt className="font-bold">{working.figure}</dt>
          <dd>{working.formula}</dd>
          <dd className="figure">{working.numbers}</dd>
          <dd className="text-ink-soft">{working.source}</dd>
        </div>
      ))}
    </dl>
  );
}

/** What is in one log: the three rules side by side with their range, weight, cubic content, and how each is worked out. */
export function LogFigures({ log, settings, units, practice }: LogFiguresProps): ReactElement {
  const species = speciesOf(log.species);
  const estimate = estimateLog(log, settings);
  const { less, more } = measuringErrorIn.landowner;
  const low = estimateLog(withDiametersChanged(log, -less), settings);
  const high = estimateLog(withDiametersChanged(log, more), settings);
  const weight = greenWeightRange(log, species);
  const hasDefects = (log.defects?.length ?? 0) > 0;
  return (
    <div>
      <table className="ruled">
        <caption>One log of {species.name.toLowerCase()}. The range is for a tape read an inch high to half an inch low.</caption>
        <thead><tr><th scope="col">Rule</th>{hasDefects && <th scope="col" className="num">Gross</th>}<th scope="col" className="num">{hasDefects ? 'Net, bf' : 'Scale, bf'}</th><th scope="col" className="num">Range</th></tr></thead>
        <tbody>
          {rules.map((rule) => (
            <tr key={rule}>
              <th scope="row">{logRuleNames[rule]}<RuleNote rule={rule} practice={practice} /></th>
              {hasDefects && <td className="num">{wholeNumber(estimate.boardFeet[rule])}</td>}
              <td className="num font-bold" data-testid={rule}>{wholeNumber(estimate.netBoardFeet[rule])}</td>
              <td className="num">{wholeNumber(low.netBoardFeet[rule])}–{wholeNumber(high.netBoardFeet[rule])}</td>
            </tr>
          ))}
        </tbody>
      </table>
      <p className="mt-2 text-sm text-ink-soft">{whyRulesDiffer}</p>
      <dl className="mt-3">
        <Line term="Green weight, with bark" value={sayWeight(greenWeightWithBark(log, species), units)} note={`${sayWeight(weight.lowLb, units)} to ${sayWeight(weight.highLb, units)}`} />
        <Line term="Cubic content (Newton)" value={`${twoDecimals(estimate.cubicFeet.newton)} ft³`} note={`${cubicMetres(estimate.cubicFeet.newton).toFixed(3)} m³`} />
        <Line term="Largest end, over the bark" value={sayInches(Math.round(largestEndOutsideBark(log, species) * 16) / 16, units)} note="what the mill must take" />
      </dl>
      <p className="mt-2 text-sm">{trimWords(log.lengthFt)}</p>
      <details className="mt-3">
        <summary className="min-h-target py-2.5 font-semibold text-crayon">How this is worked out</summary>
        <Workings workings={workingsOf(log, settings)} />
      </details>
    </div>
  );
}

function Line({ term, value, note }: { readonly term: string; readonly value: string; readonly note: string }): ReactElement {
  return (
    <div className="grid grid-cols-[minmax(0,1fr)_auto] items-baseline gap-x-4 border-b border-rule py-2">
      <dt>{term}<span className="block text-sm text-ink-soft">{note}</span></dt>
      <dd className="figure text-right font-bold">{value}</dd>
    </div>
  );
}
